import { describe, expect, it } from 'vitest';
import { complaintsOf } from './complaints.ts';
import type { Question } from './form.ts';
import { relocation } from './forms/life.ts';
import { recovery } from './forms/recovery.ts';
import { retrofit } from './forms/retrofit.ts';
import { transfer } from './forms/transfer.ts';
import { answersOf, contextOf, grams, weighed } from './record.fixture.ts';
import { rowDangers } from './row-dangers.ts';
import { becomesFlammable } from './safety-class.ts';

const rowsOf = (form: typeof recovery): Question =>
  form.questions(answersOf({}), contextOf('S13.1')).find(({ is }) => is === 'rows') as Question;
const keys = (question: Question, answers: Parameters<typeof answersOf>[0], id = 'S13.1') =>
  complaintsOf(question, answersOf(answers), contextOf(id)).map(({ field, key }) => `${field} ${key}`);

describe('A question', () => {
  it('says at its blank what is missing', () => {
    expect(keys(rowsOf(recovery), { rows: [weighed('', 0, null)] })).toEqual([
      'rows.0.cylinderId record.need.cylinder',
      'rows.0.after record.need.reading',
    ]);
    expect(keys({ is: 'unit', id: 'unit' }, { unitId: '' })).toEqual(['unitId record.need.unit']);
  });

  it('names both readings where a cylinder became lighter while it was filled', () => {
    const answers = answersOf({ rows: [weighed('R1', 900, 100)] });
    expect(complaintsOf(rowsOf(recovery), answers, contextOf('S13.1'))).toEqual([
      { field: 'rows.0.after', key: 'record.wrong.lighter', params: { before: '8600 g', after: '7800 g' } },
    ]);
  });

  it('takes one cylinder once', () => {
    expect(keys(rowsOf(recovery), { rows: [weighed('R1', 0, 5), weighed('R1', 5, 9)] })).toEqual([
      'rows.1.cylinderId record.wrong.twice',
    ]);
  });

  it('leaves a value that cannot be read to its blank', () => {
    const row = { ...weighed('R1', 0, 5), after: grams('twelve') };
    expect(keys(rowsOf(recovery), { rows: [row] })).toEqual(['rows.0.after ']);
  });
});

