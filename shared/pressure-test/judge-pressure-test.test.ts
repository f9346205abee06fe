import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { requireValue } from '../reference/reference-data.fixture.ts';
import { toBase } from '../units/quantities.ts';
import { judgePressureTest } from './judge-pressure-test.ts';
import { pressureTestFixtures } from './pressure-test.fixtures.ts';
import { type PressureTestRequest, pressureTestRequest } from './pressure-test.schema.ts';

const psig = (value: number) => toBase('pressureGauge', 'psi', value);
const celsius = (fahrenheit: number) => toBase('temperature', '°F', fahrenheit);
const inPsi = (kPa: number) => kPa / toBase('pressureGauge', 'psi', 1);

/** 41.5 bar for an hour at 20 °C with good instruments. */
const steady: PressureTestRequest = {
  startKPaGauge: 4150,
  startTempC: 20,
  endKPaGauge: 4150,
  endTempC: 20,
  minutes: 60,
  gaugeResolutionKPa: 10,
  tempResolutionC: 0.5,
};
const judge = (change: Partial<PressureTestRequest> = {}) => requireValue(judgePressureTest({ ...steady, ...change }));

describe('The expected pressure after a change of temperature', () => {
  it.each(pressureTestFixtures)('$name ($source)', ({ request, result }) => {
    expect(judgePressureTest(pressureTestRequest.parse(request))).toEqual({ ok: true, value: result });
  });

  it('is 480.57 psig for 500 psig cooled from 70 to 50 °F (ideal), and 478.90 with the real-gas note', () => {
    const { expectedEndKPaGauge, realGasNoteKPa } = judge({
      startKPaGauge: psig(500),
      startTempC: celsius(70),
      endTempC: celsius(50),
    });
    expect(inPsi(expectedEndKPaGauge)).toBeCloseTo(480.57, 2);
    // Reference equation of nitrogen: 478.90 psig; the fit is good to 1 % of the change.
    expect(inPsi(expectedEndKPaGauge + (realGasNoteKPa ?? 0))).toBeCloseTo(478.9, 1);
    // Not the wrong ways: gauge pressures in the ratio 481.12, degrees Fahrenheit in the ratio 357.1.
    expect(inPsi(expectedEndKPaGauge)).toBeLessThan(481);
  });

  it('follows the ideal gas law in absolute pressures and kelvin, at any altitude', () => {
    const pressure = fc.double({ min: 100, max: 5000, noNaN: true });
    const temp = fc.double({ min: -20, max: 60, noNaN: true });
    const atmosphere = fc.double({ min: 60, max: 105, noNaN: true });
    fc.assert(
      fc.property(pressure, temp, temp, atmosphere, (startKPaGauge, startTempC, endTempC, atmosphereKPaAbs) => {
        const { expectedEndKPaGauge } = judge({ startKPaGauge, startTempC, endTempC, atmosphereKPaAbs });
        const start = (startKPaGauge + atmosphereKPaAbs) / (startTempC + 273.15);
        const end = (expectedEndKPaGauge + atmosphereKPaAbs) / (endTempC + 273.15);
        expect(end).toBeCloseTo(start, 4);
        const back = judge({
          startKPaGauge: expectedEndKPaGauge,
          startTempC: endTempC,
          endTempC: startTempC,
          atmosphereKPaAbs,
        });
        expect(back.expectedEndKPaGauge).toBeCloseTo(startKPaGauge, 2);
      }),
    );
  });
});

describe('The real-gas note', () => {
  it('agrees with the reference equation of nitrogen (CoolProp) to 1 % of the change', () => {
    expect(judge({ startKPaGauge: 4150, endTempC: 10 }).realGasNoteKPa).toBeCloseTo(-14.9, 0);
    expect(
      judge({ startKPaGauge: 1034.675, startTempC: celsius(70), endTempC: celsius(40) }).realGasNoteKPa,
    ).toBeCloseTo(-1.7, 0);
  });

  it('is known from 0 to 40 °C and 10 to 45 bar absolute, bounds included', () => {
    expect(judge({ startTempC: 0, endTempC: 40 }).realGasNoteKPa).not.toBeNull();
    expect(judge({ endTempC: 40.00000000000001 }).realGasNoteKPa).not.toBeNull();
    expect(judge({ startTempC: -0.001 }).realGasNoteKPa).toBeNull();
    expect(judge({ endTempC: 40.001 }).realGasNoteKPa).toBeNull();
    expect(judge({ startKPaGauge: 898.675 }).realGasNoteKPa).not.toBeNull();
    expect(judge({ startKPaGauge: 898.674 }).realGasNoteKPa).toBeNull();
    expect(judge({ startKPaGauge: 4398.675 }).realGasNoteKPa).not.toBeNull();
    expect(judge({ startKPaGauge: 4398.676 }).realGasNoteKPa).toBeNull();
  });
});

