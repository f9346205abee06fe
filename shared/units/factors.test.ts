// @ts-expect-error: the package ships no declarations
import convertUnits from 'convert-units';
import Fraction from 'fraction.js';
import { describe, expect, it } from 'vitest';
import {
  AIR_FLOW_FACTORS,
  AREA_FACTORS,
  LENGTH_FACTORS,
  MASS_FACTORS,
  MASS_PER_LENGTH_FACTORS,
  MASS_PER_VOLUME_FACTORS,
  POWER_FACTORS,
  PRESSURE_FACTORS,
  TORQUE_FACTORS,
  VOLUME_FACTORS,
} from './factors.ts';

const convert = convertUnits as (value: number) => { from(unit: string): { to(unit: string): number } };
const as = (value: string) => new Fraction(value);

describe('The unit factors', () => {
  it('are exact where they are defined so', () => {
    expect(MASS_FACTORS.lb.perUnit.equals(as('453.59237'))).toBe(true);
    expect(MASS_FACTORS.oz.perUnit.equals(as('28.349523125'))).toBe(true);
    expect(LENGTH_FACTORS.in.perUnit.mul(12).equals(LENGTH_FACTORS.ft.perUnit)).toBe(true);
    expect(AREA_FACTORS.ft2.perUnit.equals(as('0.09290304'))).toBe(true);
    expect(VOLUME_FACTORS.ft3.perUnit.equals(as('28.316846592'))).toBe(true);
    expect(AIR_FLOW_FACTORS.cfm.perUnit.equals(as('1.69901079552'))).toBe(true);
    expect(TORQUE_FACTORS['ft.lbf'].perUnit.equals(as('1.3558179483314004'))).toBe(true);
    // 1 bar is 750.06 Torr; 760,000 micron are one atmosphere, without a remainder.
    expect(PRESSURE_FACTORS.micron.perUnit.mul(760_000).equals(PRESSURE_FACTORS.atm.perUnit)).toBe(true);
  });

  it('agree with the published rounded figures (NIST SP 811 and the definitions)', () => {
    expect(PRESSURE_FACTORS.psi.perUnit.valueOf()).toBeCloseTo(6.894757293168, 12);
    expect(PRESSURE_FACTORS.inHg.perUnit.valueOf()).toBeCloseTo(3.386388640341, 12);
    expect(PRESSURE_FACTORS.micron.perUnit.valueOf() * 1000).toBeCloseTo(0.133322368421, 12);
    expect(MASS_PER_LENGTH_FACTORS['oz/ft'].perUnit.valueOf()).toBeCloseTo(93.0102464731, 10);
    expect(MASS_PER_VOLUME_FACTORS['lb/1000ft3'].perUnit.valueOf()).toBeCloseTo(0.01601846337, 11);
    expect(POWER_FACTORS.ton.perUnit.valueOf()).toBeCloseTo(3516.8528420667, 10);
    expect(POWER_FACTORS.ton.perUnit.valueOf() * 3.5).toBeCloseTo(12_308.985, 3);
  });

  // An independent library whose own factors are rounded (1 ft = 0.30479999 m, 1 oz = 28.3495 g), hence the tolerance.
  it.each([
    ['lb', 'g', MASS_FACTORS.lb],
    ['oz', 'g', MASS_FACTORS.oz],
    ['kg', 'g', MASS_FACTORS.kg],
    ['ft', 'm', LENGTH_FACTORS.ft],
    ['in', 'm', LENGTH_FACTORS.in],
    ['psi', 'kPa', PRESSURE_FACTORS.psi],
    ['bar', 'kPa', PRESSURE_FACTORS.bar],
    ['torr', 'kPa', PRESSURE_FACTORS.Torr],
    ['ft2', 'm2', AREA_FACTORS.ft2],
    ['ft3', 'l', VOLUME_FACTORS.ft3],
  ] as const)('agree with a second library: %s in %s', (from, to, factor) => {
    const theirs = convert(1).from(from).to(to);
    expect(factor.perUnit.valueOf() / theirs).toBeCloseTo(1, 4);
  });

  it('name a source each', () => {
    for (const table of [MASS_FACTORS, LENGTH_FACTORS, PRESSURE_FACTORS, TORQUE_FACTORS, POWER_FACTORS]) {
      for (const factor of Object.values(table)) expect(factor.source.length).toBeGreaterThan(5);
    }
    expect(PRESSURE_FACTORS.inHg.exact).toBe(false);
  });
});
