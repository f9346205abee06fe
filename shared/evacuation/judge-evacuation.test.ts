import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { requireValue } from '../reference/reference-data.fixture.ts';
import { evacuationFixtures } from './evacuation.fixtures.ts';
import { type EvacuationRequest, evacuationRequest } from './evacuation.schema.ts';
import { judgeEvacuation } from './judge-evacuation.ts';

/** Readings at equal steps over ten minutes. */
const rising = (...microns: number[]) =>
  microns.map((micron, index) => ({ minute: (10 * index) / Math.max(1, microns.length - 1), micron }));
const judge = (microns: number[], change: Partial<EvacuationRequest> = {}) =>
  requireValue(judgeEvacuation({ readings: rising(...microns), ...change }));

describe('A vacuum decay test', () => {
  it.each(evacuationFixtures)('$name ($source)', ({ request, result }) => {
    expect(judgeEvacuation(evacuationRequest.parse(request))).toEqual({ ok: true, value: result });
  });

  it('has not started while the target is not reached; at the target it has', () => {
    expect(judge([501, 501, 501]).verdict).toBe('notReached');
    expect(judge([500, 500, 500]).verdict).toBe('pass');
    expect(judge([300, 300, 300], { targetMicron: 299 }).verdict).toBe('notReached');
  });

  it('is too short before ten minutes, whatever it shows', () => {
    const short = {
      readings: [
        { minute: 0, micron: 300 },
        { minute: 9.9, micron: 9000 },
      ],
    };
    expect(requireValue(judgeEvacuation(short)).verdict).toBe('tooShort');
    expect(judge([300, 300], { holdMinutes: 20 }).verdict).toBe('tooShort');
    expect(judge([300, 300, 300], { holdMinutes: 10 }).verdict).toBe('pass');
  });

  it('counts the time from the first reading, so readings that begin late are not credited', () => {
    const late = {
      readings: [
        { minute: 4, micron: 300 },
        { minute: 10, micron: 300 },
      ],
    };
    expect(requireValue(judgeEvacuation(late)).verdict).toBe('tooShort');
  });

  it('fails above the limit by the last reading; a value equal to the limit holds', () => {
    expect(judge([300, 490, 501]).verdict).toBe('fail');
    expect(judge([300, 480, 500]).verdict).toBe('pass');
    // Held is judged by the last reading: a peak between does not count against it.
    expect(judge([300, 520, 490]).verdict).toBe('pass');
    expect(judge([250, 690, 700], { holdLimitMicron: 700 }).verdict).toBe('pass');
  });

  it('takes a limit that was converted from Pa as the limit: 66.6611842105263 Pa are 500 micron', () => {
    const converted = 66.6611842105263 / 0.133322368421052;
    expect(converted).toBeGreaterThan(500);
    expect(judge([converted, converted, converted]).verdict).toBe('pass');
  });

  it('asks to look again where the limit held but the rise goes on', () => {
    expect(judge([100, 200, 300]).verdict).toBe('lookAgain');
    expect(judge([100, 100, 300])).toMatchObject({ shapeRatio: null, pattern: 'rising', verdict: 'lookAgain' });
    expect(judge([100, 50, 300])).toMatchObject({ shapeRatio: null, pattern: 'rising', verdict: 'lookAgain' });
  });

  it('draws the line between levelling and rising at a ratio of one half', () => {
    expect(judge([100, 200, 250])).toMatchObject({ shapeRatio: 0.5, pattern: 'rising' });
    expect(judge([100, 200, 249])).toMatchObject({ shapeRatio: 0.49, pattern: 'levelling' });
    expect(judge([100, 300, 250])).toMatchObject({ shapeRatio: -0.25, pattern: 'levelling' });
  });

  it('takes the middle by linear interpolation where no reading stands there', () => {
    const readings = [
      { minute: 0, micron: 200 },
      { minute: 4, micron: 280 },
      { minute: 8, micron: 320 },
      { minute: 10, micron: 330 },
    ];
    // At 5 minutes: 280 + 40/4 = 290; R = 40 / 90.
    expect(requireValue(judgeEvacuation({ readings }))).toMatchObject({ shapeRatio: 0.444, pattern: 'levelling' });
    // Two readings are a straight line.
    expect(judge([200, 300])).toMatchObject({ shapeRatio: 1, pattern: 'rising' });
  });

  it('is flat when the last reading is not above the first, and then leaks nothing', () => {
    expect(judge([300, 320, 300], { systemVolumeL: 2 })).toMatchObject({
      shapeRatio: null,
      pattern: 'flat',
      leakPaM3PerS: 0,
      verdict: 'pass',
    });
    expect(judge([300, 250])).toMatchObject({ riseMicron: -50, riseMicronPerMinute: -5, pattern: 'flat' });
  });

  it('says what little a single reading says', () => {
    expect(judge([300], { systemVolumeL: 2 })).toEqual({
      riseMicron: 0,
      riseMicronPerMinute: null,
      shapeRatio: null,
      pattern: 'flat',
      leakPaM3PerS: null,
      verdict: 'tooShort',
    });
  });

  it('says how large the leak is only with the volume: ten times the volume, ten times the leak', () => {
    const small = judge([300, 400, 500], { systemVolumeL: 2 }).leakPaM3PerS ?? 0;
    const large = judge([300, 400, 500], { systemVolumeL: 20 }).leakPaM3PerS ?? 0;
    expect(large / small).toBeCloseTo(10, 4);
  });

  it('refuses readings that are not in the order of time, each by its place', () => {
    const readings = [
      { minute: 0, micron: 300 },
      { minute: 5, micron: 310 },
      { minute: 5, micron: 320 },
      { minute: 4, micron: 330 },
    ];
    expect(judgeEvacuation({ readings })).toMatchObject({
      ok: false,
      refusals: [
        { code: 'notAscending', path: '/readings/2/minute', given: 5, allowed: 5 },
        { code: 'notAscending', path: '/readings/3/minute', given: 4, allowed: 5 },
      ],
    });
  });

  it('does not change its verdict when every reading is shifted in time', () => {
    const microns = fc.array(fc.integer({ min: 50, max: 800 }), { minLength: 2, maxLength: 8 });
    fc.assert(
      fc.property(microns, fc.integer({ min: 1, max: 100 }), (values, shift) => {
        const readings = values.map((micron, index) => ({ minute: index * 2, micron }));
        const shifted = readings.map(({ minute, micron }) => ({ minute: minute + shift, micron }));
        expect(judgeEvacuation({ readings: shifted })).toEqual(judgeEvacuation({ readings }));
      }),
    );
  });
});
