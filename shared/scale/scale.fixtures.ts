import type { Fixture } from '../calculations/fixture.ts';
import type { NetMassRequest, NetMassResponse } from './net-mass.schema.ts';
import type { ReconcileRequest, ReconcileResponse } from './reconcile.schema.ts';

export const netMassFixtures: readonly Fixture<NetMassRequest, NetMassResponse>[] = [
  {
    name: 'one net mass on a scale of 5 g',
    source: 'GUM Type B, worked by hand: 5 / sqrt(6)',
    request: { beforeG: 17_105, afterG: 17_015, resolutionG: 5 },
    result: { netG: 90, standardUncertaintyG: 2.041, expandedUncertaintyG: 4.082 },
  },
  {
    name: 'with 2 g repeatability and 0.1 % span error on 2,350 g',
    source: 'GUM Type B, worked by hand: sqrt(2 (25/12 + 4) + 2.35^2 / 3)',
    request: { beforeG: 20_000, afterG: 17_650, resolutionG: 5, repeatabilityG: 2, spanErrorRelative: 0.001 },
    result: { netG: 2350, standardUncertaintyG: 3.743, expandedUncertaintyG: 7.485 },
  },
];

const eightIssues = [100, 200, 300, 400, 500, 600, 700, 800];

export const reconcileFixtures: readonly Fixture<ReconcileRequest, ReconcileResponse>[] = [
  {
    name: 'eight issues on a scale of 5 g, 12 g apart: the scale explains it',
    source: 'GUM Type B, worked by hand: sqrt(18) x 5 / sqrt(12), limit 12.25 g',
    request: { resolutionG: 5, startGrossG: 20_000, endGrossG: 16_388, issuedG: eightIssues },
    result: { differenceG: 12, standardUncertaintyG: 6.124, verdict: 'withinScales' },
  },
  {
    name: 'eight issues on a scale of 5 g, 20 g apart: it does not',
    source: 'GUM Type B, worked by hand: 3 u is 18.37 g',
    request: {
      resolutionG: 5,
      startGrossG: 20_000,
      endGrossG: 16_380,
      issuedG: eightIssues,
      repeatabilityG: null,
      spanErrorRelative: null,
    },
    result: { differenceG: 20, standardUncertaintyG: 6.124, verdict: 'notExplained' },
  },
];
