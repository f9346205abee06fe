import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { referenceData, requireValue } from '../reference/reference-data.fixture.ts';
import { judgeRoomLimit } from './judge-room-limit.ts';
import { roomLimitFixtures } from './room-limit.fixtures.ts';
import { type RoomLimitRequest, roomLimitRequest } from './room-limit.schema.ts';

const ask = (request: Partial<RoomLimitRequest>) =>
  judgeRoomLimit({ refrigerant: 'R-32', chargeG: 2500, ...request }, referenceData);
const judge = (request: Partial<RoomLimitRequest>) => requireValue(ask(request));
const wall = { mounting: 'wall' } as const;

describe('A charge against a room', () => {
  it.each(roomLimitFixtures)('$name ($source)', ({ request, result }) => {
    expect(judgeRoomLimit(roomLimitRequest.parse(request), referenceData)).toEqual({ ok: true, value: result });
  });
});

describe('The limits that need no area', () => {
  // Published: R-32 1.84 kg, 15.96 kg, below 79.8 kg; R-290 988 g. R-454B with LFL 0.296 (memory).
  it.each([
    ['R-32', 1842, 15_964, 79_820],
    ['R-454B', 1776, 15_392, 76_960],
    ['R-290', 152, 988, 4940],
  ])('of %s are %d, %d and %d g: 6, 52, 260 m3 for A2L, but 4, 26, 130 for A3', (refrigerant, m1G, m2G, m3G) => {
    expect(judge({ refrigerant, chargeG: 10, ...wall })).toMatchObject({ m1G, m2G, m3G });
  });

  it('have a third pair in EN 378-1: 39 and 195 for A2L (published: R-454A 54 kg, R-455A 17 and 84 kg)', () => {
    const en = (refrigerant: string, lflKgM3?: number) =>
      judge({ refrigerant, lflKgM3, chargeG: 10, ...wall, standard: 'EN 378-1' });
    expect(en('R-32')).toMatchObject({ m1G: 1842, m2G: 11_973, m3G: 59_865 });
    expect(en('R-454A').m3G).toBe(54_210);
    expect(en('R-455A', 0.431)).toMatchObject({ m2G: 16_809, m3G: 84_045 });
    expect(en('R-290')).toMatchObject({ m1G: 152, m2G: 988, m3G: 4940, status: 'toBeConfirmed' });
  });

  it('need no check at m1, and one a thousandth of a gram above it', () => {
    expect(judge({ chargeG: 1842, ...wall })).toMatchObject({
      verdict: 'noCheckNeeded',
      minimumAreaM2: 0,
      minimumAreaGovernedBy: null,
      limitG: 1842,
      limitGovernedBy: 'm1',
      formulaLimitG: null,
      clause: 'IEC 60335-2-40:2018, Annex GG: m1 = 6 m3 x LFL',
    });
    expect(judge({ chargeG: 1842.0000000000002, ...wall }).verdict).toBe('noCheckNeeded');
    expect(judge({ chargeG: 1842.001, ...wall }).verdict).toBe('areaNeeded');
  });

  it('are crossed by a long line: 1.75 kg from the factory and 12 m at 20 g/m need 4.80 m2', () => {
    expect(judge({ chargeG: 1750, ...wall }).verdict).toBe('noCheckNeeded');
    const together = judge({ chargeG: 1750 + 12 * 20, ...wall });
    expect(together.verdict).toBe('areaNeeded');
    expect(together.minimumAreaM2).toBeCloseTo(4.8, 2);
  });

  it('ask for measures between m2 and m3, whatever the room, and stop above m3', () => {
    expect(judge({ chargeG: 15_964, areaM2: 10_000, ...wall }).verdict).toBe('allowed');
    expect(judge({ chargeG: 15_964.001, areaM2: 10_000, ...wall })).toMatchObject({
      verdict: 'measuresRequired',
      minimumAreaM2: null,
      minimumAreaGovernedBy: null,
    });
    expect(judge({ chargeG: 79_820, ...wall }).verdict).toBe('measuresRequired');
    expect(judge({ chargeG: 79_820.001, ...wall }).verdict).toBe('over');
  });
});

