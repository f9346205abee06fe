import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type ParseOptions, parseQuantity } from './parse-quantity.ts';
import type { QuantityKind, UnitOf } from './quantities.ts';

function read<Kind extends QuantityKind>(
  kind: Kind,
  text: string,
  defaultUnit: UnitOf<Kind>,
  options: Partial<ParseOptions<Kind>> = {},
) {
  const outcome = parseQuantity(kind, text, { defaultUnit, ...options });
  if (!outcome.ok) return outcome.refusals[0];
  const { base, typed, understoodAs } = outcome.value;
  return {
    base,
    typed: `${typed.value} ${typed.unit}`,
    parts: understoodAs.map((part) => `${part.value} ${part.unit}`),
  };
}

describe('A length as people type it', () => {
  it.each([
    ['12ft 6in', 3.81, '150 in', ['12 ft', '6 in']],
    [`12' 6"`, 3.81, '150 in', ['12 ft', '6 in']],
    [`12'-6"`, 3.81, '150 in', ['12 ft', '6 in']],
    ['12’ 6″', 3.81, '150 in', ['12 ft', '6 in']],
    [`12' 6`, 3.81, '150 in', ['12 ft', '6 in']],
    ['39 ft 4 in', 11.9888, '472 in', ['39 ft', '4 in']],
    [`5' 10 1/2"`, 1.7907, '70.5 in', ['5 ft', '10.5 in']],
    ['39 pies 4 pulgadas', 11.9888, '472 in', ['39 ft', '4 in']],
    ['7,5', 7.5, '7.5 m', ['7.5 m']],
    ['7.5 m', 7.5, '7.5 m', ['7.5 m']],
    ['12', 12, '12 m', ['12 m']],
    ['40 FT', 12.192, '40 ft', ['40 ft']],
    ['120 cm', 1.2, '120 cm', ['120 cm']],
  ])('%s', (text, base, typed, parts) => {
    expect(read('length', text, 'm')).toEqual({ base, typed, parts });
  });

  it('takes the default unit for a number alone', () => {
    expect(read('length', '10', 'ft')).toMatchObject({ base: 3.048, typed: '10 ft' });
  });
});

describe('A pipe size', () => {
  it('is in inches when it is a bare fraction, whatever the default', () => {
    expect(read('pipeDiameter', '3/8', 'mm')).toEqual({ base: 9.525, typed: '0.375 in', parts: ['0.375 in'] });
    expect(read('pipeDiameter', '1-1/8 in', 'mm')).toMatchObject({ base: 28.575, typed: '1.125 in' });
    expect(read('pipeDiameter', '1 1/8"', 'mm')).toMatchObject({ base: 28.575 });
    expect(read('pipeDiameter', '1⅛', 'mm')).toMatchObject({ base: 28.575 });
    expect(read('pipeDiameter', '⅝', 'mm')).toMatchObject({ base: 15.875 });
    expect(read('pipeDiameter', '9.52', 'mm')).toMatchObject({ base: 9.52 });
  });

  it('keeps the fraction as typed for the screen', () => {
    const outcome = parseQuantity('pipeDiameter', '1 - 1 / 8 in', { defaultUnit: 'mm' });
    expect(outcome).toMatchObject({ ok: true, value: { understoodAs: [{ fraction: '1-1/8', unit: 'in' }] } });
  });

  it.each(['3/7', '9/8', '3/0', '3/8 mm', '3/8/2'])('refuses %s', (text) => {
    expect(read('pipeDiameter', text, 'mm')).toMatchObject({ code: 'notANumber', given: text });
  });
});

