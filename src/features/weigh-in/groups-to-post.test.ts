import { describe, expect, it } from 'vitest';
import { entryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { closingGroup, finishedGroups, intoUnitG, openGroups } from './groups-to-post.ts';
import {
  AT,
  C1,
  C2,
  cylinder,
  from,
  idOf,
  keyed,
  legIds,
  moves,
  R1,
  SCALE,
  SHEET,
  thenDo,
  to,
  toSheet,
  UNIT,
  withoutSheet,
} from './weigh-in.fixture.ts';
import type { WeighIn } from './weigh-in-state.ts';

const CONTEXT = { unitId: UNIT, refrigerant: 'R-410A', jobId: null };
const posted = (weighIn: WeighIn) => finishedGroups(weighIn, CONTEXT);
const only = (weighIn: WeighIn) => {
  const groups = posted(weighIn);
  expect(groups).toHaveLength(1);
  const [group] = groups;
  return entryGroupRequest.parse(group);
};
const notFull = { full: false, content: { value: '28', unit: 'g' as const } };

// Readings and masses of S1, S2, S4 and S5 of the ledger's worked cases; gross here is net content plus a tare of 4,000 g.
describe('What a weigh-in by gross readings posts', () => {
  it('counts the drop as charge and posts the full hose as lost beside it (S1 case 1)', () => {
    const group = only(
      toSheet(90, cylinder(C1, 1), ...from('13472'), ...to('13382'), { type: 'hoseEnd', hoseEnd: 'lost', into: null }),
    );
    expect(moves(group)).toEqual(['C1 -> U 90', 'C1 -> atmosphere, hose 28']);
    expect(group.readings?.[0]).toMatchObject({
      moment: 'before',
      mode: 'gross',
      value: '13472',
      unit: 'g',
      hoseFull: true,
      hose: { value: '28', unit: 'g' },
      toolId: SCALE,
      at: AT.start,
    });
    expect(group.readings?.[1]).toMatchObject({ moment: 'after', value: '13382', at: AT.end });
    expect(group).toMatchObject({ kind: 'extraCharge', unitId: UNIT, chargeSheetId: SHEET, occurredAt: AT.end });
  });

  it('adds the content of a full hose that was emptied into the unit to the drop (S1 case 2)', () => {
    const group = only(
      toSheet(90, cylinder(C1, 1), ...from('13472'), ...to('13410'), {
        type: 'hoseEnd',
        hoseEnd: 'emptied',
        into: null,
      }),
    );
    expect(moves(group)).toEqual(['C1 -> U 90']);
  });

  it('posts what was recovered from the hose into its cylinder, as estimated (S1 case 3)', () => {
    const group = only(
      toSheet(90, cylinder(C1, 1), ...from('13472'), ...to('13382'), {
        type: 'hoseEnd',
        hoseEnd: 'recovered',
        into: R1,
      }),
    );
    expect(moves(group)).toEqual(['C1 -> U 90', 'C1 -> R1 28']);
    expect(group.entries?.map((entry) => entry.howKnown)).toEqual(['weighed', 'estimated']);
  });

  it('takes a hose that was filled after the start reading out of the drop when it is lost (S1 case 4)', () => {
    const group = only(
      toSheet(90, cylinder(C1, 1, { hose: notFull }), ...from('13500'), ...to('13382'), {
        type: 'hoseEnd',
        hoseEnd: 'lost',
        into: null,
      }),
    );
    expect(moves(group)).toEqual(['C1 -> U 90', 'C1 -> atmosphere, hose 28']);
    expect(group.readings?.[0]?.hoseFull).toBe(false);
  });

  it('counts the whole drop when a hose filled after the start reading is emptied into the unit', () => {
    const group = only(
      toSheet(90, cylinder(C1, 1, { hose: notFull }), ...from('13500'), ...to('13410'), {
        type: 'hoseEnd',
        hoseEnd: 'emptied',
        into: null,
      }),
    );
    expect(moves(group)).toEqual(['C1 -> U 90']);
  });

  it('posts nothing for a hose that holds too little to count', () => {
    const group = only(
      toSheet(90, cylinder(C1, 1, { hose: { full: true, content: null } }), ...from('13500'), ...to('13410')),
    );
    expect(moves(group)).toEqual(['C1 -> U 90']);
    expect(group.readings?.[0]).toMatchObject({ hoseFull: false, hose: null });
  });

  it('posts readings alone when nothing has left the cylinder', () => {
    const group = only(
      toSheet(90, cylinder(C1, 1, { hose: { full: true, content: null } }), ...from('13500'), ...to('13500')),
    );
    expect(group.entries).toEqual([]);
    expect(group.readings).toHaveLength(2);
  });

  it('keeps the mass as the scale showed it: kilograms stay kilograms, pounds and ounces become ounces', () => {
    const inKg = only(
      toSheet(
        90,
        cylinder(C1, 1, { unit: 'kg', hose: { full: true, content: null } }),
        ...from('13.472', 'kg'),
        ...to('13.382', 'kg'),
      ),
    );
    expect(inKg.entries?.[0]?.mass).toEqual({ value: '0.09', unit: 'kg' });
    const inOunces = only(
      toSheet(
        90,
        cylinder(C1, 1, { unit: 'lbOz', hose: { full: true, content: null } }),
        ...from('29l11.2', 'lbOz'),
        ...to('29l8', 'lbOz'),
      ),
    );
    expect(inOunces.readings?.[0]).toMatchObject({ value: '475.2', unit: 'oz' });
    expect(inOunces.entries?.[0]?.mass).toEqual({ value: '3.2', unit: 'oz' });
  });
});

describe('What a weigh-in on a zeroed scale posts', () => {
  it('posts ounces exactly, with readings below zero that state nothing (S2)', () => {
    const group = only(
      toSheet(
        { value: '3.2', unit: 'oz' },
        cylinder(C1, 1, { mode: 'zeroed', unit: 'oz' }),
        { type: 'start', at: AT.start },
        ...to('3.2', 'oz'),
        { type: 'hoseEnd', hoseEnd: 'lost', into: null },
      ),
    );
    expect(moves(group)).toEqual(['C1 -> U 90.718474', 'C1 -> atmosphere, hose 28']);
    expect(group.entries?.[0]?.mass).toEqual({ value: '3.2', unit: 'oz' });
    expect(group.readings?.map(({ mode, value, unit }) => [mode, value, unit])).toEqual([
      ['zeroed', '0', 'oz'],
      ['zeroed', '-3.2', 'oz'],
    ]);
  });

  it('adds an emptied hose in grams to a drop in ounces, to the microgram', () => {
    const group = only(
      toSheet(
        { value: '3.2', unit: 'oz' },
        cylinder(C1, 1, { mode: 'zeroed', unit: 'oz' }),
        { type: 'start', at: AT.start },
        ...to('2.2', 'oz'),
        { type: 'hoseEnd', hoseEnd: 'emptied', into: null },
      ),
    );
    expect(group.entries?.[0]?.mass).toEqual({ value: '90.368951', unit: 'g' });
  });
});

describe('A cylinder changed in the middle', () => {
  it('posts both cylinders in one group, each with its readings and its hose (S4)', () => {
    const group = only(
      toSheet(
        310,
        cylinder(C1, 1, { hose: notFull }),
        ...from('4240'),
        ...to('4012', 'g', true),
        { type: 'hoseEnd', hoseEnd: 'lost', into: null },
        cylinder(C2, 2),
        { type: 'hose', hose: notFull },
        ...from('15340'),
        ...to('15230'),
        { type: 'hoseEnd', hoseEnd: 'emptied', into: null },
      ),
    );
    expect(moves(group)).toEqual(['C1 -> U 200', 'C1 -> atmosphere, hose 28', 'C2 -> U 110']);
    expect(group.readings?.map(({ cylinderId, moment }) => `${cylinderId === C1 ? 'C1' : 'C2'} ${moment}`)).toEqual([
      'C1 before',
      'C1 after',
      'C2 before',
      'C2 after',
    ]);
    expect(intoUnitG(group)).toBe(310);
  });
});

describe('A weigh-in that is left open', () => {
  const left = toSheet(140, cylinder(C1, 1, { hose: { full: false, content: null } }), ...from('13500'));

  it('posts the start reading alone, dated as it was taken, and nothing that was not weighed (S5)', () => {
    const [group, ...others] = openGroups(left, CONTEXT);
    expect(others).toEqual([]);
    expect(entryGroupRequest.parse(group)).toMatchObject({
      kind: 'extraCharge',
      openWeighIn: true,
      occurredAt: AT.start,
      chargeSheetId: SHEET,
    });
    expect(group?.readings).toHaveLength(1);
    expect(group?.entries).toBeUndefined();
  });

  it('is closed by a group that names it, keeps its time and holds the after reading and the mass (S5 case 1)', () => {
    const group = entryGroupRequest.parse(
      closingGroup(
        {
          groupId: idOf(44),
          cylinderId: C1,
          kind: 'extraCharge',
          chargeSheetId: SHEET,
          startedAt: AT.start,
          start: keyed('13500', 'g'),
          hose: { full: false, content: null },
        },
        {
          groupId: idOf(60),
          ids: legIds(6),
          end: keyed('13362', 'g'),
          endAt: AT.later,
          toolId: SCALE,
          hoseEnd: null,
          hoseInto: null,
          answer: null,
          reason: '',
          note: '',
        },
        CONTEXT,
      ),
    );
    expect(moves(group)).toEqual(['C1 -> U 138']);
    expect(group).toMatchObject({ closesGroupId: idOf(44), occurredAt: AT.start });
    expect(group.openWeighIn).toBeUndefined();
    expect(group.readings?.map(({ moment, at }) => [moment, at])).toEqual([['after', AT.later]]);
  });

  it('first posts whole what the cylinder before has put in', () => {
    const second = thenDo(
      toSheet(310, cylinder(C1, 1, { hose: notFull }), ...from('4240'), ...to('4012', 'g', true), {
        type: 'hoseEnd',
        hoseEnd: 'lost',
        into: null,
      }),
      cylinder(C2, 2),
      { type: 'hose', hose: { full: false, content: null } },
      { type: 'keyStart', reading: keyed('15340', 'g') },
      { type: 'start', at: AT.later },
    );
    const [part, open] = openGroups(second, CONTEXT);
    expect(part && moves(entryGroupRequest.parse(part))).toEqual(['C1 -> U 200', 'C1 -> atmosphere, hose 28']);
    expect(open).toMatchObject({ openWeighIn: true, occurredAt: AT.later });
    expect(open?.readings).toHaveLength(1);
  });

  it('cannot be left on a zeroed scale, which states nothing', () => {
    const zeroed = toSheet(140, cylinder(C1, 1, { mode: 'zeroed' }), { type: 'start', at: AT.start });
    expect(openGroups(zeroed, CONTEXT)).toEqual([]);
  });
});

describe('A full recharge', () => {
  const recharge = (vacuum: 'whole' | 'lines') =>
    withoutSheet(
      { type: 'purpose', purpose: 'fullRecharge', target: { value: '1290', unit: 'g' }, sheetId: null },
      { type: 'vacuum', vacuum, at: AT.vacuum },
      cylinder(C1, 1, { hose: { full: true, content: null } }),
      ...from('13500'),
      ...to('12210'),
    );

  it('states the unit empty by vacuum in a group of its own before the recharge', () => {
    const [vacuum, main, ...others] = posted(recharge('whole')).map((group) => entryGroupRequest.parse(group));
    expect(others).toEqual([]);
    expect(vacuum).toMatchObject({
      kind: 'vacuum',
      occurredAt: AT.vacuum,
      statements: [{ about: 'unit', id: UNIT, is: 'empty', by: 'vacuum' }],
    });
    expect(main && moves(main)).toEqual(['C1 -> U 1290']);
    expect(main).toMatchObject({ kind: 'fullRecharge', statements: [] });
  });

  it('states nothing after a vacuum on the lines alone', () => {
    expect(posted(recharge('lines')).map(({ kind }) => kind)).toEqual(['fullRecharge']);
  });
});

describe('Posting', () => {
  const weighIn = toSheet(90, cylinder(C1, 1), ...from('13472'), ...to('13382'), {
    type: 'hoseEnd',
    hoseEnd: 'lost',
    into: null,
  });

  it('sends the same ids and the same content each time, so that pressing twice posts once', () => {
    expect(posted(weighIn)).toEqual(posted(JSON.parse(JSON.stringify(weighIn))));
    expect(only(weighIn).groupId).toBe(weighIn.ids.main);
  });

  it('carries the answer, the reason and the note', () => {
    const said = thenDo(
      weighIn,
      { type: 'answer', answer: 'moreThanFull' },
      { type: 'say', part: { reason: ' manager asked ', note: 'windy' } },
    );
    expect(only(said)).toMatchObject({ statements: [{ is: 'moreThanFull' }], reason: 'manager asked', note: 'windy' });
  });

  it('dates the group as the person says', () => {
    expect(only(thenDo(weighIn, { type: 'say', part: { occurredAt: '2026-11-29T10:00:00.000Z' } })).occurredAt).toBe(
      '2026-11-29T10:00:00.000Z',
    );
  });
});
