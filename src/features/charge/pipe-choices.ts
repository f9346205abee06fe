import { useMemo } from 'react';
import type { Preferences } from '../../../shared/session/session.schema.ts';
import { formatNumber, NBSP } from '../../lib/format.ts';
import { type Translate, useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import type { Choice } from '../../ui/field.tsx';
import { allTubes, sizesOfPipe } from './reference-tables.ts';

/** `1/4` of the inch series, by the nominal diameter in mm; null for a metric size. */
function inchName(odMm: number): string | null {
  const row = allTubes.find(
    (tube) =>
      tube.standard === 'ASTM B280' && /^[\d/-]+ in$/.test(tube.nominal) && sizesOfPipe.find(tube.odMm)?.odMm === odMm,
  );
  return row ? row.nominal.replace(' in', '') : null;
}

const series = sizesOfPipe.all.map(({ odMm }) => ({ odMm, inches: inchName(odMm) }));

/** Groups of a select. */
export type PipeChoices = readonly { label: string; choices: readonly Choice[] }[];

/** Every nominal liquid pipe as the person reads sizes: inches first where lengths are in feet. */
export function usePipeChoices(): PipeChoices {
  const t = useMessages();
  const { locale, length } = usePreferences();
  return useMemo(() => pipeChoices({ locale, length }, t), [locale, length, t]);
}

function pipeChoices({ locale, length }: Pick<Preferences, 'locale' | 'length'>, t: Translate): PipeChoices {
  const choice = ({ odMm, inches }: (typeof series)[number]): Choice => {
    const mm = `${formatNumber(locale, odMm, 2)}${NBSP}mm`;
    const label = inches === null ? mm : length === 'ft' ? `${inches}"${NBSP} ${mm}` : `${mm}${NBSP} ${inches}"`;
    return { value: String(odMm), label };
  };
  const inch = series.filter((size) => size.inches !== null).map(choice);
  const metric = series.filter((size) => size.inches === null).map(choice);
  return [
    { label: t('chargeScreen.inchSeries'), choices: inch },
    { label: t('chargeScreen.metricSeries'), choices: metric },
  ];
}

/** `1/4 in` or `6.35 mm`, for a line of text. */
export function pipeName(odMm: number, { locale, length }: Pick<Preferences, 'locale' | 'length'>): string {
  const inches = inchName(sizesOfPipe.find(odMm)?.odMm ?? odMm);
  return length === 'ft' && inches ? `${inches}${NBSP}in` : `${formatNumber(locale, odMm, 2)}${NBSP}mm`;
}
