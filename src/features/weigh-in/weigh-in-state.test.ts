import { describe, expect, it } from 'vitest';
import { ASSUMED_SCALE } from '../../../shared/ledger/scale.ts';
import { faultOfEnd, gapAtStartG, progressOf, stopOf } from './leg-figures.ts';
import { C1, C2, cylinder, from, habits, keyed, thenDo, to, toSheet, withoutSheet } from './weigh-in.fixture.ts';
import { stepsOf, type WeighIn } from './weigh-in-state.ts';

const notFull = { full: false, content: { value: '28', unit: 'g' as const } };
const legOf = (weighIn: WeighIn) => {
  const leg = weighIn.legs.at(-1);
  if (!leg) throw new Error('no cylinder was chosen');
  return leg;
};

describe('Where the scale has to stop', () => {
  const stopAt = (hosePlan: 'emptied' | 'lost' | 'recovered', full: boolean) =>
    stopOf(toSheet(90, cylinder(C1, 1, { hosePlan, hose: { ...notFull, full } }), ...from('8505')), ASSUMED_SCALE)
      ?.scaleG;

  it('is the start less the charge while the hose stays full', () => {
    expect(stopAt('lost', true)).toBe(8415);
    expect(stopAt('recovered', true)).toBe(8415);
  });
  it('is earlier by the content of a full hose that will be emptied into the unit', () => {
    expect(stopAt('emptied', true)).toBe(8443);
  });
  it('is later by the content of a hose that is filled after the start reading and not emptied into the unit', () => {
    expect(stopAt('lost', false)).toBe(8387);
    expect(stopAt('emptied', false)).toBe(8415);
  });
  it('is below zero on a zeroed scale', () => {
    const zeroed = toSheet(90, cylinder(C1, 1, { mode: 'zeroed' }), { type: 'start', at: '2026-11-30T15:00:00Z' });
    expect(stopOf(zeroed, ASSUMED_SCALE)?.scaleG).toBe(-90);
  });
  it('leaves to the second cylinder what the first has not put in', () => {
    const second = toSheet(
      310,
      cylinder(C1, 1, { hose: notFull }),
      ...from('4240'),
      ...to('4012', 'g', true),
      { type: 'hoseEnd', hoseEnd: 'lost', into: null },
      cylinder(C2, 2),
      { type: 'hose', hose: notFull },
      { type: 'hosePlan', hosePlan: 'emptied' },
      ...from('15340'),
    );
    expect(stopOf(second, ASSUMED_SCALE)).toMatchObject({ dropG: 110, scaleG: 15230 });
  });
  it('has a band of twice the uncertainty of one net mass: 4.08 g for steps of 5 g (GUM, JCGM 100)', () => {
    expect(stopOf(toSheet(90, cylinder(C1, 1), ...from('8505')), ASSUMED_SCALE)?.toleranceG).toBeCloseTo(4.0825, 4);
  });
  it('is none without a target', () => {
    const adjust = withoutSheet(
      { type: 'purpose', purpose: 'adjust', target: null, sheetId: null },
      cylinder(C1, 1),
      ...from('8505'),
    );
    expect(stopOf(adjust, ASSUMED_SCALE)).toBeNull();
  });
});

describe('While charging', () => {
  const charging = toSheet(90, cylinder(C1, 1), ...from('8505'));
  const read = (text: string) => {
    const weighIn = thenDo(charging, { type: 'keyNow', reading: keyed(text, 'g') });
    return progressOf(legOf(weighIn), stopOf(weighIn, ASSUMED_SCALE), 4680);
  };

  it('says how much is still to go: 22 g at 8,437 with the stop at 8,415', () => {
    expect(read('8437')).toEqual({ droppedG: 68, toGoG: 22, state: 'before' });
  });
  it('says reached inside the band, past beyond it', () => {
    expect(read('8419')?.state).toBe('reached');
    expect(read('8411')?.state).toBe('reached');
    expect(read('8410')).toEqual({ droppedG: 95, toGoG: -5, state: 'past' });
  });
  it('holds still while a number is half keyed in', () => {
    expect(read('843')).toBeNull();
    expect(read('')).toBeNull();
  });
});

describe('An end reading that cannot be', () => {
  const leg = legOf(toSheet(90, cylinder(C1, 1, { hose: notFull }), ...from('8505')));
  it('is refused above the start, below the tare, and where less is gone than the hose holds', () => {
    expect(faultOfEnd(leg, keyed('8510', 'g'), 'lost', 4680)).toBe('endAboveStart');
    expect(faultOfEnd(leg, keyed('843', 'g'), 'lost', 4680)).toBe('belowTare');
    expect(faultOfEnd(leg, keyed('8495', 'g'), 'lost', 4680)).toBe('hoseMoreThanDrop');
    expect(faultOfEnd(leg, keyed('', 'g'), 'lost', 4680)).toBe('noReading');
    expect(faultOfEnd(leg, keyed('8387', 'g'), 'lost', 4680)).toBeNull();
  });
});

