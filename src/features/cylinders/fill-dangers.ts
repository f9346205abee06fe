import { type Fillable, judgeFill } from '../../../shared/cylinder-fill/fill-judgement.ts';
import type { FillJurisdiction } from '../../../shared/cylinder-fill/filling-table.ts';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { isRetestOverdue } from '../../../shared/cylinders/retest.ts';

/** Why mass must not go into a cylinder. Planning it is stopped; what has happened is recorded with its reason. */
export type FillDanger =
  | { is: 'overLimit'; wouldHoldG: number; limitG: number }
  | { is: 'refill' }
  | { is: 'pressure'; comes: string }
  | { is: 'retest'; due: string }
  | { is: 'otherRefrigerant'; holds: string };

type Filled = Fillable &
  Pick<Cylinder, 'contentG' | 'retestDue'> & {
    /** It has held refrigerant before. */
    used: boolean;
  };

interface Fill {
  addedG: number;
  /** Of what is to go in. */
  refrigerant: string;
  /** The calendar day on which it goes in. */
  day: string;
  /** Whose rule its pressure is judged by. */
  jurisdiction: FillJurisdiction | null;
}

export function fillDangers(cylinder: Filled, { addedG, refrigerant, day, jurisdiction }: Fill): FillDanger[] {
  const wouldHoldG = cylinder.contentG + addedG;
  const other = cylinder.byRefrigerant.find((held) => held.massG > 0 && held.refrigerant !== refrigerant);
  const { limitG, bears } = judgeFill(cylinder, [refrigerant], jurisdiction);
  const { retestDue } = cylinder;
  return [
    ...(limitG !== null && wouldHoldG > limitG ? [{ is: 'overLimit' as const, wouldHoldG, limitG }] : []),
    ...(cylinder.kind === 'nonRefillable' && cylinder.used ? [{ is: 'refill' as const }] : []),
    ...(bears === false ? [{ is: 'pressure' as const, comes: refrigerant }] : []),
    // What a cylinder comes with may have been put into it in time.
    ...(cylinder.used && retestDue !== null && isRetestOverdue(retestDue, day)
      ? [{ is: 'retest' as const, due: retestDue }]
      : []),
    ...(other ? [{ is: 'otherRefrigerant' as const, holds: other.refrigerant }] : []),
  ];
}
