import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { referenceData, requireValue } from '../reference/reference-data.fixture.ts';
import { saturationTempC } from '../reference/saturation.ts';
import type { SaturationTable } from '../reference/saturation-table.ts';
import { toBase } from '../units/quantities.ts';
import { superheatSubcoolingFixtures } from './superheat-subcooling.fixtures.ts';
import { type SuperheatSubcoolingRequest, superheatSubcoolingRequest } from './superheat-subcooling.schema.ts';
import { superheatSubcooling } from './superheat-subcooling.ts';

const calculate = (request: SuperheatSubcoolingRequest) => requireValue(superheatSubcooling(request, referenceData));
const psig = (value: number) => toBase('pressureGauge', 'psi', value);
const celsius = (fahrenheit: number) => toBase('temperature', '°F', fahrenheit);
const suction = (refrigerant: string, kPaGauge: number, lineTempC: number, more = {}) =>
  calculate({ refrigerant, suction: { kPaGauge, lineTempC }, ...more }).superheatK ?? Number.NaN;

describe('Superheat and subcooling', () => {
  it.each(superheatSubcoolingFixtures)('$name ($source)', ({ request, result }) => {
    expect(superheatSubcooling(superheatSubcoolingRequest.parse(request), referenceData)).toEqual({
      ok: true,
      value: result,
    });
  });

  it('gives 15.16 °F superheat and 9.71 °F subcooling for R-410A at 118 and 365 psig', () => {
    const { superheatK, subcoolingK } = calculate({
      refrigerant: 'R-410A',
      suction: { kPaGauge: psig(118), lineTempC: celsius(55) },
      liquid: { kPaGauge: psig(365), lineTempC: celsius(100) },
    });
    expect((superheatK ?? 0) * 1.8).toBeCloseTo(15.16, 2);
    expect((subcoolingK ?? 0) * 1.8).toBeCloseTo(9.71, 2);
  });

  it('takes the dew point for superheat: with the bubble point R-454B would read 2.66 °F and R-407C 6 K too much', () => {
    expect(suction('R-454B', psig(110), celsius(50)) * 1.8).toBeCloseTo(8.81, 2);
    const wrong = (designation: string, kPaGauge: number, lineC: number) => {
      const table = referenceData.findSaturationTable(designation) as SaturationTable;
      return lineC - requireValue(saturationTempC(table, 'bubble', kPaGauge + 101.325, { path: '' }));
    };
    expect(wrong('R-454B', psig(110), celsius(50)) * 1.8).toBeCloseTo(11.47, 2);
    expect(wrong('R-407C', psig(65), 12)).toBeCloseTo(13.01, 2);
    expect(suction('R-407C', psig(65), 12)).toBeCloseTo(6.86, 2);
  });

  it('takes the bubble point for subcooling', () => {
    const { bubbleC, dewC } = calculate({
      refrigerant: 'R-407C',
      liquid: { kPaGauge: 1500, lineTempC: 30 },
      suction: { kPaGauge: 1500, lineTempC: 50 },
    });
    expect(bubbleC).toBeLessThan((dewC ?? 0) - 4);
  });

  it('knows the altitude: at 1,500 m sea level’s air would hide 0.60 K of superheat', () => {
    const high = suction('R-410A', psig(118), celsius(55), { altitudeM: 1500 });
    expect(high).toBeCloseTo(9.02, 2);
    expect(high - suction('R-410A', psig(118), celsius(55))).toBeCloseTo(0.6, 2);
    expect(suction('R-410A', psig(118), celsius(55), { atmosphereKPaAbs: 84.556 })).toBeCloseTo(high, 3);
  });

  it('returns a superheat below zero as it is: the readings contradict one another', () => {
    expect(suction('R-32', 850, 0)).toBe(-4.996);
  });

  it('rises by one kelvin with each kelvin of the line, and falls with the suction pressure', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 300, max: 1500, noNaN: true }),
        fc.double({ min: -20, max: 40, noNaN: true }),
        (kPa, tempC) => {
          expect(suction('R-410A', kPa, tempC + 1) - suction('R-410A', kPa, tempC)).toBeCloseTo(1, 2);
          expect(suction('R-410A', kPa + 10, tempC)).toBeLessThan(suction('R-410A', kPa, tempC));
        },
      ),
    );
  });

  it('refuses a pressure outside the table and names the range as gauge pressure', () => {
    const outcome = superheatSubcooling(
      { refrigerant: 'R-32', suction: { kPaGauge: 5, lineTempC: 10 }, liquid: { kPaGauge: 9000, lineTempC: 10 } },
      referenceData,
    );
    expect(outcome).toMatchObject({
      ok: false,
      refusals: [
        { code: 'outOfRange', path: '/suction/kPaGauge', given: 5, allowed: [8.818, expect.any(Number)] },
        { code: 'outOfRange', path: '/liquid/kPaGauge', given: 9000 },
      ],
    });
  });

  it('refuses neither side, and two statements of the atmosphere', () => {
    expect(superheatSubcooling({ refrigerant: 'R-32' }, referenceData)).toMatchObject({
      refusals: [{ code: 'atLeastOneOf', allowed: ['suction', 'liquid'] }],
    });
    const both = { suction: { kPaGauge: 850, lineTempC: 10 }, atmosphereKPaAbs: 90, altitudeM: 1000 };
    expect(superheatSubcooling({ refrigerant: 'R-32', ...both }, referenceData)).toMatchObject({
      refusals: [{ code: 'onlyOneOf', path: '/altitudeM' }],
    });
  });

  it('reads a vacuum as a gauge pressure below zero: R-123', () => {
    // R-123 boils at 27.82 °C at one atmosphere, so below it the gauge stands under zero.
    const { dewC } = calculate({ refrigerant: 'R-123', suction: { kPaGauge: -60, lineTempC: 10 } });
    expect(dewC).toBeGreaterThan(0);
    expect(dewC).toBeLessThan(10);
  });
});
