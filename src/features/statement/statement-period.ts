import type { StatementPeriod } from '../../api/statements.ts';
import { toDayInput } from '../../lib/local-time.ts';

const DAY = /^\d{4}-\d{2}-\d{2}$/;

/** The period as it stands in the address, so that a statement can be passed on as a link; what is no day is left out. */
export function readPeriod(search: URLSearchParams): StatementPeriod {
  const day = (name: string) => {
    const text = search.get(name) ?? '';
    return DAY.test(text) ? text : undefined;
  };
  return { from: day('from'), to: day('to') };
}

export function withPeriod(search: URLSearchParams, { from, to }: StatementPeriod): URLSearchParams {
  const next = new URLSearchParams(search);
  for (const [name, value] of Object.entries({ from, to })) {
    if (value) next.set(name, value);
    else next.delete(name);
  }
  return next;
}

export const PRESETS = ['thisMonth', 'lastMonth', 'lastYear'] as const;
export type Preset = (typeof PRESETS)[number];

/** The days of a usual period, on the device's calendar. */
export function presetPeriod(preset: Preset, now: Date): Required<StatementPeriod> {
  const [year, month] = [now.getFullYear(), now.getMonth()];
  switch (preset) {
    case 'thisMonth':
      return { from: toDayInput(new Date(year, month, 1)), to: toDayInput(now) };
    case 'lastMonth':
      return { from: toDayInput(new Date(year, month - 1, 1)), to: toDayInput(new Date(year, month, 0)) };
    case 'lastYear':
      return { from: toDayInput(new Date(year, month - 11, 1)), to: toDayInput(now) };
  }
}
