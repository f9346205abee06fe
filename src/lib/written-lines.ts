import { useMemo, useState } from 'react';
import type { ChargeResponse } from '../../shared/charge/charge.schema.ts';
import { type LineUnits, SI_LINES, writtenLines } from '../../shared/charge/written-line.ts';
import { formatNumber } from './format.ts';
import { useMessages } from './messages.ts';
import { usePreferences } from './preferences.ts';

interface WrittenLines {
  /** For each step the parts that equal one another; the last is its result. */
  lines: string[][];
  /** Whether the reader's units are others than m and g; then the lines can be had in both. */
  hasOther: boolean;
  inSi: boolean;
  turn: () => void;
}

/** The arithmetic in this person's units, or in m and g as it is kept. `typed`: units in which figures were typed. */
export function useWrittenLines(steps: ChargeResponse['steps'], typed: Partial<LineUnits> = {}): WrittenLines {
  const t = useMessages();
  const { locale, mass, length } = usePreferences();
  const [inSi, setInSi] = useState(false);
  const own = {
    length: typed.length ?? length,
    mass,
    rate: typed.rate ?? (mass === 'oz' || mass === 'lbOz' ? 'oz/ft' : 'g/m'),
  } as const;
  const hasOther = own.length !== 'm' || own.rate !== 'g/m' || mass === 'oz' || mass === 'lbOz';
  const units = inSi && hasOther ? SI_LINES : own;
  const lines = useMemo(
    () =>
      writtenLines(
        steps,
        { length: units.length, mass: units.mass, rate: units.rate },
        {
          number: (value, most, least) => formatNumber(locale, value, most, least),
          say: (key, params) => t(key, { ...params }),
        },
      ),
    [steps, units.length, units.mass, units.rate, locale, t],
  );
  return { lines, hasOther, inSi: inSi && hasOther, turn: () => setInSi(!inSi) };
}
