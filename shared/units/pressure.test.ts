import { expect, it } from 'vitest';
import { absoluteOf, atmosphereAtAltitude, gaugeOf, kPaGauge, STANDARD_ATMOSPHERE } from './pressure.ts';
import { toBase } from './quantities.ts';

it('adds the standard atmosphere: 450 psig is 3203.966 kPa absolute', () => {
  const absolute = absoluteOf(kPaGauge(toBase('pressureGauge', 'psi', 450)), STANDARD_ATMOSPHERE);
  expect(absolute).toBeCloseTo(464.69595 * 6.894757293168, 3);
  expect(gaugeOf(absolute, STANDARD_ATMOSPHERE)).toBeCloseTo(450 * 6.894757293168, 9);
});

it('falls with altitude as the ICAO standard atmosphere does', () => {
  expect(atmosphereAtAltitude(0)).toBe(101.325);
  expect(atmosphereAtAltitude(1500)).toBeCloseTo(84.56, 2);
  // ICAO Doc 7488: 54.02 kPa at 5,000 m (memory).
  expect(atmosphereAtAltitude(5000)).toBeCloseTo(54.02, 2);
});
