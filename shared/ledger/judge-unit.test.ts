import { describe, expect, it } from 'vitest';
import { replayUnit, wouldAsk } from './judge-unit.ts';
import type { JudgedGroup } from './judged-group.ts';
import { day, fullCharge, g, group, moved, openedAt, says, unitRegister } from './judged-group-builder.ts';
import { placeKey } from './place.ts';
import type { UnitRegister } from './unit-state.ts';

const U = unitRegister('U', 1_290);
const full = openedAt('U', 1_290);
const added = (register: UnitRegister, groups: JudgedGroup[]) =>
  replayUnit(register, groups).added.map((entry) => [
    entry.groupId,
    placeKey(entry.counterPlace),
    entry.massMicrograms,
    ...(entry.atLeast ? ['atLeast'] : []),
  ]);
const codes = (register: UnitRegister, groups: JudgedGroup[]) => {
  const replay = replayUnit(register, groups);
  return [...replay.flags, ...replay.state.standing].map(({ code }) => code).toSorted();
};
const refill = (id: string, onDay: number, massG: number, answer: Parameters<typeof says>[1] | null = null) =>
  group(id, onDay, {
    masses: [moved('C1 -> U', massG)],
    statements: answer === null ? [] : [says('U', answer)],
  });

describe('an addition asks whether the unit is full', () => {
  const asks = (register: UnitRegister, before: JudgedGroup[], next: JudgedGroup) =>
    wouldAsk(register, replayUnit(register, before).state, next);
  it('only where the book would pass full charge by more than twice the uncertainty', () => {
    expect(asks(U, [openedAt('U', 1_200)], refill('a', 2, 90))).toBe(false);
    expect(asks(U, [openedAt('U', 1_200)], refill('a', 2, 94))).toBe(false);
    expect(asks(U, [openedAt('U', 1_200)], refill('a', 2, 95))).toBe(true);
  });
  it('with the uncertainty of all masses weighed since the unit was settled, this one included', () => {
    const weighed = [openedAt('U', 1_000), refill('a', 2, 100), refill('b', 3, 100)];
    expect(asks(U, weighed, refill('c', 4, 97))).toBe(false);
    expect(asks(U, weighed, refill('c', 4, 98))).toBe(true);
  });
  it('where its book is not known, whatever goes in', () => {
    expect(asks(U, [], refill('a', 2, 1))).toBe(true);
  });
  it('against the known book before, where full charge was never determined', () => {
    const undetermined = unitRegister('U', null);
    expect(asks(undetermined, [full], refill('a', 2, 4))).toBe(false);
    expect(asks(undetermined, [full], refill('a', 2, 5))).toBe(true);
  });
  it('not where the group draws off as much as it puts in, nor for a recovery, nor after empty in one group', () => {
    const exchanged = group('a', 2, { masses: [moved('C1 -> U', 300), moved('U -> R1', 300)] });
    const recovered = group('a', 2, { masses: [moved('U -> R1', 300)] });
    const recharged = group('a', 2, { masses: [moved('C1 -> U', 1_400)], statements: [says('U', 'empty', 'vacuum')] });
    for (const next of [exchanged, recovered, recharged]) expect(asks(U, [full], next)).toBe(false);
  });
});

describe('no answer', () => {
  it('counts as more than full for a weigh-in to a charge sheet, else as not known', () => {
    const toSheet = { ...refill('a', 2, 120), chargeSheetId: 'sheet' };
    expect(added(U, [full, toSheet])).toEqual([]);
    expect(codes(U, [full, toSheet])).toEqual(['bookAboveFullCharge']);
    expect(added(U, [full, refill('a', 2, 120)])).toEqual([['a', 'atmosphere:inferred', g(-120)]]);
    expect(codes(U, [full, refill('a', 2, 120)])).toEqual(['askIfFull']);
  });
  it('stops being asked for once a later statement settles the unit', () => {
    expect(codes(U, [full, refill('a', 2, 120), refill('b', 80, 60, 'full')])).toEqual([]);
  });
});

