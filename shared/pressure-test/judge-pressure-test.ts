import { asReturned, asReturnedOrNull } from '../calculations/decimals.ts';
import { done, type Outcome, refused } from '../problems/outcome.ts';
import { STANDARD_ATMOSPHERE_KPA, ZERO_CELSIUS_K } from '../units/factors.ts';
import { roundToStep, snap12, snapSum } from '../units/round.ts';
import type { PressureTestRequest, PressureTestResponse } from './pressure-test.schema.ts';

/** Common practice, no source: manual or code may ask for hours. */
export const MINIMUM_MINUTES = 10;

/** Where the fit to the reference equation of nitrogen was made; bounds included. */
const REAL_GAS_RANGE = { minTempC: 0, maxTempC: 40, minKPaAbs: 1000, maxKPaAbs: 4500 } as const;
/** Real change = ideal change x (1 + 0.0024 P1/bar): fitted to CoolProp's nitrogen, good to about 1 % of the change. */
const REAL_GAS_PER_BAR = 0.0024;
/** Without the real-gas note a larger difference leaves an error that the judgement does not know. */
const MOST_DEGREES_WITHOUT_NOTE = 5;
/** A test whose uncertainty is above this share of the start pressure proves nothing. */
const MOST_UNCERTAIN_SHARE = 0.01;

/**
 * Judges a standing pressure test of a fixed volume: P2 = P1 x T2 / T1 in absolute pressures and kelvin. Where the
 * real-gas note is known, the measured pressure is held against the real expectation.
 *
 * The uncertainty is a GUM Type B evaluation (JCGM 100): resolutions as rectangular distributions, both gauge
 * readings and both temperatures, k = 2. Refuses an end pressure below vacuum (`tooSmall` at `/endKPaGauge`).
 */
export function judgePressureTest(request: PressureTestRequest): Outcome<PressureTestResponse> {
  const atmosphereKPaAbs = request.atmosphereKPaAbs ?? STANDARD_ATMOSPHERE_KPA;
  const startKPaAbs = request.startKPaGauge + atmosphereKPaAbs;
  if (snapSum(request.endKPaGauge, atmosphereKPaAbs) < 0) {
    const allowed = roundToStep(-atmosphereKPaAbs, 0.001, 'up');
    return refused({ code: 'tooSmall', path: '/endKPaGauge', given: request.endKPaGauge, allowed });
  }
  const startK = request.startTempC + ZERO_CELSIUS_K;
  const endK = request.endTempC + ZERO_CELSIUS_K;
  const expectedKPaAbs = startKPaAbs * (endK / startK);
  const noteKPa = realGasNoteKPa(request, startKPaAbs, expectedKPaAbs - startKPaAbs);
  const changeKPa = snapSum(request.endKPaGauge, atmosphereKPaAbs, -expectedKPaAbs);
  const uncertaintyKPa = expandedUncertaintyKPa(request, startKPaAbs, startK, endK);
  const seconds = request.minutes * 60;
  const undetected =
    request.systemVolumeL == null || seconds === 0
      ? null
      : (request.systemVolumeL / 1000) * ((uncertaintyKPa * 1000) / seconds);
  return done({
    expectedEndKPaGauge: asReturned(expectedKPaAbs - atmosphereKPaAbs, 'kPa'),
    realGasNoteKPa: asReturnedOrNull(noteKPa, 'kPa'),
    changeKPa: asReturned(changeKPa, 'kPa'),
    uncertaintyKPa: asReturned(uncertaintyKPa, 'kPa'),
    undetectedLeakPaM3PerS: asReturnedOrNull(undetected, 'Pa m3/s'),
    verdict: verdictOf(request, snapSum(changeKPa, -(noteKPa ?? 0)), snap12(uncertaintyKPa), noteKPa !== null),
  });
}

function realGasNoteKPa(request: PressureTestRequest, startKPaAbs: number, idealChangeKPa: number): number | null {
  const pressure = snap12(startKPaAbs);
  const temps = [snap12(request.startTempC), snap12(request.endTempC)];
  const isInside =
    pressure >= REAL_GAS_RANGE.minKPaAbs &&
    pressure <= REAL_GAS_RANGE.maxKPaAbs &&
    temps.every((tempC) => tempC >= REAL_GAS_RANGE.minTempC && tempC <= REAL_GAS_RANGE.maxTempC);
  return isInside ? idealChangeKPa * REAL_GAS_PER_BAR * (startKPaAbs / 100) : null;
}

function expandedUncertaintyKPa(
  { gaugeResolutionKPa, tempResolutionC }: PressureTestRequest,
  startKPaAbs: number,
  startK: number,
  endK: number,
): number {
  const ratio = endK / startK;
  const gauge = gaugeResolutionKPa / Math.sqrt(12);
  const temp = tempResolutionC / Math.sqrt(12);
  const parts = [gauge * ratio, gauge, temp * (startKPaAbs / startK), temp * ((startKPaAbs * ratio) / startK)];
  return 2 * Math.hypot(...parts);
}

function verdictOf(
  request: PressureTestRequest,
  againstExpectedKPa: number,
  uncertaintyKPa: number,
  isNoteKnown: boolean,
): PressureTestResponse['verdict'] {
  if (againstExpectedKPa < -uncertaintyKPa) return 'fail';
  if (snap12(request.minutes) < snap12(request.minimumMinutes ?? MINIMUM_MINUTES)) return 'tooShort';
  const degreesApart = Math.abs(snapSum(request.endTempC, -request.startTempC));
  const cannotTell =
    againstExpectedKPa > uncertaintyKPa ||
    uncertaintyKPa > snap12(request.startKPaGauge * MOST_UNCERTAIN_SHARE) ||
    (!isNoteKnown && degreesApart > MOST_DEGREES_WITHOUT_NOTE);
  return cannotTell ? 'inconclusive' : 'pass';
}