describe('A mass as people type it', () => {
  it.each([
    ['11 lb 4.5 oz', '180.5 oz', ['11 lb', '4.5 oz']],
    ['3 lb 7 oz', '55 oz', ['3 lb', '7 oz']],
    ['3 libras 7 onzas', '55 oz', ['3 lb', '7 oz']],
    ['0.5 kg', '0.5 kg', ['0.5 kg']],
    ['90', '90 g', ['90 g']],
    ['90 g', '90 g', ['90 g']],
    ['1,250.5', '1250.5 g', ['1250.5 g']],
    ['6 oz.', '6 oz', ['6 oz']],
  ])('%s', (text, typed, parts) => {
    expect(read('mass', text, 'g')).toMatchObject({ typed, parts });
  });

  it('is exact beside its double: 3 lb 7 oz is 1559.223771875 g', () => {
    const outcome = parseQuantity('mass', '3 lb 7 oz', { defaultUnit: 'g' });
    expect(outcome.ok && outcome.value.exact.equals('1559.223771875')).toBe(true);
  });

  it('asks which of two readings is meant, the locale’s first', () => {
    expect(read('mass', '1,250', 'g')).toEqual({
      code: 'ambiguousSeparator',
      path: '',
      given: '1,250',
      allowed: ['1250', '1.250'],
      params: { given: '1,250', grouped: '1250', decimal: '1.250', unit: 'g' },
    });
    expect(read('mass', '1,250', 'g', { decimalSeparator: ',' })).toMatchObject({ allowed: ['1.250', '1250'] });
    expect(read('mass', '1.250 kg', 'g', { decimalSeparator: ',' })).toMatchObject({ allowed: ['1250', '1.250'] });
    expect(read('mass', '1.250 kg', 'g', { separatorMeans: 'decimal' })).toMatchObject({ base: 1250 });
    expect(read('mass', '1.250 kg', 'g', { separatorMeans: 'grouping' })).toMatchObject({ base: 1_250_000 });
  });

  it('asks about a part that is too large: 11 lb 18 oz is more likely a slip than 12 lb 2 oz', () => {
    expect(read('mass', '11 lb 18 oz', 'g')).toMatchObject({ code: 'partTooLarge', allowed: 16 });
    expect(read('length', `5' 12"`, 'm')).toMatchObject({ code: 'partTooLarge', allowed: 12 });
  });

  it('takes no sign below zero, unless the scale was zeroed', () => {
    expect(read('mass', '-90 g', 'g', { path: '/reading' })).toMatchObject({ code: 'negative', path: '/reading' });
    expect(read('mass', '−90 g', 'g', { allowNegative: true })).toMatchObject({
      base: -90,
      typed: '-90 g',
      parts: ['-90 g'],
    });
    expect(read('mass', '-0', 'g')).toMatchObject({ base: 0, typed: '0 g' });
    expect(read('mass', '-3 lb 7 oz', 'g', { allowNegative: true })).toMatchObject({
      typed: '-55 oz',
      parts: ['-3 lb', '7 oz'],
    });
  });

  it.each([
    '',
    ' ',
    'abc',
    'g',
    '12 6',
    '3 oz 7 lb',
    '3.5 lb 7 oz',
    '1 lb 2 oz 3 g',
    '1 lb -2 oz 3',
    '1/2 g',
    '12.',
    '5 5',
  ])('refuses %j as no number', (text) => {
    expect(read('mass', text, 'g')).toMatchObject({ code: 'notANumber' });
  });

  it('names the units it knows when it does not know one', () => {
    expect(read('mass', '3 tons', 'g')).toMatchObject({
      code: 'unknownUnit',
      allowed: ['g', 'kg', 'lb', 'oz', 't'],
      params: { unit: 'tons' },
    });
    expect(read('mass', '3 g/m', 'g')).toMatchObject({ code: 'unknownUnit', params: { unit: 'g/m' } });
  });
});

