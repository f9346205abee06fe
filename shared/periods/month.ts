import { dayInZone } from '../units/calendar.ts';

/** A booking month, `2026-11`. */
export type Month = string;

export function monthsLater(month: Month, count: number): Month {
  const [year = 0, number = 0] = month.split('-').map(Number);
  return new Date(Date.UTC(year, number - 1 + count, 1)).toISOString().slice(0, 7);
}

export const monthAfter = (month: Month): Month => monthsLater(month, 1);
export const monthBefore = (month: Month): Month => monthsLater(month, -1);

/** From the first to the last, both included; none where the last comes before the first. */
export function monthsBetween(first: Month, last: Month): Month[] {
  const months: Month[] = [];
  for (let month = first; month <= last; month = monthAfter(month)) months.push(month);
  return months;
}

/** How far a zone's midnight can lie from that of UTC. */
const FURTHEST_MS = 27 * 60 * 60_000;

/**
 * The first millisecond (since 1970, UTC) of a calendar day there: midnight, or where the clocks skip it the moment
 * after. Found by search, so that no offset has to be known.
 */
export function startOfDay(day: string, timeZone: string): number {
  let before = Date.parse(`${day}T00:00:00Z`) - FURTHEST_MS;
  let reached = before + 2 * FURTHEST_MS;
  while (reached - before > 1) {
    const middle = Math.floor((before + reached) / 2);
    if (dayInZone(middle, timeZone) >= day) reached = middle;
    else before = middle;
  }
  return reached;
}

export const startOfMonth = (month: Month, timeZone: string): number => startOfDay(`${month}-01`, timeZone);

/** The last millisecond of a month there: what is settled at its close is booked at this moment. */
export const endOfMonth = (month: Month, timeZone: string): number => startOfMonth(monthAfter(month), timeZone) - 1;

/** The day after a calendar day. */
export function dayAfter(day: string): string {
  return new Date(Date.parse(`${day}T00:00:00Z`) + 24 * 60 * 60_000).toISOString().slice(0, 10);
}
