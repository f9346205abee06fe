import type { Fixture } from '../calculations/fixture.ts';
import type { PressureTestRequest, PressureTestResponse } from './pressure-test.schema.ts';

export const pressureTestFixtures: readonly Fixture<PressureTestRequest, PressureTestResponse>[] = [
  {
    name: '41.5 bar gauge, cooled from 20 to 10 °C: the whole drop is cold nitrogen',
    source: 'gas law; real gas by the reference equation of nitrogen (CoolProp): 39.900 bar gauge',
    request: {
      startKPaGauge: 4150,
      startTempC: 20,
      endKPaGauge: 3990,
      endTempC: 10,
      minutes: 60,
      gaugeResolutionKPa: 10,
      tempResolutionC: 0.1,
    },
    result: {
      expectedEndKPaGauge: 4004.978,
      realGasNoteKPa: -14.797,
      changeKPa: -14.978,
      uncertaintyKPa: 8.111,
      undetectedLeakPaM3PerS: null,
      verdict: 'pass',
    },
  },
  {
    name: 'an hour at one temperature, two litres: what could still leak unseen',
    source: 'GUM Type B over resolutions of 10 kPa and 0.5 K, worked by hand',
    request: {
      startKPaGauge: 4150,
      startTempC: 20,
      endKPaGauge: 4150,
      endTempC: 20,
      minutes: 60,
      gaugeResolutionKPa: 10,
      tempResolutionC: 0.5,
      systemVolumeL: 2,
    },
    result: {
      expectedEndKPaGauge: 4150,
      realGasNoteKPa: 0,
      changeKPa: 0,
      uncertaintyKPa: 10.086,
      undetectedLeakPaM3PerS: 0.005603104,
      verdict: 'pass',
    },
  },
  {
    name: '150 psig from 21.1 to 4.4 °C at 65 kPa less: within the range of the note',
    source: 'gas law; CoolProp at 1136 kPa abs: ideal 1071.2, real 1069.5 kPa',
    request: {
      startKPaGauge: 1034.675,
      startTempC: 21.111111,
      endKPaGauge: 969.675,
      endTempC: 4.444444,
      minutes: 10,
      minimumMinutes: null,
      atmosphereKPaAbs: null,
      gaugeResolutionKPa: 1,
      tempResolutionC: 0.1,
      systemVolumeL: null,
    },
    result: {
      expectedEndKPaGauge: 970.333,
      realGasNoteKPa: -1.754,
      changeKPa: -0.658,
      uncertaintyKPa: 0.851,
      undetectedLeakPaM3PerS: null,
      verdict: 'inconclusive',
    },
  },
];
