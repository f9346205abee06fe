import type { CylinderRegister, CylinderState } from './cylinder-state.ts';
import type { LedgerFlag } from './flag.ts';
import { isMixed, type MassByRefrigerant, totalOf } from './mass-by-refrigerant.ts';
import { cylinderPlace } from './place.ts';

/** How the cylinder stands after a group; a flag that stood before keeps the group that brought it about. */
export function cylinderStandingFlags(
  register: CylinderRegister,
  before: CylinderState,
  book: MassByRefrigerant,
  missing: bigint,
  groupId: string,
): LedgerFlag[] {
  const place = cylinderPlace(register.cylinderId);
  const standing = (
    code: 'cylinderMixed' | 'cylinderMissing' | 'cylinderOverLimit',
    massMicrograms: bigint | null,
    figures: Record<string, bigint> = {},
  ): LedgerFlag => {
    const earlier = before.standing.find((flag) => flag.code === code);
    return {
      code,
      place,
      groupId: earlier?.groupId ?? groupId,
      refrigerant: null,
      massMicrograms,
      standing: true,
      figures,
    };
  };
  const flags: LedgerFlag[] = [];
  if (isMixed(book)) flags.push(standing('cylinderMixed', null));
  if (missing > 0n) flags.push(standing('cylinderMissing', missing));
  const { limitMicrograms } = register;
  const content = totalOf(book);
  if (limitMicrograms !== null && content > limitMicrograms) {
    flags.push(standing('cylinderOverLimit', content - limitMicrograms, { limitMicrograms }));
  }
  return flags;
}