describe('The smallest room', () => {
  // Worked values with LFL 0.307: square form 5.91 and cap 6.03 on the wall.
  it.each([
    ['wall', 6.03, 'linearCap'],
    ['ceiling', 4.935, 'linearCap'],
    ['floor', 53.19, 'squareRoot'],
  ] as const)('for 2.50 kg R-32, %s, is %d m2 by the %s', (mounting, areaM2, governedBy) => {
    const { minimumAreaM2, minimumAreaGovernedBy } = judge({ mounting });
    expect(minimumAreaM2).toBeCloseTo(areaM2, 2);
    expect(minimumAreaGovernedBy).toBe(governedBy);
  });

  it('for 3.00 kg R-454B on the ceiling is 6.24 m2, with LFL 0.297 6.19', () => {
    const area = (lflKgM3?: number) =>
      judge({ refrigerant: 'R-454B', chargeG: 3000, mounting: 'ceiling', lflKgM3 }).minimumAreaM2;
    expect(area()).toBeCloseTo(6.24, 2);
    expect(area(0.297)).toBeCloseTo(6.19, 2);
  });

  it('for 0.300 kg R-290 on the wall is 15.79 m2', () => {
    expect(judge({ refrigerant: 'R-290', chargeG: 300, ...wall }).minimumAreaM2).toBeCloseTo(15.79, 2);
  });

  it('agrees with the published R-32 floor tables of the 2018 edition: 1.84 kg 28.81 m2, 2.30 kg 45.02 m2', () => {
    const floor = (chargeG: number) => judge({ chargeG, mounting: 'floor', lflKgM3: 0.307 }).minimumAreaM2;
    expect(floor(2300)).toBeCloseTo(45.02, 2);
    // 1.84 kg itself needs no check; the table prints the formula’s value.
    expect(floor(1842.001)).toBeCloseTo(28.81 * (1.842001 / 1.84) ** 2, 1);
  });

  // Published table, floor unit 0.6 m, kg at m2: linear to 6 m2, then the square root.
  it.each([
    [1, 0.138],
    [2, 0.276],
    [3, 0.414],
    [4, 0.553],
    [5, 0.691],
    [6, 0.829],
    [7, 0.907],
    [10, 1.084],
    [28, 1.814],
    [45, 2.299],
  ])('of %d m2 takes %d kg R-32 by the formula, floor unit', (areaM2, kg) => {
    expect((judge({ areaM2, mounting: 'floor' }).formulaLimitG ?? 0) / 1000).toBeCloseTo(kg, 3);
  });

  it('is capped in small rooms: the square-root form alone would allow 0.766 kg in 5 m2, the cap 0.691', () => {
    const iec = judge({ areaM2: 5, mounting: 'floor' });
    expect(iec.formulaLimitG).toBe(690.75);
    // EN 378-1: a manual that cites it prints the pure square form.
    const en = judge({ areaM2: 5, mounting: 'floor', standard: 'EN 378-1' });
    expect(en.formulaLimitG).toBeCloseTo(766.477, 3);
  });

  it('never takes less than m1, which any room takes', () => {
    expect(judge({ chargeG: 1842, areaM2: 2, mounting: 'floor' })).toMatchObject({
      limitG: 1842,
      limitGovernedBy: 'm1',
    });
    expect(judge({ areaM2: 10_000, ...wall })).toMatchObject({ limitG: 15_964, limitGovernedBy: 'm2' });
  });

  it('is printed by a manual that cites EN 378: 3.5 kg on the floor 104.26 m2', () => {
    const en = judge({ chargeG: 3500, areaM2: 104.258, mounting: 'floor', standard: 'EN 378-1' });
    expect(en.minimumAreaM2).toBeCloseTo(104.26, 2);
    expect(en).toMatchObject({ verdict: 'allowed', minimumAreaGovernedBy: 'squareRoot' });
  });

  it('is large enough at the very figure that is named, and not a square decimetre below', () => {
    const charge = fc.integer({ min: 1_843_000, max: 15_963_000 }).map((milligrams) => milligrams / 1000);
    const mounting = fc.constantFrom('floor', 'wall', 'ceiling' as const) as fc.Arbitrary<'floor' | 'wall' | 'ceiling'>;
    fc.assert(
      fc.property(charge, mounting, (chargeG, side) => {
        const areaM2 = judge({ chargeG, mounting: side }).minimumAreaM2 as number;
        expect(judge({ chargeG, mounting: side, areaM2 }).verdict).toBe('allowed');
        expect(judge({ chargeG, mounting: side, areaM2: areaM2 - 0.01 }).verdict).toBe('over');
      }),
    );
  });

  it('is large enough for the very limit that is named, and the limit grows with room and height', () => {
    const area = fc.double({ min: 1, max: 400, noNaN: true });
    fc.assert(
      fc.property(area, fc.double({ min: 0.6, max: 2.2, noNaN: true }), (areaM2, releaseHeightM) => {
        const { limitG } = judge({ areaM2, releaseHeightM, chargeG: 0 });
        const at = judge({ areaM2, releaseHeightM, chargeG: limitG as number });
        expect(at.verdict).toMatch(/^(allowed|allowedToBeConfirmed|noCheckNeeded)$/);
        expect(judge({ areaM2: areaM2 + 1, releaseHeightM, chargeG: 0 }).limitG).toBeGreaterThanOrEqual(
          limitG as number,
        );
        expect(judge({ areaM2, releaseHeightM: releaseHeightM + 0.1, chargeG: 0 }).limitG).toBeGreaterThanOrEqual(
          limitG as number,
        );
      }),
    );
  });
});

