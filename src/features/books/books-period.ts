import { monthsLater } from '../../../shared/periods/month.ts';
import type { PeriodsResponse } from '../../../shared/periods/periods.schema.ts';
import type { BooksPeriod } from '../../api/books.ts';

const MONTH = /^\d{4}-(0[1-9]|1[0-2])$/;

/** Tables of the books under the picture, in the order of the page. */
export const TABLES = ['cylinders', 'people', 'suppliers', 'jobs', 'purchases', 'cost', 'places'] as const;
export type TableName = (typeof TABLES)[number];

/** The latest month that is over, else the one that runs; null: no entry yet. */
export const usualMonth = ({ items }: Pick<PeriodsResponse, 'items'>): string | null =>
  (items.find(({ state }) => state !== 'running') ?? items[0])?.month ?? null;

/** The year up to the usual month, or as much of it as there is. */
export function usualYear({ items }: Pick<PeriodsResponse, 'items'>, usual: string): Span {
  const first = items.at(-1)?.month ?? usual;
  return { from: [monthsLater(usual, -11), first].sort()[1] as string, to: usual };
}

interface Span {
  from: string;
  to: string;
}

/** The period as it stands in the address, so that it can be passed on as a link; what is no month is left out. */
export function readPeriod(search: URLSearchParams, usual: Span): BooksPeriod {
  const month = (name: string) => {
    const text = search.get(name) ?? '';
    return MONTH.test(text) ? text : undefined;
  };
  const [from, to] = [month('from'), month('to')];
  const span = from || to ? { from: from ?? to ?? usual.from, to: to ?? from ?? usual.to } : usual;
  const isTurned = span.from > span.to;
  return { from: isTurned ? span.to : span.from, to: span.to, refrigerant: search.get('refrigerant') || undefined };
}

export const readTable = (search: URLSearchParams): TableName =>
  TABLES.find((name) => name === search.get('table')) ?? 'cylinders';

/** One of them set anew. A month that would turn the period round takes the other with it. */
export function withPeriod(
  search: URLSearchParams,
  { from, to }: BooksPeriod,
  change: Partial<Record<'from' | 'to' | 'refrigerant', string>>,
): URLSearchParams {
  const next = new URLSearchParams(search);
  const first = change.from ?? from;
  const last = change.to ?? to;
  const turned = first > last;
  next.set('from', turned && change.to !== undefined ? last : first);
  next.set('to', turned && change.from !== undefined ? first : last);
  if (change.refrigerant !== undefined) next.set('refrigerant', change.refrigerant);
  if (next.get('refrigerant') === '') next.delete('refrigerant');
  return next;
}

/** The last day of a month: `2026-11-30` of `2026-11`. */
export function lastDayOf(month: string): string {
  const [year = 0, number = 0] = month.split('-').map(Number);
  return new Date(Date.UTC(year, number, 0)).toISOString().slice(0, 10);
}
