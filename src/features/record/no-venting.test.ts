import { describe, expect, it } from 'vitest';
import { vacuum } from './forms/empty-unit.ts';
import { overchargeRemoved, recovery } from './forms/recovery.ts';
import { answersOf, contextOf } from './record.fixture.ts';

/** Source: 40 CFR 82.154(a); carbon dioxide is exempt in any use, hydrocarbons and ammonia in some. */
describe('That refrigerant is not let out', () => {
  const said = (form: typeof recovery, refrigerant: string | null, jurisdiction: string | null) => {
    const context = contextOf('S13.1');
    const unit = refrigerant === null ? null : ({ ...context.unit, refrigerant } as typeof context.unit);
    return form
      .questions(answersOf({}), { ...context, unit, jurisdiction })
      .flatMap(({ cautions = [] }) => cautions.map(({ key }) => key))
      .filter((key) => key.startsWith('record.caution.noVenting'));
  };

  it('is said with the US law at a US site alone, and only of what that law covers', () => {
    for (const form of [recovery, overchargeRemoved, vacuum]) {
      expect(said(form, 'R-410A', 'US')).toEqual(['record.caution.noVentingUs']);
      expect(said(form, 'R-410A', 'EU')).toEqual(['record.caution.noVenting']);
      expect(said(form, 'R-290', 'US')).toEqual(['record.caution.noVenting']);
      expect(said(form, null, null)).toEqual(['record.caution.noVenting']);
    }
  });

  it('is not said of carbon dioxide', () => {
    for (const form of [recovery, overchargeRemoved, vacuum]) {
      expect([said(form, 'R-744', 'US'), said(form, 'R-744', 'EU')]).toEqual([[], []]);
    }
  });
});
