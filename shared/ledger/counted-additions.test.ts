import { describe, expect, it } from 'vitest';
import { countedAdditions, fullChargeRises } from './counted-additions.ts';
import type { JudgedGroup } from './judged-group.ts';
import { day, fullCharge, g, group, moved, openedAt, says, unitRegister } from './judged-group-builder.ts';

const counted = (groups: JudgedGroup[], rises = fullChargeRises(unitRegister('U', 1_290), groups)) =>
  countedAdditions('U', groups, rises).map(({ groupId, countedMicrograms }) => [groupId, countedMicrograms]);
const factory = group('factory', 1, { masses: [moved('factory -> U', 1_250, { howKnown: 'factory' })] });
const extra = (id: string, onDay: number, massG: number, jobId: string | null = null) =>
  group(id, onDay, { kind: 'extraCharge', jobId, masses: [moved('C1 -> U', massG)] });
const refill = (id: string, onDay: number, massG: number, jobId: string | null = null) =>
  group(id, onDay, { jobId, masses: [moved('C1 -> U', massG)] });
const recovery = (id: string, onDay: number, massG: number, jobId: string | null = null) =>
  group(id, onDay, { kind: 'recovery', jobId, masses: [moved('U -> R1', massG)] });

/** The rule is a policy of the product ([POLICY] in its design), worked in the scenarios. */
describe('a counted addition', () => {
  it('is what was put in, by anyone, but not from the factory or an opening', () => {
    const others = group('others', 3, { masses: [moved('customer -> U', 180), moved('otherContractor -> U', 20)] });
    expect(counted([openedAt('U', 1_290), refill('a', 2, 300), others])).toEqual([
      ['a', g(300)],
      ['others', g(200)],
    ]);
  });
  it('is less what the same job recovered from the unit, off its latest additions first', () => {
    const groups = [recovery('out', 1, 600, 'J'), refill('a', 2, 300, 'J'), refill('back', 3, 600, 'J')];
    expect(counted(groups)).toEqual([
      ['a', g(300)],
      ['back', 0n],
    ]);
  });
  it('is never below zero, and what another job recovered does not lessen it', () => {
    expect(counted([recovery('out', 1, 600, 'J'), refill('a', 2, 300, 'J')])).toEqual([['a', 0n]]);
    expect(counted([recovery('out', 1, 600, 'K'), refill('a', 2, 300, 'J')])).toEqual([['a', g(300)]]);
    expect(counted([recovery('out', 1, 600), refill('a', 2, 300)])).toEqual([['a', g(300)]]);
  });
  it('is not changed by a loss taken back, nor by a reversed group', () => {
    const full = { statements: [says('U', 'full')] };
    const misjudged = { ...refill('a', 2, 150), ...full };
    expect(counted([openedAt('U', 1_290), misjudged, { ...recovery('out', 60, 150), ...full }])).toEqual([
      ['a', g(150)],
    ]);
    expect(counted([{ ...misjudged, reversed: true }])).toEqual([]);
  });
});

describe('the rise of full charge', () => {
  const unit = unitRegister('U', 1_340);
  const rises = (groups: JudgedGroup[], register = unit) => fullChargeRises(register, groups);
  it('above the factory charge belongs to the install, in one visit or several', () => {
    const groups = [factory, extra('a', 2, 60), extra('b', 3, 40)];
    expect(counted(groups, rises(groups))).toEqual([
      ['a', g(10)],
      ['b', 0n],
    ]);
  });
  it('belongs to the job of the first extra charge, where that names one', () => {
    const groups = [factory, extra('a', 2, 120, 'J'), recovery('b', 2, 30, 'J')];
    expect(counted(groups, rises(groups))).toEqual([['a', 0n]]);
  });
  it('is nothing for a unit that did not come new from the factory', () => {
    const groups = [openedAt('U', 1_250), extra('a', 2, 90)];
    expect(counted(groups, rises(groups))).toEqual([['a', g(90)]]);
  });
  it('of a later full charge belongs to the job that it names; a fall is no rise', () => {
    const relocated = unitRegister('U', 1_340, {
      fullCharges: [fullCharge(1_340, 0), fullCharge(1_500, day(10), 'J'), fullCharge(1_400, day(20), 'K')],
    });
    const groups = [factory, extra('a', 2, 90), refill('b', 10, 170, 'J'), refill('c', 20, 50, 'K')];
    expect(counted(groups, rises(groups, relocated))).toEqual([
      ['a', 0n],
      ['b', g(10)],
      ['c', g(50)],
    ]);
  });
  it('of a refrigerant that the unit was changed to is all of it', () => {
    const retrofitted = unitRegister('U', null, {
      refrigerants: [
        { refrigerant: 'R-22', validFrom: 0 },
        { refrigerant: 'R-407C', validFrom: day(5) },
      ],
      fullCharges: [
        { refrigerant: 'R-22', massMicrograms: g(1_450), validFrom: 0, jobId: null },
        { refrigerant: 'R-407C', massMicrograms: g(1_400), validFrom: day(5), jobId: 'J' },
      ],
    });
    expect(fullChargeRises(retrofitted, [])).toEqual([
      { jobKey: 'job:J', refrigerant: 'R-407C', massMicrograms: g(1_400) },
    ]);
  });
});
