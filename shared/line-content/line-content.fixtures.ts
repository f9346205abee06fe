import type { Fixture } from '../calculations/fixture.ts';
import type { LineContentRequest } from './line-content.schema.ts';
import type { LineContent } from './line-content.ts';

export const lineContentFixtures: readonly Fixture<LineContentRequest, LineContent>[] = [
  {
    name: 'R-410A liquid at 40 °C in 10 m of 3/8 in ASTM B280 coil (0.032 in wall)',
    source: 'geometry and CoolProp density: 49.009 mm2 x 975.72 kg/m3',
    request: { refrigerant: 'R-410A', phase: 'liquid', tempC: 40, odMm: 9.525, wallMm: 0.8128, lengthM: 10 },
    result: { densityKgM3: 975.72, gPerM: 47.819, contentG: 478.193, cautions: [] },
  },
  {
    name: 'R-454B liquid at 40 °C in 1 m of 12.7 x 0.8 mm',
    source: 'geometry and CoolProp density: bore 11.1 mm',
    request: { refrigerant: 'R-454B', phase: 'liquid', tempC: 40, odMm: 12.7, wallMm: 0.8, lengthM: 1 },
    result: { densityKgM3: 916.8, gPerM: 88.718, contentG: 88.718, cautions: [] },
  },
  {
    name: 'R-410A vapour at 8 °C in 20 m of 15.88 x 1.0 mm',
    source: 'geometry and CoolProp density: bore 13.88 mm',
    request: { refrigerant: 'R-410A', phase: 'vapour', tempC: 8, odMm: 15.88, wallMm: 1, lengthM: 20 },
    result: { densityKgM3: 39.392, gPerM: 5.96, contentG: 119.207, cautions: [] },
  },
];