describe('What is from memory', () => {
  it('is never a bare allowed: the LFL of R-454B', () => {
    const from = (lflKgM3?: number) => judge({ refrigerant: 'R-454B', areaM2: 20, mounting: 'wall', lflKgM3 });
    expect(from()).toMatchObject({ verdict: 'allowedToBeConfirmed', status: 'toBeConfirmed' });
    // An LFL that the caller names is the caller's.
    expect(from(0.296)).toMatchObject({ verdict: 'allowed', status: 'confirmed' });
    expect(judge({ refrigerant: 'R-454B', chargeG: 1776, ...wall })).toMatchObject({
      verdict: 'noCheckNeeded',
      status: 'toBeConfirmed',
    });
  });

  it('is the area formula for A3, the height of a window unit, and any height that no table prints', () => {
    expect(judge({ refrigerant: 'R-290', chargeG: 300, areaM2: 20, ...wall }).verdict).toBe('allowedToBeConfirmed');
    expect(judge({ areaM2: 40, mounting: 'window' }).verdict).toBe('allowedToBeConfirmed');
    expect(judge({ areaM2: 40, releaseHeightM: 1 }).verdict).toBe('allowed');
    expect(judge({ areaM2: 40, releaseHeightM: 1.5 }).verdict).toBe('allowedToBeConfirmed');
    expect(judge({ areaM2: 10_000, releaseHeightM: 1.8, standard: 'IEC 60335-2-40:2022' }).verdict).toBe('allowed');
  });

  it('is that EN 378-1 has no cap: in a room where the cap would bite, its answer stays to be confirmed', () => {
    const en = (chargeG: number, areaM2: number) => judge({ chargeG, areaM2, ...wall, standard: 'EN 378-1' });
    expect(en(2000, 5)).toMatchObject({ verdict: 'allowedToBeConfirmed', status: 'toBeConfirmed' });
    expect(en(2000, 6.2)).toMatchObject({ verdict: 'allowed', status: 'confirmed' });
  });
});

