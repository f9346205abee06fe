import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';

/** Why mass must not go into a cylinder. Planning it is stopped; what has happened is recorded with its reason. */
export type FillDanger =
  | { is: 'overLimit'; wouldHoldG: number; limitG: number }
  | { is: 'refill' }
  | { is: 'pressure' }
  | { is: 'otherRefrigerant'; holds: string };

type Filled = Pick<Cylinder, 'kind' | 'contentG' | 'limitG' | 'pressureRatingHolds' | 'byRefrigerant'> & {
  /** It has held refrigerant before. */
  used: boolean;
};

/**
 * @param addedG what is to go in
 * @param refrigerant of what is to go in
 */
export function fillDangers(cylinder: Filled, addedG: number, refrigerant: string): FillDanger[] {
  const wouldHoldG = cylinder.contentG + addedG;
  const other = cylinder.byRefrigerant.find((held) => held.massG > 0 && held.refrigerant !== refrigerant);
  return [
    ...(cylinder.limitG !== null && wouldHoldG > cylinder.limitG
      ? [{ is: 'overLimit' as const, wouldHoldG, limitG: cylinder.limitG }]
      : []),
    ...(cylinder.kind === 'nonRefillable' && cylinder.used ? [{ is: 'refill' as const }] : []),
    ...(cylinder.pressureRatingHolds === false ? [{ is: 'pressure' as const }] : []),
    ...(other ? [{ is: 'otherRefrigerant' as const, holds: other.refrigerant }] : []),
  ];
}