describe('full', () => {
  it('within the scales of full charge posts nothing in either direction', () => {
    expect(added(U, [full, refill('a', 2, 4, 'full')])).toEqual([]);
    expect(added(U, [openedAt('U', 1_000), refill('a', 2, 286, 'full')])).toEqual([]);
    expect(codes(U, [openedAt('U', 1_000), refill('a', 2, 286, 'full')])).toEqual([]);
  });
  it('without an addition infers what the book holds too much', () => {
    const said = group('a', 2, { statements: [says('U', 'full')] });
    expect(added(U, [openedAt('U', 1_500), said])).toEqual([['a', 'atmosphere:inferred', g(-210)]]);
  });
  it('settles the unit, so that earlier weighings no longer widen what is within', () => {
    const many = [2, 3, 4, 5, 6].map((onDay) => refill(`r${onDay}`, onDay * 40, 100, 'full'));
    const emptied = group('e', 300, {
      masses: [moved('U -> R1', 1_284)],
      statements: [says('U', 'empty', 'recovery')],
    });
    expect(added(U, [full, ...many, emptied]).at(-1)).toEqual(['e', 'atmosphere:inferred', g(-6)]);
  });
  it('where full charge was never determined leaves a known book alone and says so', () => {
    const undetermined = unitRegister('U', null);
    const said = group('a', 2, { statements: [says('U', 'full')] });
    expect(added(undetermined, [full, said])).toEqual([]);
    expect(codes(undetermined, [full, said])).toEqual(['fullChargeNotDetermined']);
  });
  it('is held against the full charge of its day', () => {
    const longer = unitRegister('U', 1_290, { fullCharges: [fullCharge(1_290, 0), fullCharge(1_450, day(10))] });
    expect(added(longer, [full, refill('a', 9, 160, 'full')])).toEqual([['a', 'atmosphere:inferred', g(-160)]]);
    expect(added(longer, [full, refill('a', 10, 160, 'full')])).toEqual([]);
  });
  it('is held against the first full charge also before somebody determined it', () => {
    const determinedLater = unitRegister('U', null, { fullCharges: [fullCharge(1_290, day(10))] });
    const below = openedAt('U', 1_200);
    expect(added(determinedLater, [below, refill('a', 2, 250, 'full')])).toEqual([
      ['a', 'atmosphere:inferred', g(-160)],
    ]);
  });
});

describe('a loss taken back', () => {
  const first = refill('first', 2, 300, 'full');
  const second = refill('second', 80, 150, 'notFull');
  const recovered = (massG: number) =>
    group('out', 200, { masses: [moved('U -> R1', massG)], statements: [says('U', 'empty', 'recovery')] });
  it('comes back newest first, a loss from before our care last, each as what it was', () => {
    expect(added(U, [first, second, recovered(1_290 + 200)])).toEqual([
      ['first', 'opening', g(990)],
      ['first', 'atmosphere:beforeOurCare', g(-300)],
      ['second', 'atmosphere:inferred', g(-150), 'atLeast'],
      ['out', 'atmosphere:inferred', g(150), 'atLeast'],
      ['out', 'atmosphere:beforeOurCare', g(50)],
    ]);
  });
  it('is not taken back twice', () => {
    const partly = group('part', 100, { masses: [moved('U -> R1', 1_290 + 100)] });
    const again = group('again', 101, { masses: [moved('U -> R1', 60)], statements: [says('U', 'empty', 'recovery')] });
    expect(added(U, [full, refill('a', 2, 150, 'full'), partly, again]).slice(1)).toEqual([
      ['part', 'atmosphere:inferred', g(100)],
      ['again', 'atmosphere:inferred', g(50)],
      ['again', 'unitDifference', g(10)],
    ]);
  });
  it('of another refrigerant stays lost', () => {
    const other = group('out', 200, {
      masses: [moved('U -> R1', 1_290), moved('U -> R2', 100, { refrigerant: 'R-32' })],
      statements: [says('U', 'empty', 'recovery')],
    });
    expect(added(U, [full, refill('a', 2, 150, 'full'), other]).slice(1)).toEqual([['out', 'unitDifference', g(100)]]);
  });
});

