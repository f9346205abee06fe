import { messageFor } from '../../server/messages/translate.ts';
import { loadReferenceData } from '../../server/reference/load-reference-data.ts';
import { chargeCalculation } from '../../shared/charge/charge-calculation.ts';
import type { Bench } from './bench.ts';

const branch = (name: string, lengthM: number, liquidOdMm = 6.35, more: object = {}) => ({
  name,
  liquidOdMm,
  lengthM,
  ...more,
});

/** The request of `api.md`'s form with what this one is about changed. */
const ask = (basis: object, branches: object[], more: object = {}) => ({
  job: 'newInstall',
  basis: {
    refrigerant: 'R-32',
    factoryChargeG: 1200,
    precharge: { scope: 'system', lengthM: 7.5, allocation: null },
    rate: { kind: 'flat', gPerM: 20 },
    metering: 'unknown',
    allowances: [],
    limits: { minLengthM: 3, maxLengthM: 100, maxRiseM: 30 },
    rounding: { toG: 1, direction: 'nearest' },
    shortLine: 'none',
    ...basis,
  },
  lineSet: { branches },
  previousLineSet: null,
  gwpSet: 'EU-2024-573',
  ...more,
});

const bySize = {
  kind: 'byLiquidPipe',
  sizes: [
    { liquidOdMm: 6.35, gPerM: 15 },
    { liquidOdMm: 9.52, gPerM: 30 },
    { liquidOdMm: 12.7, gPerM: 110 },
  ],
};
const stepped = {
  kind: 'stepped',
  steps: [
    { upToM: 10, extraG: 0 },
    { upToM: 20, extraG: 200 },
    { upToM: 30, extraG: 400 },
  ],
};

/** Every kind of rate, every job and every scope at least once, and one request that a limit refuses. */
const MIX: readonly object[] = [
  ask({}, [branch('A', 12, 6.35, { gasOdMm: 9.52, riseM: 3 })]),
  ask({ refrigerant: 'R-410A' }, [branch('A', 5)]),
  ask({ rate: bySize, precharge: { scope: 'system', lengthM: 15, allocation: 'largestFirst' } }, [
    branch('A', 10, 9.52),
    branch('B', 12),
  ]),
  ask(
    { rate: bySize, precharge: { scope: 'branch', lengthM: 5 }, allowances: [{ label: 'large', gEach: 50, count: 2 }] },
    [branch('A', 12), branch('B', 9), branch('C', 15, 9.52), branch('D', 6)],
  ),
  ask({ precharge: { scope: 'systemPerBranch', lengthM: 5 } }, [
    branch('A', 14, 9.52),
    branch('B', 8, 6.35, { parent: 'A' }),
    branch('C', 11, 6.35, { parent: 'A' }),
  ]),
  ask({ precharge: { scope: 'mass', massG: 150 }, shortLine: 'remove' }, [branch('A', 6)]),
  ask({ rate: stepped, precharge: null }, [branch('A', 17.5)]),
  ask({ rate: { kind: 'formula', expression: 'max(0, (L - Lp) * 20) + 30 * (N - 1) + L952 * 0.5' } }, [
    branch('A', 12),
    branch('B', 9, 9.52),
  ]),
  ask({ rate: { kind: 'fixedMass', extraG: 250 }, precharge: null }, [branch('A', 10)]),
  ask({}, [branch('A', 18)], { job: 'lineSetChange', previousLineSet: { branches: [branch('A', 11)] } }),
  ask({ refrigerant: 'R-454B', rounding: { toG: 10, direction: 'up' } }, [branch('A', 21)], { job: 'fullRecharge' }),
  ask({ limits: { maxLengthM: 25 } }, [branch('A', 26)]),
];

const SECONDS_A_RUN = 1;
const RUNS = 7;

/**
 * One calculation as the server makes it between the text that came and the text that goes: JSON, schema, arithmetic,
 * sentences, JSON. One thread, no network. The best run is the one that other work on the computer disturbed least.
 */
export const bench: Bench = {
  async run({ say }) {
    const reference = loadReferenceData();
    const texts = MIX.map((request) => JSON.stringify(request));
    const answer = (text: string): string => {
      const request = chargeCalculation.request.parse(JSON.parse(text));
      const outcome = chargeCalculation.calculate(request, reference);
      return JSON.stringify(
        outcome.ok
          ? chargeCalculation.present(outcome.value, (key, params) => messageFor(key, 'en-GB', params))
          : outcome.refusals,
      );
    };
    const refused = texts.map(answer).filter((text) => text.startsWith('[')).length;
    if (refused !== 1) throw new Error(`one request of the mix is refused, not ${refused}`);

    const perSecond: number[] = [];
    for (let run = 0; run <= RUNS; run++) {
      const start = performance.now();
      let made = 0;
      let bytes = 0;
      while (performance.now() - start < SECONDS_A_RUN * 1000) {
        for (const text of texts) bytes += answer(text).length;
        made += texts.length;
      }
      if (bytes === 0) throw new Error('nothing was answered');
      if (run > 0) perSecond.push(made / ((performance.now() - start) / 1000)); // the first one warms up
    }
    say(`calculations a second: ${perSecond.map((each) => each.toFixed(0)).join(', ')}`);
    return {
      name: 'charge-calculations',
      value: Math.max(...perSecond),
      unit: 'calculations/s',
      against: null,
      bar: { atLeast: 25_000 },
    };
  },
};
