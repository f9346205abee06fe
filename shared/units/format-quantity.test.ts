import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { formatForInput, formatQuantity } from './format-quantity.ts';
import { parseQuantity } from './parse-quantity.ts';
import { fromBase, QUANTITIES, type QuantityKind, toBase, unitsOf } from './quantities.ts';

const us = { locale: 'en-US' };
const spain = { locale: 'es-ES' };
const show = (text: string) => text.replaceAll('\u00a0', ' ');

describe('A quantity on the screen', () => {
  it('shows the unit and the locale’s separators', () => {
    expect(show(formatQuantity('mass', 1250, 'g', us))).toBe('1,250 g');
    expect(show(formatQuantity('mass', 12500, 'g', spain))).toBe('12.500 g');
    expect(show(formatQuantity('length', 7.5, 'm', spain))).toBe('7,50 m');
    expect(show(formatQuantity('mass', 90, 'oz', us))).toBe('3.2 oz');
    expect(show(formatQuantity('pressureGauge', 813.58, 'psi', us))).toBe('118.0 psig');
    expect(show(formatQuantity('pressureAbs', 950, 'bar', us))).toBe('9.50 bar abs');
    expect(show(formatQuantity('temperature', 12.7777777, '°F', us))).toBe('55.0 °F');
    expect(show(formatQuantity('temperatureDifference', 5.5555555, '°F', us))).toBe('10.0 °F');
    expect(show(formatQuantity('vacuum', 66.6611842105, 'micron', us))).toBe('500 microns');
    expect(show(formatQuantity('vacuum', 66.6611842105, 'micron', { locale: 'es-MX' }))).toBe('500 micrones');
    expect(show(formatQuantity('area', 20, 'm2', us))).toBe('20.00 m²');
  });

  it('shows feet with inches and pounds with ounces, carrying what rounds up', () => {
    expect(show(formatQuantity('length', 11.9888, 'ft-in', us))).toBe('39 ft 4 in');
    expect(show(formatQuantity('length', 3.045, 'ft-in', us))).toBe('10 ft 0 in');
    expect(show(formatQuantity('length', 0.1, 'ft-in', us))).toBe('4 in');
    expect(show(formatQuantity('mass', 1559.223771875, 'lb-oz', us))).toBe('3 lb 7.0 oz');
    expect(show(formatQuantity('mass', 453.5, 'lb-oz', us))).toBe('1 lb 0.0 oz');
    expect(show(formatQuantity('mass', -500, 'lb-oz', us))).toBe('-1 lb 1.6 oz');
  });

  it('rounds halves away from zero, and shows a sign where asked', () => {
    expect(show(formatQuantity('mass', 2.5, 'g', us))).toBe('3 g');
    expect(show(formatQuantity('mass', -2.5, 'g', us))).toBe('-3 g');
    expect(show(formatQuantity('mass', 12, 'g', { ...us, signed: true }))).toBe('+12 g');
    expect(show(formatQuantity('mass', -0.2, 'g', us))).toBe('0 g');
  });
});

describe('A quantity in a field', () => {
  it('has no thousands separator and never exactly three decimals', () => {
    expect(formatForInput('mass', 1250, 'kg', us)).toBe('1.25');
    expect(formatForInput('mass', 1125, 'kg', us)).toBe('1.1250');
    expect(formatForInput('mass', 12500, 'g', spain)).toBe('12500');
    expect(formatForInput('length', 7.5, 'm', spain)).toBe('7,5');
  });

  it('reads back as the number that was shown, in every kind, unit and locale', () => {
    const kindAndUnit = (Object.keys(QUANTITIES) as QuantityKind[]).flatMap((kind) =>
      unitsOf(kind).map((unit) => [kind, unit] as const),
    );
    fc.assert(
      fc.property(
        fc.constantFrom(...kindAndUnit),
        fc.constantFrom('en-US', 'es-ES', 'es-MX', 'fr-FR', 'de-CH', 'ar-EG'),
        fc.double({ min: 0, max: 99_999, noNaN: true }),
        ([kind, unit], locale, shown) => {
          const base = toBase(kind, unit as never, shown);
          const text = formatForInput(kind, base, unit as never, { locale, decimals: 3 });
          const outcome = parseQuantity(kind, text, { defaultUnit: unit as never, allowNegative: true });
          expect(outcome.ok && Math.abs(Number(outcome.value.typed.value) - shown)).toBeLessThanOrEqual(0.000501);
        },
      ),
      { numRuns: 500 },
    );
  });

  it('converts to a unit and back without drift', () => {
    for (const kind of Object.keys(QUANTITIES) as QuantityKind[]) {
      for (const unit of unitsOf(kind)) {
        expect(fromBase(kind, unit as never, toBase(kind, unit as never, 123.456))).toBeCloseTo(123.456, 9);
      }
    }
  });
});
