import fc from 'fast-check';

/** What somebody does with the log: what stands, what has to be refused, what is sent again, at once, late, or undone. */
export type Deed =
  | { does: 'charge'; cylinder: number; massG: number; day: number; readG: number | null }
  | { does: 'weigh'; cylinder: number; lessG: number; day: number }
  | { does: 'recover'; massG: number; day: number; empties: boolean }
  | { does: 'buy'; cylinder: number; massG: number; day: number }
  | { does: 'refused'; how: Refused; cylinder: number; day: number }
  | { does: 'sendAgain'; which: number }
  | { does: 'sendChanged'; which: number }
  | { does: 'atOnce'; cylinder: number; masses: number[]; day: number }
  | { does: 'reverse'; which: number; replaceG: number | null; day: number }
  | { does: 'settle'; which: number; month: number; isLost: boolean; half: boolean }
  | { does: 'reverseSettlement'; which: number }
  | { does: 'close' };

export const REFUSED = [
  'moreThanItHolds',
  'secondRefrigerant',
  'pastLimit',
  'unknownCylinder',
  'unknownUnit',
  'zeroMass',
  'wrongUnit',
  'toItself',
] as const;
export type Refused = (typeof REFUSED)[number];

const cylinder = fc.integer({ min: 0, max: 1 });
const day = fc.integer({ min: 0, max: 80 });
const which = fc.integer({ min: 0, max: 1_000 });
const massG = fc.oneof(
  fc.integer({ min: 1, max: 400 }),
  fc.integer({ min: 10, max: 4_000 }).map((tenths) => tenths / 10),
);
/** Readings tell of round losses, so that a late charge explains one in part or wholly. */
const lessG = fc.integer({ min: -2, max: 20 }).map((tens) => tens * 10);
const tensG = fc.integer({ min: 1, max: 20 }).map((tens) => tens * 10);

const deed: fc.Arbitrary<Deed> = fc.oneof(
  {
    weight: 4,
    arbitrary: fc.record({
      does: fc.constant('charge' as const),
      cylinder,
      massG: fc.oneof(massG, tensG, fc.integer({ min: 1_500, max: 6_000 })),
      day,
      readG: fc.option(fc.integer({ min: 0, max: 3_000 }), { nil: null, freq: 2 }),
    }),
  },
  { weight: 4, arbitrary: fc.record({ does: fc.constant('weigh' as const), cylinder, lessG, day }) },
  {
    weight: 2,
    arbitrary: fc.record({ does: fc.constant('recover' as const), massG, day, empties: fc.boolean() }),
  },
  { weight: 1, arbitrary: fc.record({ does: fc.constant('buy' as const), cylinder, massG, day }) },
  {
    weight: 3,
    arbitrary: fc.record({ does: fc.constant('refused' as const), how: fc.constantFrom(...REFUSED), cylinder, day }),
  },
  { weight: 1, arbitrary: fc.record({ does: fc.constant('sendAgain' as const), which }) },
  { weight: 1, arbitrary: fc.record({ does: fc.constant('sendChanged' as const), which }) },
  {
    weight: 1,
    arbitrary: fc.record({
      does: fc.constant('atOnce' as const),
      cylinder,
      masses: fc.array(massG, { minLength: 2, maxLength: 4 }),
      day,
    }),
  },
  {
    weight: 3,
    arbitrary: fc.record({
      does: fc.constant('reverse' as const),
      which,
      replaceG: fc.option(tensG, { nil: null, freq: 2 }),
      day,
    }),
  },
  {
    weight: 4,
    arbitrary: fc.record({
      does: fc.constant('settle' as const),
      which,
      month: fc.integer({ min: 1, max: 3 }),
      isLost: fc.boolean(),
      half: fc.boolean(),
    }),
  },
  { weight: 2, arbitrary: fc.record({ does: fc.constant('reverseSettlement' as const), which }) },
  { weight: 1, arbitrary: fc.record({ does: fc.constant('close' as const) }) },
);

export const deeds = fc.array(deed, { minLength: 20, maxLength: 40, size: 'max' });
