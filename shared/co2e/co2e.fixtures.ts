import type { Fixture } from '../calculations/fixture.ts';
import type { Co2eRequest, Co2eResponse } from './co2e.schema.ts';

export const co2eFixtures: readonly Fixture<Co2eRequest, Co2eResponse>[] = [
  {
    name: '2.35 kg R-410A by AR4',
    source: 'IPCC AR4: (675 + 3500) / 2 = 2087.5',
    request: { refrigerant: 'R-410A', massG: 2350, gwpSet: 'AR4' },
    result: {
      co2eT: 4.90563,
      gwpValue: 2087.5,
      source: 'IPCC AR4, 100 years: R-32 50 % x 675 + R-125 50 % x 3500',
    },
  },
  {
    name: '6 lb 4 oz R-454B by US exchange values: the HFC share only',
    source: '42 U.S.C. 7675(c): 0.689 x 675',
    request: { refrigerant: 'R-454B', massG: 2834.9523125, gwpSet: 'US-AIM' },
    result: {
      co2eT: 1.31847,
      gwpValue: 465.075,
      source:
        'US exchange values, 42 U.S.C. 7675(c) (HFC share only): R-32 68.9 % x 675; no value in this set: R-1234yf',
    },
  },
];