describe('Pressure, temperature, vacuum and rates', () => {
  it('read gauge and absolute pressures as kinds of their own', () => {
    expect(read('pressureGauge', '118 psig', 'bar')).toMatchObject({ base: 118 * 6.894757293168361 });
    expect(read('pressureGauge', '8,5 bar', 'psi')).toMatchObject({ base: 850 });
    expect(read('pressureGauge', '850 kPa', 'psi')).toMatchObject({ base: 850 });
    expect(read('pressureGauge', '118', 'psi')).toMatchObject({ typed: '118 psi' });
    expect(read('pressureGauge', '118 psia', 'psi')).toMatchObject({ code: 'unknownUnit' });
    expect(read('pressureAbs', '9.5 bar abs', 'psi')).toMatchObject({ base: 950 });
    expect(read('pressureAbs', '118 psig', 'psi')).toMatchObject({ code: 'unknownUnit' });
  });

  it('read Fahrenheit with its offset, and a difference without', () => {
    expect(read('temperature', '55 °F', '°C')).toMatchObject({ base: 12.777777777777779, typed: '55 °F' });
    expect(read('temperature', '-40F', '°C')).toMatchObject({ base: -40 });
    expect(read('temperature', '-5', '°C')).toMatchObject({ base: -5 });
    expect(read('temperature', '32', '°F')).toMatchObject({ base: 0 });
    expect(read('temperatureDifference', '10 °F', 'K')).toMatchObject({ base: 50 / 9 });
  });

  it('read a vacuum in micron, Pa and mbar', () => {
    expect(read('vacuum', '500', 'micron')).toMatchObject({ base: 500 * 0.13332236842105263 });
    expect(read('vacuum', '500 micrones', 'Pa')).toMatchObject({ typed: '500 micron' });
    expect(read('vacuum', '0.5 mbar', 'micron')).toMatchObject({ base: 50 });
    expect(read('vacuum', '67 Pa', 'micron')).toMatchObject({ base: 67 });
  });

  it('read a rate by length, an area and a volume', () => {
    expect(read('massPerLength', '0.6 oz/ft', 'g/m')).toMatchObject({ base: expect.closeTo(55.806, 3) });
    expect(read('massPerLength', '20', 'g/m')).toMatchObject({ base: 20 });
    expect(read('area', '215 sq ft', 'm2')).toMatchObject({ base: expect.closeTo(19.974, 3) });
    expect(read('area', '20 m²', 'ft2')).toMatchObject({ base: 20 });
    expect(read('volume', '4', 'L')).toMatchObject({ base: 4 });
    expect(read('torque', '33 ft-lb', 'N.m')).toMatchObject({ base: expect.closeTo(44.742, 3) });
  });
});

describe('Parsing', () => {
  it('answers any text with a quantity or a refusal, and never throws', () => {
    const kinds = fc.constantFrom(['mass', 'g'], ['length', 'm'], ['pipeDiameter', 'mm'], ['temperature', '°C']);
    const alphabet = fc.constantFrom(...`0123456789.,-/ '"°FCftinlbozkgm⅜\u00a0`);
    fc.assert(
      fc.property(kinds, fc.string({ unit: alphabet, maxLength: 16 }), ([kind, unit], text) => {
        const outcome = parseQuantity(kind as 'mass', text, { defaultUnit: unit as 'g' });
        if (outcome.ok) expect(Number.isFinite(outcome.value.base)).toBe(true);
        else
          expect(outcome.refusals[0]?.code).toMatch(
            /^(notANumber|unknownUnit|negative|ambiguousSeparator|partTooLarge)$/,
          );
      }),
      { numRuns: 2000 },
    );
  });

  it('reads its own typed value back to the same exact quantity', () => {
    const parts = fc.tuple(fc.nat(999), fc.nat(15), fc.nat(99));
    fc.assert(
      fc.property(parts, ([pounds, ounces, hundredths]) => {
        const part = String(hundredths).padStart(2, '0');
        const first = parseQuantity('mass', `${pounds} lb ${ounces}.${part} oz`, { defaultUnit: 'g' });
        if (!first.ok) throw new Error('refused');
        const again = parseQuantity('mass', `${first.value.typed.value} oz`, { defaultUnit: 'g' });
        expect(again.ok && again.value.exact.equals(first.value.exact)).toBe(true);
      }),
    );
  });
});