describe('A start reading against the book', () => {
  const leg = legOf(toSheet(90, cylinder(C1, 1), ...from('8505')));
  // Twice the uncertainty of a reading against the book with d = 5 g is 4.08 g; the full hose counts as content.
  it('shows a difference that the scale does not explain, and none that it does', () => {
    expect(gapAtStartG(leg, { tareG: 4680, contentG: 3853 }, ASSUMED_SCALE)).toBeNull();
    expect(gapAtStartG(leg, { tareG: 4680, contentG: 3857 }, ASSUMED_SCALE)).toBeNull();
    expect(gapAtStartG(leg, { tareG: 4680, contentG: 3953 }, ASSUMED_SCALE)).toBe(-100);
  });
});

describe('The questions', () => {
  it('begin with the cylinder when a charge sheet says what is done', () => {
    const weighIn = toSheet(90);
    expect(weighIn.step).toBe('cylinder');
    expect(stepsOf(weighIn, true)).toEqual([
      'cylinder',
      'weighing',
      'hose',
      'hosePlan',
      'start',
      'charging',
      'hoseEnd',
      'review',
    ]);
  });
  it('leave out the hose where it holds too little to count', () => {
    const weighIn = thenDo(
      toSheet(90, cylinder(C1, 1)),
      { type: 'weighing', toolId: null, mode: 'gross', unit: 'g' },
      { type: 'hose', hose: { full: true, content: null } },
    );
    expect(weighIn.step).toBe('start');
    expect(thenDo(weighIn, ...from('8505'), ...to('8415')).step).toBe('review');
  });
  it('ask for the vacuum before a full recharge, and for a figure before a refill', () => {
    expect(withoutSheet({ type: 'purpose', purpose: 'fullRecharge', target: null, sheetId: null }).step).toBe('vacuum');
    expect(withoutSheet({ type: 'purpose', purpose: 'refill', target: null, sheetId: null }).step).toBe('target');
    expect(withoutSheet({ type: 'purpose', purpose: 'adjust', target: null, sheetId: null }).step).toBe('cylinder');
  });
  it('ask for the hose before the next cylinder is chosen', () => {
    const changing = toSheet(310, cylinder(C1, 1), ...from('4240'), ...to('4012', 'g', true));
    expect(changing.step).toBe('hoseEnd');
    expect(thenDo(changing, { type: 'hoseEnd', hoseEnd: 'lost', into: null }).step).toBe('cylinder');
  });
  it('can be gone back over, all the way, without losing what was keyed in', () => {
    const reviewed = toSheet(
      90,
      cylinder(C1, 1),
      { type: 'weighing', toolId: null, mode: 'gross', unit: 'g' },
      { type: 'hose', hose: notFull },
      { type: 'hosePlan', hosePlan: 'lost' },
      ...from('8505'),
      ...to('8387'),
      { type: 'hoseEnd', hoseEnd: 'lost', into: null },
    );
    expect(reviewed.step).toBe('review');
    const seen: string[] = [];
    let back = reviewed;
    for (let i = 0; i < 7; i++) {
      back = thenDo(back, { type: 'back' });
      seen.push(back.step);
    }
    expect(seen).toEqual(['hoseEnd', 'charging', 'start', 'hosePlan', 'hose', 'weighing', 'cylinder']);
    expect(legOf(back).start.text).toBe('8505');
    expect(legOf(back).now.text).toBe('8387');
  });
  it('lead back from the second cylinder to the first one’s end reading', () => {
    const second = toSheet(
      310,
      cylinder(C1, 1),
      ...from('4240'),
      ...to('4012', 'g', true),
      { type: 'hoseEnd', hoseEnd: 'lost', into: null },
      cylinder(C2, 2),
    );
    const back = thenDo(second, { type: 'back' }, { type: 'back' });
    expect(back.step).toBe('hoseEnd');
    expect(back.legs).toHaveLength(1);
  });
  it('forget readings that belong to another cylinder or another way of weighing, and nothing else', () => {
    const chosen = toSheet(
      90,
      cylinder(C1, 1),
      { type: 'weighing', toolId: null, mode: 'gross', unit: 'g' },
      { type: 'hose', hose: notFull },
      { type: 'hosePlan', hosePlan: 'emptied' },
      ...from('8505'),
    );
    const other = thenDo(
      chosen,
      { type: 'back' },
      { type: 'back' },
      { type: 'back' },
      { type: 'back' },
      { type: 'back' },
      cylinder(C2, 2),
    );
    expect(legOf(other)).toMatchObject({
      cylinderId: C2,
      start: { text: '' },
      startAt: null,
      hose: notFull,
      hosePlan: 'emptied',
    });
  });
  it('start with what was chosen the last time', () => {
    expect(legOf(toSheet(90, cylinder(C1, 1, habits({ mode: 'zeroed', unit: 'oz' }))))).toMatchObject({
      mode: 'zeroed',
      unit: 'oz',
    });
  });
});