describe('The verdict', () => {
  it('cannot tell where 600 psig at 85 °F reads 585 psig at 70 °F: 1.93 psi above what was expected', () => {
    const undecided = judge({
      startKPaGauge: psig(600),
      startTempC: celsius(85),
      endKPaGauge: psig(585),
      endTempC: celsius(70),
      gaugeResolutionKPa: psig(1),
      tempResolutionC: 1,
    });
    expect(inPsi(undecided.expectedEndKPaGauge)).toBeCloseTo(583.07, 2);
    expect(inPsi(undecided.changeKPa)).toBeCloseTo(1.93, 2);
    expect(undecided.verdict).toBe('inconclusive');
  });

  it('is a fail beyond the uncertainty, and a drop of just the uncertainty is not', () => {
    const { uncertaintyKPa } = judge();
    expect(judge({ endKPaGauge: 4150 - uncertaintyKPa - 0.01 }).verdict).toBe('fail');
    expect(judge({ endKPaGauge: 4150 - uncertaintyKPa + 0.01 }).verdict).toBe('pass');
    expect(judge({ endKPaGauge: 4150 + uncertaintyKPa + 0.01 }).verdict).toBe('inconclusive');
  });

  it('holds the measured pressure against the real expectation, not the ideal one', () => {
    // 15 kPa below the ideal expectation is more than U, and yet only what cold nitrogen does.
    const cooled = judge({ endKPaGauge: 3990, endTempC: 10 });
    expect(cooled.changeKPa).toBeLessThan(-cooled.uncertaintyKPa);
    expect(cooled.verdict).toBe('pass');
  });

  it('is a fail also in a short test, and too short before ten minutes otherwise', () => {
    expect(judge({ endKPaGauge: 4000, minutes: 1 }).verdict).toBe('fail');
    expect(judge({ minutes: 9.9 }).verdict).toBe('tooShort');
    expect(judge({ minutes: 10 }).verdict).toBe('pass');
    expect(judge({ minutes: 60, minimumMinutes: 120 }).verdict).toBe('tooShort');
    expect(judge({ endKPaGauge: 4300, minutes: 1 }).verdict).toBe('tooShort');
  });

  it('cannot tell with instruments that are unsure of more than 1 % of the start', () => {
    expect(judge({ gaugeResolutionKPa: 100 }).verdict).toBe('inconclusive');
    expect(judge({ gaugeResolutionKPa: 40 }).verdict).toBe('pass');
  });

  it('cannot tell without a real-gas note when more than 5 K lie between', () => {
    const outside = (endTempC: number) => {
      const { expectedEndKPaGauge } = judge({ startTempC: -10, endTempC });
      return judge({ startTempC: -10, endTempC, endKPaGauge: expectedEndKPaGauge }).verdict;
    };
    expect(outside(-5)).toBe('pass');
    expect(outside(-4.9)).toBe('inconclusive');
  });

  it('takes an implausible rise as a verdict, and refuses only what is below vacuum', () => {
    expect(judge({ endKPaGauge: 8000 }).verdict).toBe('inconclusive');
    expect(judge({ endKPaGauge: -101.325 }).verdict).toBe('fail');
    expect(judgePressureTest({ ...steady, endKPaGauge: -101.326 })).toMatchObject({
      refusals: [{ code: 'tooSmall', path: '/endKPaGauge', given: -101.326, allowed: -101.325 }],
    });
  });

  it('never gets better when the end pressure falls', () => {
    const rank = { fail: 0, tooShort: 1, inconclusive: 1, pass: 1 } as const;
    fc.assert(
      fc.property(
        fc.double({ min: 4000, max: 4300, noNaN: true }),
        fc.double({ min: 0, max: 100, noNaN: true }),
        (end, less) => {
          const lower = rank[judge({ endKPaGauge: end - less }).verdict];
          expect(lower).toBeLessThanOrEqual(rank[judge({ endKPaGauge: end }).verdict]);
        },
      ),
    );
  });
});

describe('What a test leaves undetected', () => {
  it('is the uncertainty as a leak of the volume over the time; smaller the longer it is held', () => {
    const hour = judge({ systemVolumeL: 2 }).undetectedLeakPaM3PerS ?? 0;
    expect(hour).toBeCloseTo(0.0056031, 7);
    expect(judge({ systemVolumeL: 2, minutes: 120 }).undetectedLeakPaM3PerS).toBeCloseTo(hour / 2, 8);
    expect(judge().undetectedLeakPaM3PerS).toBeNull();
    expect(judge({ systemVolumeL: 2, minutes: 0 }).undetectedLeakPaM3PerS).toBeNull();
  });
});