describe('empty', () => {
  it('stands between what its group takes out and what it puts in', () => {
    const renewed = group('a', 2, {
      masses: [moved('U -> R1', 990), moved('R1 -> U', 990), moved('C1 -> U', 300)],
      statements: [says('U', 'empty', 'recovery')],
    });
    expect(added(U, [full, renewed])).toEqual([['a', 'atmosphere:inferred', g(-300)]]);
    expect(replayUnit(U, [full, renewed]).state.book).toEqual({ 'R-410A': g(1_290) });
  });
  it('judges each refrigerant of a circuit by itself', () => {
    const topped = group('t', 2, { masses: [moved('C3 -> U', 50, { refrigerant: 'R-32' })] });
    const emptied = group('e', 3, { masses: [moved('U -> R1', 1_290)], statements: [says('U', 'empty', 'vacuum')] });
    const replay = replayUnit(U, [full, topped, emptied]);
    expect(replay.added.map(({ refrigerant, massMicrograms }) => [refrigerant, massMicrograms])).toEqual([
      ['R-32', g(-50)],
    ]);
    expect(replay.state.book).toEqual({});
  });
  it('makes a book known that was not', () => {
    expect(replayUnit(U, [group('e', 2, { statements: [says('U', 'empty', 'open')] })]).state.known).toBe(true);
  });
});

describe('a unit that was registered after its work', () => {
  it('counts on what was weighed in before its factory charge', () => {
    const extra = { ...refill('extra', 1, 90), chargeSheetId: 'sheet' };
    const factory = group('factory', 2, { masses: [moved('factory -> U', 1_250, { howKnown: 'factory' })] });
    const replay = replayUnit(unitRegister('U', 1_340), [extra, factory]);
    expect(replay.state).toMatchObject({ known: true, book: { 'R-410A': g(1_340) } });
    expect(replay.added).toEqual([]);
    expect(replay.flags.map(({ code }) => code)).toEqual(['lateBeforeOpening']);
  });
  it('has no known book below zero: what came out before was in it before our care', () => {
    const taken = group('out', 1, { masses: [moved('U -> R1', 600)] });
    const opening = { ...openedAt('U', 300), sequence: 2, occurredAt: day(2) };
    expect(added(U, [taken, opening])).toEqual([['opening-U', 'opening', g(600)]]);
    expect(replayUnit(U, [taken, opening]).state.book).toEqual({ 'R-410A': g(300) });
  });
});

describe('what merely stands', () => {
  it('keeps the group that brought it about, with the figure of now', () => {
    const over = refill('over', 2, 120, 'moreThanFull');
    const less = group('less', 3, { masses: [moved('U -> R1', 50)] });
    const { standing } = replayUnit(U, [full, over, less]).state;
    expect(standing).toMatchObject([{ code: 'bookAboveFullCharge', groupId: 'over', massMicrograms: g(70) }]);
  });
});

describe('a second addition with a loss', () => {
  it('within 30 days of the first is put before the manager, but not in the same job, nor after the unit was empty', () => {
    const job = (from: JudgedGroup, jobId: string) => ({ ...from, jobId });
    const one = refill('one', 2, 300, 'full');
    const two = refill('two', 32, 200, 'full');
    expect(codes(U, [full, one, two])).toContain('secondAdditionIn30Days');
    expect(codes(U, [full, one, refill('two', 33, 200, 'full')])).not.toContain('secondAdditionIn30Days');
    expect(codes(U, [full, job(one, 'J'), job(two, 'J')])).not.toContain('secondAdditionIn30Days');
    const emptied = group('e', 10, { statements: [says('U', 'empty', 'foundFlat')] });
    const recharged = refill('r', 11, 1_290);
    expect(codes(U, [full, one, emptied, recharged, two])).not.toContain('secondAdditionIn30Days');
  });
});
