import type { Fixture } from '../calculations/fixture.ts';
import type { Saturation } from './find-saturation.ts';
import type { SaturationRequest } from './saturation.schema.ts';

export const saturationFixtures: readonly Fixture<SaturationRequest, Saturation>[] = [
  {
    name: 'R-410A at 40 °C',
    source: 'CoolProp 8.0.1dev, pseudo-pure equation; liquid and vapour density of the 40 °C row',
    request: { refrigerant: 'R-410A', tempC: 40 },
    result: {
      bubbleKPaAbs: 2425.642,
      dewKPaAbs: 2418.608,
      liquidDensityKgM3: 975.72,
      vapourDensityKgM3: 103.236,
      cautions: [],
    },
  },
  {
    name: 'R-32 at 813.101 kPa absolute: 0 °C',
    source: 'CoolProp 8.0.1dev: R-32 at 0 °C',
    request: { refrigerant: 'R-32', pressureKPaAbs: 813.101, tempC: null },
    result: { bubbleC: 0, dewC: 0, liquidDensityKgM3: 1055.26, vapourDensityKgM3: 22.091, cautions: [] },
  },
];
