import { describe, expect, it } from 'vitest';
import { gramsText } from './grams-text.ts';
import type { JudgedGroup } from './judged-group.ts';
import {
  cylinderRegister,
  day,
  filledWith,
  fullCharge,
  g,
  group,
  moved,
  openedAt,
  place,
  read,
  says,
  unitRegister,
} from './judged-group-builder.ts';
import { LedgerBook } from './ledger-book.ts';

function logOf(...groups: JudgedGroup[]): LedgerBook {
  const ledger = new LedgerBook();
  for (const id of ['C1', 'R1']) ledger.registerCylinder(cylinderRegister(id));
  ledger.registerUnit(unitRegister('U', 1_290));
  for (const posted of groups) expect(ledger.post(posted)).toMatchObject({ ok: true });
  return ledger;
}
const refill = group('a', 2, { masses: [moved('C1 -> U', 300)] });
const posted = (outcome: ReturnType<LedgerBook['post']>) =>
  outcome.ok
    ? outcome.value.map(({ massMicrograms, atLeast }) => [gramsText(massMicrograms), atLeast])
    : outcome.refusals;

describe('a later answer', () => {
  it('judges its group again, and what rested on it, with the time of what it corrects', () => {
    const ledger = logOf(filledWith('C1', 9_500), openedAt('U', 1_290), refill);
    const answered = ledger.answer('a', 'later', says('U', 'notFull'));
    expect(posted(answered)).toEqual([
      ['300', true],
      ['300', false],
    ]);
    expect(answered.ok && answered.value.every((entry) => entry.occurredAt === day(2))).toBe(true);
    expect(answered.ok && answered.value.every((entry) => entry.groupId === 'later')).toBe(true);
    expect(ledger.openFlags().map(({ code }) => code)).toEqual(['unitShort']);
  });
  it('of more than full takes the loss out again; the last answer counts', () => {
    const ledger = logOf(filledWith('C1', 9_500), openedAt('U', 1_290), refill);
    ledger.answer('a', 'one', says('U', 'moreThanFull'));
    expect(ledger.balanceOf(place('U'))).toEqual({ 'R-410A': g(1_590) });
    ledger.answer('a', 'two', says('U', 'full'));
    expect(ledger.balanceOf(place('U'))).toEqual({ 'R-410A': g(1_290) });
  });
});

describe('a posting that is refused', () => {
  it('leaves entries, books, flags and states as they were', () => {
    const ledger = logOf(filledWith('C1', 60), openedAt('U', 1_290));
    const before = { entries: [...ledger.entries], state: ledger.cylinderState('C1'), groups: ledger.groups.size };
    const outcome = ledger.post(refill);
    expect(outcome).toMatchObject({ ok: false, refusals: [{ code: 'exceedsBook', path: '/entries/0/mass' }] });
    expect({ entries: [...ledger.entries], state: ledger.cylinderState('C1'), groups: ledger.groups.size }).toEqual(
      before,
    );
    expect(ledger.openFlags()).toEqual([]);
  });
  it('is also a reversal that would leave a cylinder short, until it is weighed', () => {
    const recovered = group('r', 2, { masses: [moved('U -> R1', 900)] });
    const sent = group('s', 3, { masses: [moved('R1 -> reclaimer', 900)] });
    const ledger = logOf(openedAt('U', 1_290), recovered, sent);
    expect(ledger.reverse('r', 'x')).toMatchObject({ ok: false, refusals: [{ code: 'exceedsBook', path: '' }] });
    ledger.post(group('w', 4, { readings: [read('R1', 'only', 0)] }));
    expect(ledger.reverse('r', 'x')).toMatchObject({ ok: true });
    expect(ledger.balanceOf(place('R1'))).toEqual({});
    expect(ledger.balanceOf(place('opening'))).toEqual({ 'R-410A': g(-1_290 - 900) });
  });
  it('is a mass of an open refrigerant out of a cylinder that holds nothing', () => {
    const open = { ...moved('R1 -> reclaimer', 10), refrigerant: null };
    expect(logOf().post({ ...group('o', 2), masses: [open] })).toMatchObject({
      ok: false,
      refusals: [{ code: 'refrigerantRequired', path: '/entries/0/refrigerant' }],
    });
  });
});

describe('a revised full charge', () => {
  it('judges the unit again from its day on', () => {
    const ledger = logOf(filledWith('C1', 9_500), openedAt('U', 1_290), refill);
    const revised = unitRegister('U', null, { fullCharges: [fullCharge(1_290, 0), fullCharge(1_440, day(2))] });
    expect(posted(ledger.reviseUnit(revised, 'revision'))).toEqual([['150', false]]);
    expect(ledger.balanceOf(place('U'))).toEqual({ 'R-410A': g(1_440) });
  });
});

describe('a closed month', () => {
  it('takes nothing more: what is late is booked in the first open month, and the next in its own', () => {
    const ledger = logOf(filledWith('C1', 9_500), openedAt('U', 1_000));
    ledger.closeMonth('2026-12');
    ledger.post(group('late', 5, { masses: [moved('C1 -> U', 100)] }));
    ledger.post({ ...group('next', 6, { masses: [moved('C1 -> U', 50)] }), occurredAt: Date.UTC(2027, 1, 3) });
    ledger.post({ ...group('open', 7, { masses: [moved('C1 -> U', 50)] }), occurredAt: Date.UTC(2027, 0, 3) });
    expect(ledger.entries.slice(-3).map(({ bookingMonth, late }) => [bookingMonth, late])).toEqual([
      ['2027-01', true],
      ['2027-02', false],
      ['2027-01', false],
    ]);
  });
});
