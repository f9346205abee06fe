import { readFileSync } from 'node:fs';
import path from 'node:path';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { catalogueEn } from '../messages/catalogue-en.ts';
import { catalogueEs } from '../messages/catalogue-es.ts';
import { referenceData } from '../reference/reference-data.fixture.ts';
import { calculateCharge } from './calculate-charge.ts';
import { type ChargeBasis, chargeRequest, chargeResponse } from './charge.schema.ts';
import { chargeCalculation } from './charge-calculation.ts';
import { charge, extraG, outcomeOf, type Pipe, pipe, request } from './charge-request.fixture.ts';
import { CAUTION_CODES, SOURCE_CODES, STEP_CODES, WARNING_CODES } from './charge-result.ts';
import { presentCharge } from './present-charge.ts';

const lengthM = fc.integer({ min: 0, max: 60_000 }).map((mm) => mm / 1000);
const odMm = fc.constantFrom(6.35, 9.52, 12.7);
const sizes = [
  { liquidOdMm: 6.35, gPerM: 15 },
  { liquidOdMm: 9.52, gPerM: 30.5 },
  { liquidOdMm: 12.7, gPerM: 61.25 },
];
const precharge: fc.Arbitrary<ChargeBasis['precharge']> = fc.oneof(
  fc.constant(null),
  fc.record({
    scope: fc.constantFrom('system' as const, 'systemPerBranch' as const, 'branch' as const),
    lengthM,
    allocation: fc.constantFrom('proportional' as const, 'largestFirst' as const, 'smallestFirst' as const),
  }),
  fc.record({ scope: fc.constant('mass' as const), massG: fc.integer({ min: 0, max: 2000 }) }),
);
const rate: fc.Arbitrary<ChargeBasis['rate']> = fc.oneof(
  fc.record({ kind: fc.constant('flat' as const), gPerM: fc.integer({ min: 0, max: 4000 }).map((g) => g / 100) }),
  fc.constant({ kind: 'byLiquidPipe' as const, sizes }),
);
const pipes = fc.array(fc.tuple(lengthM, odMm), { minLength: 1, maxLength: 6 });
const pipesOf = (drawn: readonly (readonly [number, number])[]): Pipe[] => drawn.map(([m, od]) => pipe(m, od));

describe('Whatever the line set', () => {
  it('a longer pipe never needs less', () => {
    fc.assert(
      fc.property(pipes, precharge, rate, fc.nat(), lengthM, (drawn, free, per, which, moreM) => {
        const basis = { precharge: free, rate: per };
        const longer = drawn.map(([m, od], i) => [i === which % drawn.length ? m + moreM : m, od] as const);
        expect(extraG(basis, pipesOf(longer))).toBeGreaterThanOrEqual(extraG(basis, pipesOf(drawn)));
      }),
    );
  });

  it('nothing is removed for a short line unless the manual says so', () => {
    fc.assert(
      fc.property(pipes, precharge, rate, (drawn, free, per) => {
        const result = charge({ precharge: free, rate: per }, pipesOf(drawn));
        expect(result.extraG).toBeGreaterThanOrEqual(0);
        expect(result.recoverG).toBe(0);
      }),
    );
  });

  it('the order of the pipes does not matter', () => {
    fc.assert(
      fc.property(pipes, precharge, rate, fc.boolean(), (drawn, free, per, up) => {
        const rounding = { toG: 1, direction: up ? ('up' as const) : ('down' as const) };
        const basis = { precharge: free, rate: per, rounding };
        expect(extraG(basis, pipesOf([...drawn].reverse()))).toBe(extraG(basis, pipesOf(drawn)));
      }),
    );
  });

  it('rounding moves a charge by less than its step, and to a multiple of it', () => {
    fc.assert(
      fc.property(pipes, precharge, rate, fc.constantFrom(1, 5, 10), (drawn, free, per, toG) => {
        const basis = { precharge: free, rate: per };
        const exact = extraG(basis, pipesOf(drawn));
        for (const direction of ['nearest', 'up', 'down'] as const) {
          const value = extraG({ ...basis, rounding: { toG, direction } }, pipesOf(drawn));
          expect(value % toG).toBe(0);
          expect(Math.abs(value - exact)).toBeLessThan(toG + 0.001);
          if (direction === 'up') expect(value).toBeGreaterThanOrEqual(exact - 0.001);
          if (direction === 'down') expect(value).toBeLessThanOrEqual(exact + 0.001);
        }
      }),
    );
  });

  it('a change there and back cancels', () => {
    fc.assert(
      fc.property(pipes, pipes, precharge, rate, (drawn, others, free, per) => {
        const basis = { precharge: free, rate: per };
        const change = (to: typeof drawn, from: typeof drawn) =>
          charge(basis, pipesOf(to), {
            job: 'lineSetChange',
            previousLineSet: request(basis, pipesOf(from)).lineSet,
          }).extraG;
        expect(change(drawn, others) + change(others, drawn)).toBe(0);
      }),
    );
  });

  it('the request as it came back from JSON gives the same answer, which fits its schema', () => {
    fc.assert(
      fc.property(pipes, precharge, rate, (drawn, free, per) => {
        const asked = request({ precharge: free, rate: per }, pipesOf(drawn));
        const outcome = outcomeOf(asked);
        expect(outcomeOf(chargeRequest.parse(JSON.parse(JSON.stringify(asked))))).toEqual(outcome);
        if (!outcome.ok) throw new Error('refused');
        const answer = presentCharge(outcome.value, (key) => key);
        expect(chargeResponse.parse(JSON.parse(JSON.stringify(answer)))).toEqual(answer);
      }),
    );
  });
});

