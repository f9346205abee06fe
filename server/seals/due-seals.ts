import { dayInZone } from '../../shared/units/calendar.ts';

export interface SealFacts {
  firmId: string;
  timeZone: string;
  headSequence: number;
  /** The last seal, and the record that holds it. */
  lastSeal: { at: Date; record: number } | null;
}

/** Is there anything that the last seal does not cover? Its own record needs no seal. */
export const isUnsealed = ({ headSequence, lastSeal }: Omit<SealFacts, 'firmId' | 'timeZone'>): boolean =>
  headSequence > (lastSeal?.record ?? 0);

/** The firms to be sealed now: once a calendar day of theirs, if there is anything new. A first seal is due at once. */
export function dueSeals<T extends SealFacts>(now: Date, firms: readonly T[]): T[] {
  return firms.filter((firm) => {
    const { lastSeal, timeZone } = firm;
    const isNewDay = !lastSeal || dayInZone(lastSeal.at.getTime(), timeZone) < dayInZone(now.getTime(), timeZone);
    return isNewDay && isUnsealed(firm);
  });
}