describe('What must not be done', () => {
  /** Source: case S17.2. */
  it('S17.2: refilling a non-refillable cylinder is stopped while it is planned, and asks its reason once it is done', () => {
    const rows = [weighed('C1', 9500, 9100), weighed('N1', 0, 400)];
    expect(keys(rowsOf(transfer), { rows }, 'S17.2')).toEqual(['happened record.danger.stopped']);
    expect(keys(rowsOf(transfer), { rows, happened: true }, 'S17.2')).toEqual(['reason record.need.reason']);
    expect(keys(rowsOf(transfer), { rows, happened: true, reason: 'no other' }, 'S17.2')).toEqual([]);
  });

  /** Source: case S18.2. */
  it('S18.2: another refrigerant than the cylinder holds is seen as soon as the cylinder is chosen', () => {
    const answers = answersOf({ rows: [weighed('R1', 4000, null)] });
    expect(rowDangers(rowsOf(recovery), answers, contextOf('S18.2'))).toMatchObject([
      { is: 'otherRefrigerant', holds: 'R-410A', comes: 'R-22' },
    ]);
  });

  it('includes a fill past the limit, and a cylinder that cannot bear the pressure', () => {
    const context = contextOf('S13.1');
    const weak = {
      ...context,
      cylinder: (id: string) => {
        const known = context.cylinder(id);
        return known && { ...known, stampedLimitG: 500, servicePressureKPaGauge: 1793 };
      },
    };
    expect(
      rowDangers(rowsOf(recovery), answersOf({ rows: [weighed('R1', 0, 501)] }), weak).map(({ is }) => is),
    ).toEqual(['pressure', 'overLimit']);
    expect(
      rowDangers(rowsOf(recovery), answersOf({ rows: [weighed('R1', 0, 500)] }), weak).map(({ is }) => is),
    ).toEqual(['pressure']);
  });

  /** R-410A presses 3,339 kPa at 55 °C; 0.8 x 47.7 lb x 1.0589 = 40.41 lb. */
  it('judges what goes in, not what the cylinder is meant for: 19 kg of R-410A into a low-pressure one for R-134a', () => {
    const context = contextOf('S13.1');
    const meantForR134a = {
      ...context,
      firmJurisdiction: 'US' as const,
      cylinder: (id: string) => {
        const known = context.cylinder(id);
        const collar = { refrigerant: 'R-134a', waterCapacityG: 21_636.356, servicePressureKPaGauge: 1793 };
        return known && { ...known, ...collar, contentG: 0, byRefrigerant: [] };
      },
    };
    const into = (unit: string | null, massG: number | null) =>
      rowDangers(rowsOf(recovery), answersOf({ rows: [weighed('R1', 0, massG)] }), {
        ...meantForR134a,
        unit: unit === null ? null : ({ ...context.unit, refrigerant: unit } as typeof context.unit),
      });
    expect(into('R-410A', 19_000)).toMatchObject([
      { is: 'pressure', comes: 'R-410A' },
      { is: 'overLimit', wouldHoldG: 19_000, limitG: 18_328.59 },
    ]);
    expect(into('R-410A', null).map(({ is }) => is)).toEqual(['pressure']);
    expect(into('R-134a', 19_000)).toEqual([]);
    expect(into(null, 19_000)).toEqual([]);
  });

  /** Source: 49 CFR 173.301a(d): 5/4 of the service pressure in the US. */
  it('takes R-410A into the trade’s 400 psig cylinder in the US, not elsewhere', () => {
    const context = contextOf('S13.1');
    const at = (firmJurisdiction: 'US' | 'EU') => ({
      ...context,
      firmJurisdiction,
      cylinder: (id: string) => {
        const known = context.cylinder(id);
        return known && { ...known, servicePressureKPaGauge: 2757.9 };
      },
    });
    const answers = answersOf({ rows: [weighed('R1', 0, 500)] });
    expect(rowDangers(rowsOf(recovery), answers, at('US'))).toEqual([]);
    expect(rowDangers(rowsOf(recovery), answers, at('EU')).map(({ is }) => is)).toEqual(['pressure']);
  });

  /** Source: 49 CFR 180.205(c): due by month and year. */
  it('includes a fill after the month in which the re-test was due, by the day on which it was done', () => {
    const context = contextOf('S13.1');
    const due = {
      ...context,
      cylinder: (id: string) => {
        const known = context.cylinder(id);
        return known && { ...known, retestDue: '2026-02-28' };
      },
    };
    const filled = (at: string) => rowDangers(rowsOf(recovery), answersOf({ at, rows: [weighed('R1', 0, 500)] }), due);
    expect(filled('2026-02-28T23:59')).toEqual([]);
    expect(filled('2026-03-01T00:00')).toMatchObject([{ is: 'retest', due: '2026-02-28' }]);
    expect(filled('')).toMatchObject([{ is: 'retest' }]);
  });
});

