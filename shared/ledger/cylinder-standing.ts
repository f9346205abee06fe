import { pressureRatingHolds } from '../cylinder-fill/cylinder-limits.ts';
import { type CylinderRegister, type CylinderState, heldIn, limitOf } from './cylinder-state.ts';
import type { FlagCode, LedgerFlag } from './flag.ts';
import { isMixed, totalOf } from './mass-by-refrigerant.ts';
import { cylinderPlace } from './place.ts';

/** How the cylinder stands after a group; a flag that stood before keeps the group that brought it about. */
export function cylinderStandingFlags(
  register: CylinderRegister,
  before: CylinderState,
  after: Pick<CylinderState, 'book' | 'missingMicrograms' | 'filledAt'>,
  groupId: string,
): LedgerFlag[] {
  const place = cylinderPlace(register.cylinderId);
  const standing = (
    code: FlagCode,
    massMicrograms: bigint | null,
    { figures = {}, refrigerant = null }: { figures?: Record<string, bigint>; refrigerant?: string | null } = {},
  ): LedgerFlag => {
    const earlier = before.standing.find((flag) => flag.code === code && flag.refrigerant === refrigerant);
    return { code, place, groupId: earlier?.groupId ?? groupId, refrigerant, massMicrograms, standing: true, figures };
  };
  const { book, missingMicrograms, filledAt } = after;
  const { servicePressureKPaGauge, jurisdiction, retestOverdueFrom } = register.collar;
  const flags: LedgerFlag[] = [];
  if (isMixed(book)) flags.push(standing('cylinderMixed', null));
  if (missingMicrograms > 0n) flags.push(standing('cylinderMissing', missingMicrograms));
  const held = heldIn(book);
  const limitMicrograms = limitOf(register, held);
  const content = totalOf(book);
  if (limitMicrograms !== null && content > limitMicrograms) {
    flags.push(standing('cylinderOverLimit', content - limitMicrograms, { figures: { limitMicrograms } }));
  }
  for (const refrigerant of held) {
    if (pressureRatingHolds(servicePressureKPaGauge, [refrigerant], jurisdiction) === false) {
      flags.push(standing('cylinderPressureTooHigh', null, { refrigerant }));
    }
  }
  if (retestOverdueFrom !== null && filledAt !== null && filledAt >= retestOverdueFrom) {
    flags.push(standing('cylinderFilledPastRetest', null));
  }
  return flags;
}
