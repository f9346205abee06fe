/** A1 and B1 do not burn; every other class does, or is not known (ISO 817 safety classes as the table has them). */
export const isFlammable = (safetyClass: string): boolean => safetyClass !== '' && !safetyClass.endsWith('1');

/** What burns comes in place of what does not, or burns more readily than that: a machine built for a milder class. */
export const becomesFlammable = (before: string, after: string): boolean =>
  isFlammable(after) && rank(after) > rank(before);

const RANKS = ['2L', '2', '3'];
const rank = (safetyClass: string): number => RANKS.indexOf(safetyClass.slice(1));
