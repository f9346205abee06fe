import type { Fixture } from '../calculations/fixture.ts';
import type { EvacuationRequest, EvacuationResponse } from './evacuation.schema.ts';

export const evacuationFixtures: readonly Fixture<EvacuationRequest, EvacuationResponse>[] = [
  {
    name: '300, 380, 400 micron over ten minutes: levels off, passes 500',
    source: 'worked by hand: R = 20 / 80',
    request: {
      readings: [
        { minute: 0, micron: 300 },
        { minute: 5, micron: 380 },
        { minute: 10, micron: 400 },
      ],
    },
    result: {
      riseMicron: 100,
      riseMicronPerMinute: 10,
      shapeRatio: 0.25,
      pattern: 'levelling',
      leakPaM3PerS: null,
      verdict: 'pass',
    },
  },
  {
    name: '300, 400, 500 micron over ten minutes, four litres: the shape of a leak although it ends at 500',
    source: 'worked by hand: Q = 0.004 m3 x 13.332 Pa / 600 s = 8.888e-5 per 100 micron, 1.778e-4 for 200',
    request: {
      readings: [
        { minute: 0, micron: 300 },
        { minute: 5, micron: 400 },
        { minute: 10, micron: 500 },
      ],
      targetMicron: null,
      holdMinutes: null,
      holdLimitMicron: null,
      systemVolumeL: 4,
    },
    result: {
      riseMicron: 200,
      riseMicronPerMinute: 20,
      shapeRatio: 1,
      pattern: 'rising',
      leakPaM3PerS: 0.000177763,
      verdict: 'lookAgain',
    },
  },
];
