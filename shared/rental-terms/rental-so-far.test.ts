import { describe, expect, it } from 'vitest';
import { rentalOn } from './rental-so-far.ts';
import type { RentalTerms } from './rental-terms.schema.ts';

const terms = (since: string, dailyRate: string | null, currency = 'USD'): RentalTerms => ({
  id: '0195f0c4-0000-7000-8000-000000000001',
  since,
  conditions: { deposit: '80.00', dailyRate, currency },
});
const back = (since: string): RentalTerms => ({ ...terms(since, null), conditions: null });

// Worked by hand; the counting of days is common practice, no source.
describe('A rental so far', () => {
  it('counts the day the cylinder came and today', () => {
    expect(rentalOn([terms('2026-11-01', '0.35')], '2026-11-01')).toMatchObject({ days: 1 });
    expect(rentalOn([terms('2026-11-01', '0.35')], '2026-11-30')).toMatchObject({
      since: '2026-11-01',
      days: 30,
      costs: [{ amount: '10.50', currency: 'USD' }],
    });
  });

  it('costs each day by the rate of that day', () => {
    // 10 days at 0.35 and 20 at 0.4025: 3.50 + 8.05
    const dated = [terms('2026-11-01', '0.35'), terms('2026-11-11', '0.4025')];
    expect(rentalOn(dated, '2026-11-30')?.costs).toEqual([{ amount: '11.55', currency: 'USD' }]);
  });

  it('takes the later of two terms for one day', () => {
    const dated = [terms('2026-11-01', '9'), terms('2026-11-01', '0.5')];
    expect(rentalOn(dated, '2026-11-02')?.costs).toEqual([{ amount: '1.00', currency: 'USD' }]);
  });

  it('ends on the day the cylinder goes back and begins anew when it comes again', () => {
    const dated = [terms('2026-10-01', '1'), back('2026-10-20')];
    expect(rentalOn(dated, '2026-10-19')?.days).toBe(19);
    expect(rentalOn(dated, '2026-10-20')).toBeNull();
    expect(rentalOn([...dated, terms('2026-11-29', '1')], '2026-11-30')).toMatchObject({
      since: '2026-11-29',
      days: 2,
    });
  });

  it('is nothing before it begins and without terms', () => {
    expect(rentalOn([], '2026-11-30')).toBeNull();
    expect(rentalOn([terms('2026-12-01', '1')], '2026-11-30')).toBeNull();
  });

  it('crosses the end of February of a leap year and a change of clocks without losing a day', () => {
    expect(rentalOn([terms('2028-02-28', '1')], '2028-03-01')?.days).toBe(3);
    expect(rentalOn([terms('2026-10-24', '1')], '2026-10-26')?.days).toBe(3);
  });

  it('has no cost without a rate and keeps currencies apart', () => {
    expect(rentalOn([terms('2026-11-01', null)], '2026-11-05')?.costs).toEqual([]);
    const dated = [terms('2026-11-01', '1', 'EUR'), terms('2026-11-03', '2', 'USD')];
    expect(rentalOn(dated, '2026-11-03')?.costs).toEqual([
      { amount: '2.00', currency: 'EUR' },
      { amount: '2.00', currency: 'USD' },
    ]);
  });
});
