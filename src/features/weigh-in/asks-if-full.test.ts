import { describe, expect, it } from 'vitest';
import { entryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { ASSUMED_SCALE } from '../../../shared/ledger/scale.ts';
import { asksIfFull, finishedGroups } from './groups-to-post.ts';
import { AT, C1, cylinder, from, habits, idOf, to, toSheet, UNIT, withoutSheet } from './weigh-in.fixture.ts';
import type { WeighIn } from './weigh-in-state.ts';

const only = (weighIn: WeighIn) => {
  const groups = finishedGroups(weighIn, { unitId: UNIT, refrigerant: 'R-410A', jobId: null });
  expect(groups).toHaveLength(1);
  return entryGroupRequest.parse(groups[0]);
};

describe('Whether the unit is full', () => {
  const unit = (bookG: number, known: boolean, fullChargeG: number | null) => ({
    id: UNIT,
    refrigerant: 'R-410A',
    book: { known, massG: bookG, byRefrigerant: [{ refrigerant: 'R-410A', massG: bookG }] },
    fullCharge:
      fullChargeG === null
        ? null
        : {
            id: idOf(70),
            refrigerant: 'R-410A',
            massG: fullChargeG,
            typed: { value: String(fullChargeG), unit: 'g' as const },
            method: 'manufacturer' as const,
            validFrom: AT.start,
            jobId: null,
            reason: null,
          },
  });
  const group = (end: string) =>
    only(toSheet(90, cylinder(C1, 1), ...from('13472'), ...to(end), { type: 'hoseEnd', hoseEnd: 'lost', into: null }));
  const known = { emptied: false, fullChargeG: null, scaleOf: () => ASSUMED_SCALE };

  // Twice the uncertainty of one net mass with d = 5 g is 4.08 g (GUM, JCGM 100; worked cases of the ledger).
  it('is asked when the book would pass full charge by more than the scale can tell, and not before', () => {
    expect(asksIfFull(unit(1250, true, 1340), group('13382'), known)).toBe(false);
    expect(asksIfFull(unit(1250, true, 1340), group('13378'), known)).toBe(false);
    expect(asksIfFull(unit(1250, true, 1340), group('13377'), known)).toBe(true);
  });

  it('is asked when the book is not known', () => {
    expect(asksIfFull(unit(0, false, 1340), group('13382'), known)).toBe(true);
  });

  it('is not asked after a vacuum on the whole circuit and a recharge to full charge', () => {
    const recharge = only(
      withoutSheet(
        { type: 'purpose', purpose: 'refill', target: null, sheetId: null },
        cylinder(C1, 1, habits({ hose: { full: true, content: null } })),
        ...from('13500'),
        ...to('12160'),
      ),
    );
    expect(asksIfFull(unit(500, true, 1340), recharge, { ...known, emptied: true })).toBe(false);
    expect(asksIfFull(unit(500, true, 1340), recharge, known)).toBe(true);
  });

  it('is held against the full charge that is about to be set', () => {
    expect(asksIfFull(unit(1250, true, 1250), group('13382'), known)).toBe(true);
    expect(asksIfFull(unit(1250, true, 1250), group('13382'), { ...known, fullChargeG: 1340 })).toBe(false);
  });
});