describe('The manual’s own table', () => {
  /** A published multi-split table for wall and ceiling, R-32. */
  const manualTable = [
    { chargeG: 1000, minimumAreaM2: 3 },
    { chargeG: 1500, minimumAreaM2: 4.5 },
    { chargeG: 2000, minimumAreaM2: 6 },
    { chargeG: 2500, minimumAreaM2: 7.5 },
  ];
  const byTable = (request: Partial<RoomLimitRequest>) => judge({ ...wall, manualTable, ...request });

  it('governs over the formula, the next larger row between two', () => {
    expect(byTable({ chargeG: 2400, areaM2: 7 })).toMatchObject({
      verdict: 'over',
      minimumAreaM2: 7.5,
      minimumAreaGovernedBy: 'manualTable',
      limitG: 2000,
      limitGovernedBy: 'manualTable',
    });
    expect(byTable({ chargeG: 2500, areaM2: 7.5 }).verdict).toBe('allowed');
    expect(byTable({ chargeG: 2000.001, areaM2: 7.4 }).verdict).toBe('over');
    expect(byTable({ chargeG: 2400 }).verdict).toBe('areaNeeded');
  });

  it('governs below m1 too, and makes a charge from memory plain: the manual is the source', () => {
    expect(byTable({ chargeG: 1500, areaM2: 4 }).verdict).toBe('over');
    const r454b = byTable({ refrigerant: 'R-454B', chargeG: 1500, areaM2: 5 });
    expect(r454b).toMatchObject({ verdict: 'allowed', status: 'confirmed' });
  });

  it('is silent below its first row: up to m1 the standard says that no check is needed', () => {
    expect(byTable({ chargeG: 900 })).toMatchObject({ verdict: 'noCheckNeeded', minimumAreaM2: 0 });
    const startsHigh = [{ chargeG: 2300, minimumAreaM2: 45.02 }];
    const between = byTable({ chargeG: 1900, areaM2: 40, manualTable: startsHigh });
    expect(between).toMatchObject({ verdict: 'over', minimumAreaM2: 45.02, limitG: 1842, limitGovernedBy: 'm1' });
    expect(byTable({ chargeG: 1500, areaM2: 2 })).toMatchObject({ limitG: null, limitGovernedBy: null });
  });

  it('needs no area where it names none', () => {
    expect(byTable({ chargeG: 1842, manualTable: [{ chargeG: 1842, minimumAreaM2: 0 }] }).verdict).toBe('allowed');
  });

  it('is not continued beyond its last row, and has to be in order', () => {
    expect(ask({ ...wall, chargeG: 2600, areaM2: 50, manualTable })).toMatchObject({
      ok: false,
      refusals: [{ code: 'tableEndsShort', path: '/manualTable', given: 2600, allowed: 2500 }],
    });
    const wrong = [
      { chargeG: 1000, minimumAreaM2: 4 },
      { chargeG: 1000, minimumAreaM2: 3 },
    ];
    expect(ask({ ...wall, chargeG: 900, manualTable: wrong })).toMatchObject({
      refusals: [
        { code: 'notAscending', path: '/manualTable/1/chargeG' },
        { code: 'notAscending', path: '/manualTable/1/minimumAreaM2' },
      ],
    });
  });
});

describe('What the check does not cover', () => {
  it('is a refrigerant that does not burn', () => {
    expect(judge({ refrigerant: 'R-410A', areaM2: 5, ...wall })).toEqual({
      m1G: null,
      m2G: null,
      m3G: null,
      formulaLimitG: null,
      limitG: null,
      limitGovernedBy: null,
      minimumAreaM2: null,
      minimumAreaGovernedBy: null,
      verdict: 'notCovered',
      clause: 'A1 (ASHRAE 34, ISO 817)',
      status: 'confirmed',
    });
    expect(judge({ refrigerant: 'R-448A', ...wall }).status).toBe('toBeConfirmed');
  });

  it('is ammonia, refused rather than called harmless', () => {
    expect(ask({ refrigerant: 'R-717', ...wall })).toMatchObject({
      ok: false,
      refusals: [{ code: 'classNotCovered', path: '/refrigerant', given: 'R-717' }],
    });
  });

  it('is any other standard, and a height that is said twice or not at all', () => {
    const parsed = roomLimitRequest.safeParse({
      refrigerant: 'R-32',
      chargeG: 1,
      mounting: 'wall',
      standard: 'UL 60335-2-40',
    });
    expect(parsed.error?.issues[0]).toMatchObject({ path: ['standard'], code: 'invalid_value' });
    expect(ask({})).toMatchObject({ refusals: [{ code: 'exactlyOneOf', path: '' }] });
    expect(ask({ mounting: 'wall', releaseHeightM: 1.8 })).toMatchObject({
      refusals: [{ code: 'exactlyOneOf', path: '/mounting' }],
    });
  });
});
