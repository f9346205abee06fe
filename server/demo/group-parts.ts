import type { HowKnown } from '../../shared/ledger/entry-group.schema.ts';
import type { PlaceFields } from '../../shared/ledger/place.ts';
import type { StockCylinder } from './cylinder-plan.ts';
import type { GroupBody } from './demo-order.ts';
import { type DemoScale, type Typed, typedSteps, wholeSteps } from './demo-scale.ts';
import type { Diary } from './diary.ts';

type Reading = NonNullable<GroupBody['readings']>[number];
type Entry = NonNullable<GroupBody['entries']>[number];

/** What the scale shows with the cylinder on it as it is now. */
export function grossReading(
  diary: Diary,
  at: Date,
  { cylinder, scale, moment }: { cylinder: StockCylinder; scale: DemoScale; moment: Reading['moment'] },
): Reading {
  const gross = typedSteps(wholeSteps(cylinder.tareG + cylinder.contentG, scale), scale);
  const id = diary.id(at);
  return { id, cylinderId: cylinder.id, toolId: scale.id, at: at.toISOString(), moment, mode: 'gross', ...gross };
}

export function entry(
  diary: Diary,
  at: Date,
  {
    refrigerant,
    mass,
    from,
    to,
    howKnown,
  }: Omit<Entry, 'id' | 'from' | 'to' | 'howKnown'> & {
    mass: Typed;
    from: PlaceFields;
    to: PlaceFields;
    howKnown: HowKnown;
  },
): Entry {
  return { id: diary.id(at), refrigerant: refrigerant ?? null, mass, from, to, howKnown };
}

export const inCylinder = ({ id }: { id: string }): PlaceFields => ({ place: 'cylinder', id });
export const inUnit = ({ id }: { id: string }): PlaceFields => ({ place: 'unit', id });
