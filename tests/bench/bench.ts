import type { ThrowawayPostgres } from '../support/throwaway-postgres.ts';

/**
 * What one bench measured. A bar is held by the ratio where there is a bare thing to compare with, measured in the same
 * run so that the computer's speed cancels out; otherwise by the value itself.
 */
export interface Figure {
  name: string;
  value: number;
  /** Unit of `value` and `against`, e.g. `entries/s`, `ms`, `bytes`. */
  unit: string;
  /** The bare thing's figure from the same run; null when the bar is absolute. */
  against: number | null;
  /** What the bare thing is, for the reader; not in the JSON line. */
  againstWhat?: string;
  bar: Bar;
}
export type Bar = { atLeast: number } | { atMost: number };

export interface BenchContext {
  /** A migrated PostgreSQL of this bench's own, fsync on as in production; `cloneTemplate` makes databases in it. */
  startPostgres(): Promise<ThrowawayPostgres>;
  /** Folder of the client as it is shipped. */
  clientFolder(): string;
  /** Progress for the person who waits; goes to the error output, so that the JSON lines stay alone. */
  say(line: string): void;
}

/** What each `tests/bench/<name>.bench.ts` exports as `bench`. One file may give several figures. */
export interface Bench {
  run(context: BenchContext): Promise<Figure | Figure[]>;
}

/** The line that `npm run bench` prints: these keys, in this order. */
export interface BenchLine {
  name: string;
  value: number;
  unit: string;
  against: number | null;
  ratio: number | null;
  bar: number;
  holds: boolean;
}

const toSixDigits = (value: number) => Number(value.toPrecision(6));

export function toLine({ name, value, unit, against, bar }: Figure): BenchLine {
  const ratio = against === null ? null : value / against;
  const judged = ratio ?? value;
  const holds = 'atLeast' in bar ? judged >= bar.atLeast : judged <= bar.atMost; // NaN holds neither
  return {
    name,
    value: toSixDigits(value),
    unit,
    against: against === null ? null : toSixDigits(against),
    ratio: ratio === null ? null : toSixDigits(ratio),
    bar: 'atLeast' in bar ? bar.atLeast : bar.atMost,
    holds,
  };
}

/** The same for a person: `posting: 812 entries/s against 1190 (bare pg), ratio 0.68, bar at least 0.25: holds`. */
export function toSentence(figure: Figure): string {
  const { value, unit, against, ratio, bar, holds } = toLine(figure);
  const compared = against === null ? '' : ` against ${against} (${figure.againstWhat ?? 'bare'}), ratio ${ratio}`;
  const direction = 'atLeast' in figure.bar ? 'at least' : 'at most';
  return `${figure.name}: ${value} ${unit}${compared}, bar ${direction} ${bar}: ${holds ? 'holds' : 'DOES NOT HOLD'}`;
}
