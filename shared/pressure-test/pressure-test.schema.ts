import { z } from 'zod';
import { returned } from '../calculations/decimals.ts';
import { atmosphereKPaAbsField, kPaGaugeField, systemVolumeLField } from '../calculations/fields.ts';

/** Of the gas in the pipe, in the shade. */
const gasTempC = z.number().min(-60).max(100);
const minutes = z.number().min(0).max(1_000_000);

/** `POST /calculations/pressure-test`: a standing pressure with dry nitrogen, compensated for temperature. */
export const pressureTestRequest = z.strictObject({
  startKPaGauge: z.number().positive().max(20_000),
  startTempC: gasTempC,
  endKPaGauge: kPaGaugeField,
  endTempC: gasTempC,
  minutes,
  minimumMinutes: minutes.nullish().describe('10 where absent: common practice; manual or code may ask for hours'),
  atmosphereKPaAbs: atmosphereKPaAbsField.nullish(),
  gaugeResolutionKPa: z.number().positive().max(1000),
  tempResolutionC: z.number().positive().max(20),
  systemVolumeL: systemVolumeLField.nullish(),
});
export type PressureTestRequest = z.output<typeof pressureTestRequest>;

export const PRESSURE_TEST_VERDICTS = ['fail', 'tooShort', 'inconclusive', 'pass'] as const;

export const pressureTestResponse = z.strictObject({
  expectedEndKPaGauge: returned('kPa', 'by the ideal gas law'),
  realGasNoteKPa: returned('kPa', 'real minus ideal expectation').nullable(),
  changeKPa: returned('kPa', 'measured minus ideal expectation'),
  uncertaintyKPa: returned('kPa', 'expanded, k = 2'),
  undetectedLeakPaM3PerS: returned('Pa m3/s', 'a leak of this size would not have been seen').nullable(),
  verdict: z.enum(PRESSURE_TEST_VERDICTS).describe('pass is shown as "no leak seen"'),
});
export type PressureTestResponse = z.output<typeof pressureTestResponse>;