describe('A unit that is moved or retrofitted', () => {
  const asked = (form: typeof recovery, over: Parameters<typeof answersOf>[0], id: string, emptied = false) => {
    const context = contextOf(id);
    const book = { known: true, massG: 0, byRefrigerant: [{ refrigerant: 'R-22', massG: 0 }] };
    const then = emptied ? { ...context, unit: context.unit && { ...context.unit, book } } : context;
    return form
      .questions(answersOf(over), then)
      .flatMap((question) => complaintsOf(question, answersOf(over), then))
      .map(({ key }) => key);
  };

  it('did not travel recovered while its book still holds refrigerant', () => {
    const over = { siteId: 'quay', documentNumber: 'W 12', documentDate: '2026-03-02', at: '2026-03-02T10:00' };
    expect(asked(relocation, { ...over, choice: 'recovered' }, 'S16.1')).toEqual(['record.wrong.recoverFirst']);
    expect(asked(relocation, { ...over, choice: 'recovered' }, 'S16.1', true)).toEqual([]);
    expect(asked(relocation, { ...over, choice: 'behindValves' }, 'S16.1')).toEqual([]);
    expect(asked(relocation, { ...over, choice: 'behindValves', siteId: '' }, 'S16.1')).toEqual(['record.need.site']);
  });

  it('takes another refrigerant once the old one is out, and not the same one', () => {
    const over = { refrigerant: 'R-407C', mass: grams('1400'), at: '2026-03-02T10:00' };
    expect(asked(retrofit, over, 'S16.2')).toEqual(['record.wrong.notEmpty']);
    expect(asked(retrofit, over, 'S16.2', true)).toEqual([]);
    expect(asked(retrofit, { ...over, refrigerant: 'R-22' }, 'S16.2', true)).toEqual(['record.wrong.sameRefrigerant']);
    expect(asked(retrofit, { at: over.at }, 'S16.2', true)).toEqual(['record.need.refrigerant', 'record.need.mass']);
  });

  it('is warned of where what comes burns, or burns more readily than what was in it (ISO 817 classes)', () => {
    expect(becomesFlammable('A1', 'A2L')).toBe(true);
    expect(becomesFlammable('A1', 'A3')).toBe(true);
    expect(becomesFlammable('A2L', 'A3')).toBe(true);
    expect(becomesFlammable('A1', 'B2L')).toBe(true);
    for (const [before, after] of [
      ['A1', 'A1'],
      ['A1', 'B1'],
      ['A2L', 'A2L'],
      ['A3', 'A1'],
      ['A3', 'A2L'],
    ] as const)
      expect(becomesFlammable(before, after), `${before} ${after}`).toBe(false);
  });
});

/** Source: 40 CFR 82.156(a) Table 1: R-410A below 200 lb, 0 in Hg; at 200 lb and more, 10 in Hg. */
describe('The level of a recovery that is completed', () => {
  const level: Question = { is: 'level', id: 'level' };
  const us = (lb: number) => {
    const context = contextOf('S13.1');
    const fullCharge = { massG: lb * 453.59237 } as never;
    return { ...context, jurisdiction: 'US', unit: context.unit && { ...context.unit, fullCharge } };
  };
  const said = (lb: number, over: Parameters<typeof answersOf>[0]) =>
    complaintsOf(level, answersOf({ choice: 'completed', ...over }), us(lb)).map(({ key }) => key);

  it('is asked for, and refused where it is not deep enough unless another level applies', () => {
    expect(said(250, {})).toEqual(['record.need.level']);
    expect(said(250, { levelReached: '9.5' })).toEqual(['record.wrong.notDeep.inHgVacuum']);
    expect(said(250, { levelReached: '10' })).toEqual([]);
    expect(said(250, { levelReached: '2', levelException: 'leaking' })).toEqual([]);
    expect(said(250, { levelReached: '2', levelException: 'other' })).toEqual(['record.need.reason']);
    expect(said(3, { levelReached: '0' })).toEqual([]);
    expect(said(3, { levelReached: 'deep' })).toEqual(['record.wrong.level']);
  });

  it('stands in the group with its clause, as required and as reached', () => {
    const answers = answersOf({
      rows: [weighed('R1', 0, 900)],
      choice: 'completed',
      levelReached: '10,5',
      machineAge: 'newer',
    });
    const told = (over: Parameters<typeof answersOf>[0]) =>
      recovery.build({ ...answers, ...over }, us(250)).body.recoveryLevel;
    const required = { value: '10', unit: 'inHgVacuum' };
    expect(told({})).toEqual({
      required,
      reached: { value: '10.5', unit: 'inHgVacuum' },
      exception: null,
      clause: '40 CFR 82.156(a), Table 1',
    });
    expect(told({ levelReached: '', levelException: 'leaking' })).toMatchObject({
      required,
      reached: null,
      exception: 'leaking',
      clause: expect.stringMatching(/^40 CFR 82\.156\(a\), Table 1; .*82\.156/),
    });
    expect(told({ choice: 'notCompleted' })).toBeNull();
  });

  it('is asked of a completed recovery under that law alone', () => {
    const asks = (over: Parameters<typeof answersOf>[0], jurisdiction: string) =>
      recovery.questions(answersOf(over), { ...us(3), jurisdiction }).some(({ is }) => is === 'level');
    expect([asks({ choice: 'completed' }, 'US'), asks({ choice: 'notCompleted' }, 'US')]).toEqual([true, false]);
    expect(asks({ choice: 'completed' }, 'EU')).toBe(false);
  });
});
