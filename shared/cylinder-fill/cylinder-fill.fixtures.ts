import type { Fixture } from '../calculations/fixture.ts';
import type { CylinderFillRequest } from './cylinder-fill.schema.ts';
import type { CylinderFill } from './cylinder-fill.ts';

export const cylinderFillFixtures: readonly Fixture<CylinderFillRequest, CylinderFill>[] = [
  {
    name: 'R-410A, WC 47.7 lb, tare 27.5 lb: 40.41 lb net, 67.91 lb gross',
    source: '0.8 x 47.7 x 1.0589; guideline for recovery containers, seen in trade press',
    request: { refrigerant: 'R-410A', waterCapacityG: 21636.356, tareG: 12473.79 },
    result: {
      liquidDensityKgM3: 1058.9,
      maxNetG: 18328.59,
      maxGrossG: 30802.38,
      contentG: null,
      roomLeftG: null,
      cautions: [],
    },
  },
  {
    name: 'R-32, WC 21.6 kg, partly filled: lighter than water, and flammable',
    source: '0.8 x 21.6 x 0.96101; 70 % for flammables is common practice, no source',
    request: {
      refrigerant: 'R-32',
      waterCapacityG: 21600,
      tareG: 12000,
      grossG: 20000,
      specificGravity: null,
      fillFactor: null,
    },
    result: {
      liquidDensityKgM3: 961.01,
      maxNetG: 16606.253,
      maxGrossG: 28606.253,
      contentG: 8000,
      roomLeftG: 8606.253,
      cautions: [
        {
          code: 'flammableFillLimit',
          signal: 'warning',
          params: { refrigerant: 'R-32', safetyClass: 'A2L', percent: 70, netG: 14530.471 },
        },
      ],
    },
  },
];
