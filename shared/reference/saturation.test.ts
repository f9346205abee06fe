import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { referenceData, requireValue } from './reference-data.fixture.ts';
import {
  liquidDensityKgM3,
  maxTempC,
  type SaturationCurve,
  saturationKPaAbs,
  saturationTempC,
  vapourDensityKgM3,
} from './saturation.ts';
import type { SaturationTable } from './saturation-table.ts';

const at = { path: '/suction/kPaGauge' };
const table = (designation: string) => referenceData.findSaturationTable(designation) as SaturationTable;
const every = referenceData.refrigerantDesignations().map(table);
const curve = fc.constantFrom<SaturationCurve>('bubble', 'dew');
describe('Saturation by interpolation', () => {
  it('reads a row as it stands (CoolProp 8.0.1dev, HEOS: R-410A at 40 °C)', () => {
    expect(requireValue(saturationKPaAbs(table('R-410A'), 'bubble', 40, at))).toBe(2425.642);
    expect(requireValue(saturationKPaAbs(table('R-410A'), 'dew', 40, at))).toBe(2418.608);
    expect(requireValue(saturationTempC(table('R-410A'), 'bubble', 2425.642, at))).toBeCloseTo(40, 9);
    expect(requireValue(liquidDensityKgM3(table('R-410A'), 40, at))).toBeCloseTo(975.72, 2);
    expect(requireValue(vapourDensityKgM3(table('R-410A'), 40, at))).toBeCloseTo(103.236, 3);
  });

  it('gives the published handbook points of R-32 and R-22 at 0 and 40 °C (memory, same equation of state)', () => {
    expect(requireValue(saturationKPaAbs(table('R-32'), 'dew', 0, at))).toBeCloseTo(813.1, 1);
    expect(requireValue(liquidDensityKgM3(table('R-32'), 40, at))).toBeCloseTo(893.0, 1);
    expect(requireValue(saturationKPaAbs(table('R-22'), 'dew', 40, at))).toBeCloseTo(1533.6, 1);
  });

  it('comes back to the temperature it started from, on both curves of every refrigerant', () => {
    fc.assert(
      fc.property(fc.constantFrom(...every), curve, fc.double({ min: 0, max: 1, noNaN: true }), (any, side, share) => {
        const tempC = any.minTempC + share * (maxTempC(any) - any.minTempC);
        const kPaAbs = requireValue(saturationKPaAbs(any, side, tempC, at));
        expect(requireValue(saturationTempC(any, side, kPaAbs, at))).toBeCloseTo(tempC, 6);
      }),
    );
  });

  it('has the dew point above the bubble point, and rises with pressure', () => {
    fc.assert(
      fc.property(fc.constantFrom(...every), fc.double({ min: 0.001, max: 0.998, noNaN: true }), (any, share) => {
        const lowest = any.bubbleKPaAbs[0] as number;
        const highest = any.dewKPaAbs.at(-1) as number;
        const kPaAbs = lowest + share * (highest - lowest);
        const dewC = requireValue(saturationTempC(any, 'dew', kPaAbs, at));
        expect(dewC).toBeGreaterThanOrEqual(requireValue(saturationTempC(any, 'bubble', kPaAbs, at)) - 1e-9);
        expect(requireValue(saturationTempC(any, 'dew', kPaAbs * 1.001, at))).toBeGreaterThan(dewC);
      }),
    );
  });

  it('does not extrapolate: outside the table it names the range', () => {
    expect(saturationKPaAbs(table('R-744'), 'dew', 30.5, { path: '/tempC' })).toEqual({
      ok: false,
      refusals: [
        {
          code: 'outOfRange',
          path: '/tempC',
          given: 30.5,
          allowed: [-50, 30],
          params: { given: 30.5, min: -50, max: 30, unit: '°C', what: 'R-744' },
        },
      ],
    });
    expect(liquidDensityKgM3(table('R-32'), -50.001, at).ok).toBe(false);
    expect(vapourDensityKgM3(table('R-32'), 65.001, at).ok).toBe(false);
    expect(saturationTempC(table('R-32'), 'dew', 110.142, at)).toMatchObject({
      ok: false,
      refusals: [{ allowed: [110.143, expect.any(Number)] }],
    });
  });

  it('names the range of a gauge pressure as gauge pressure, and accepts what it names', () => {
    const lessKPa = 84.5559671;
    const gauge = (kPaGauge: number) =>
      saturationTempC(table('R-32'), 'dew', kPaGauge + lessKPa, {
        path: '/suction/kPaGauge',
        given: kPaGauge,
        lessKPa,
      });
    const refusal = gauge(1);
    if (refusal.ok) throw new Error('expected a refusal');
    const [first] = refusal.refusals;
    const [lowest, highest] = (first ? first.allowed : null) as [number, number];
    expect(first).toMatchObject({ code: 'outOfRange', given: 1 });
    expect(lowest).toBe(25.588);
    expect(gauge(lowest).ok && gauge(highest).ok).toBe(true);
    expect(gauge(lowest - 0.001).ok || gauge(highest + 0.001).ok).toBe(false);
  });
});
