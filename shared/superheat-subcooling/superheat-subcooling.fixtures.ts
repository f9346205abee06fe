import type { Fixture } from '../calculations/fixture.ts';
import type { SuperheatSubcoolingRequest } from './superheat-subcooling.schema.ts';
import type { SuperheatSubcooling } from './superheat-subcooling.ts';

export const superheatSubcoolingFixtures: readonly Fixture<SuperheatSubcoolingRequest, SuperheatSubcooling>[] = [
  {
    name: 'R-32, suction 8.5 bar gauge with the line at 10 °C, liquid 25.5 bar gauge at 36 °C',
    source: 'CoolProp saturation: dew 5.00, bubble 42.79 °C',
    request: {
      refrigerant: 'R-32',
      suction: { kPaGauge: 850, lineTempC: 10 },
      liquid: { kPaGauge: 2550, lineTempC: 36 },
    },
    result: { dewC: 4.996, superheatK: 5.004, bubbleC: 42.79, subcoolingK: 6.79, cautions: [] },
  },
  {
    name: 'R-407C, suction 65 psig with the line at 12 °C: by the dew point, not the bubble point',
    source: 'CoolProp saturation: dew 5.14 °C',
    request: {
      refrigerant: 'R-407C',
      suction: { kPaGauge: 448.1592, lineTempC: 12 },
      liquid: null,
      atmosphereKPaAbs: 101.325,
      altitudeM: null,
    },
    result: { dewC: 5.14, superheatK: 6.86, bubbleC: null, subcoolingK: null, cautions: [] },
  },
];