describe('A request', () => {
  const body = JSON.parse(JSON.stringify(request({}))) as Record<string, unknown>;
  const accepts = (change: object) => chargeRequest.safeParse({ ...body, ...change }).success;

  it('may leave optional fields out or send null, also those of another choice', () => {
    expect(accepts({ previousLineSet: null })).toBe(true);
    const basis = {
      ...(body.basis as object),
      precharge: { scope: 'mass', massG: 100, lengthM: null, allocation: null },
      metering: null,
      allowances: null,
      limits: null,
      rounding: null,
      shortLine: null,
    };
    expect(accepts({ basis })).toBe(true);
  });

  it('is refused with an unknown key at any depth, or a number that no system has', () => {
    expect(accepts({ colour: 'red' })).toBe(false);
    expect(accepts({ basis: { ...(body.basis as object), colour: 'red' } })).toBe(false);
    expect(accepts({ lineSet: { branches: [] } })).toBe(false);
    const branch = { name: 'A', liquidOdMm: 6.35, lengthM: 5 };
    expect(accepts({ lineSet: { branches: [branch] } })).toBe(true);
    expect(accepts({ lineSet: { branches: [{ ...branch, colour: 'red' }] } })).toBe(false);
    expect(accepts({ lineSet: { branches: [{ ...branch, lengthM: 10_000.1 }] } })).toBe(false);
    expect(accepts({ lineSet: { branches: [{ ...branch, lengthM: -1 }] } })).toBe(false);
    expect(accepts({ lineSet: { branches: Array.from({ length: 101 }, () => branch) } })).toBe(false);
    const rate = { kind: 'formula', expression: 'L'.repeat(501) };
    expect(accepts({ basis: { ...(body.basis as object), rate } })).toBe(false);
  });
});

describe('The parser of formulas', () => {
  it('is not loaded with the engine: only formula.ts brings it in', () => {
    const folder = import.meta.dirname;
    const seen = new Set<string>();
    const packages = new Set<string>();
    const visit = (file: string) => {
      if (seen.has(file)) return;
      seen.add(file);
      for (const match of readFileSync(file, 'utf8').matchAll(/^(?:import|export)\s(?!type\b)[^;]*?from '([^']+)'/gm)) {
        const from = String(match[1]);
        if (from.startsWith('.')) visit(path.resolve(path.dirname(file), from));
        else packages.add(from);
      }
    };
    visit(path.join(folder, 'calculate-charge.ts'));
    expect(seen.size).toBeGreaterThan(10);
    expect([...packages].filter((name) => name.startsWith('mathjs'))).toEqual([]);
    visit(path.join(folder, 'formula.ts'));
    expect([...packages]).toContain('mathjs/number');
  });

  it('has to be handed in for a formula, and only then', () => {
    const formula = request({ rate: { kind: 'formula', expression: 'L * 20' } });
    expect(() => calculateCharge(formula, { reference: referenceData })).toThrow(/compileFormula/);
    expect(calculateCharge(request({}), { reference: referenceData }).ok).toBe(true);
  });
});

describe('What the engine says', () => {
  it('has a sentence in both languages for every code', () => {
    const keys = [
      ...STEP_CODES.map((code) => `step.${code}`),
      ...SOURCE_CODES.map((code) => `source.${code}`),
      ...WARNING_CODES.map((code) => `warning.${code}`),
      ...CAUTION_CODES.map((code) => `caution.${code}`),
      'step.ofPreviousLineSet',
    ];
    expect(keys.filter((key) => !catalogueEn[key] || !catalogueEs[key])).toEqual([]);
  });
});

describe('The call', () => {
  it('describes every number of its answer with a unit and decimals', () => {
    const properties = z.toJSONSchema(chargeResponse).properties as Record<string, object>;
    for (const name of ['extraG', 'totalG', 'weighInG', 'recoverG', 'co2eT']) {
      expect(JSON.stringify(properties[name]), name).toMatch(/"description":"[^"]*decimal/);
    }
  });

  it('calculates every rate, formulas included, and says it in both languages without a gap', () => {
    const { calculate, present, request: schema, response } = chargeCalculation;
    const asked = schema.parse(
      request(
        {
          refrigerant: 'R-454B',
          rate: { kind: 'formula', expression: 'max(0, L635 - Lp) * 20' },
          limits: { maxRiseM: 10 },
          allowances: [{ label: 'receiver', gEach: 40, count: 1 }],
          rounding: { toG: 1, direction: 'up' },
        },
        [pipe(12.34), pipe(3, 9.52)],
        { job: 'lineSetChange', previousLineSet: request({}, [pipe(9)]).lineSet },
      ),
    );
    const outcome = calculate(asked, referenceData);
    if (!outcome.ok) throw new Error(JSON.stringify(outcome.refusals));
    for (const catalogue of [catalogueEn, catalogueEs]) {
      const answer = present(outcome.value, (key, params) =>
        (catalogue[key] ?? `{{no ${key}}}`).replace(/\{\{(\w+)[^}]*\}\}/g, (whole, name) =>
          String(params[name] ?? whole),
        ),
      );
      expect(response.parse(answer)).toEqual(answer);
      expect(JSON.stringify(answer)).not.toMatch(/\{\{|undefined|NaN/);
    }
  });
});
