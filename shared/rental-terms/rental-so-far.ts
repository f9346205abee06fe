import type { RentalSoFar, RentalTerms } from './rental-terms.schema.ts';

const MS_PER_DAY = 86_400_000;
const dayNumber = (day: string): number => Date.parse(`${day}T00:00:00Z`) / MS_PER_DAY;

/** Ten-thousandths of a currency unit, so that sums are exact. */
const parts = (amount: string): bigint => {
  const [whole = '0', rest = ''] = amount.split('.');
  return BigInt(whole) * 10_000n + BigInt(rest.padEnd(4, '0'));
};
const textOf = (amount: bigint): string => {
  const rest = String(amount % 10_000n).padStart(4, '0');
  return `${amount / 10_000n}.${rest.slice(2) === '00' ? rest.slice(0, 2) : rest}`;
};

/**
 * The rental that runs on `today`: its days and what they cost. The day a cylinder comes counts and the day it goes back
 * does not (common practice, no source: what was agreed with its owner comes first). New terms hold from their day on.
 * @param terms by day; of two for one day the later in the list holds
 * @returns null when nothing is rented on that day
 */
export function rentalOn(terms: readonly RentalTerms[], today: string): RentalSoFar | null {
  const begun = terms.filter(({ since }) => since <= today);
  const inForce = begun.filter(({ since }, index) => begun[index + 1]?.since !== since);
  const start = inForce.findLastIndex(({ conditions }) => conditions === null) + 1;
  const running = inForce.slice(start);
  const [first] = running;
  const last = running.at(-1);
  if (!first || !last?.conditions) return null;
  const costs = new Map<string, bigint>();
  for (const [index, { since, conditions }] of running.entries()) {
    const until = running[index + 1] ? dayNumber(String(running[index + 1]?.since)) : dayNumber(today) + 1;
    if (!conditions?.dailyRate) continue;
    const cost = parts(conditions.dailyRate) * BigInt(until - dayNumber(since));
    costs.set(conditions.currency, (costs.get(conditions.currency) ?? 0n) + cost);
  }
  return {
    since: first.since,
    days: dayNumber(today) + 1 - dayNumber(first.since),
    conditions: last.conditions,
    costs: [...costs].map(([currency, amount]) => ({ amount: textOf(amount), currency })),
  };
}
