import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { co2eFixtures } from '../co2e/co2e.fixtures.ts';
import { cylinderFillFixtures } from '../cylinder-fill/cylinder-fill.fixtures.ts';
import { evacuationFixtures } from '../evacuation/evacuation.fixtures.ts';
import { jointTorqueFixtures } from '../joint-torque/joint-torque.fixtures.ts';
import { lineContentFixtures } from '../line-content/line-content.fixtures.ts';
import calculationsEn from '../messages/calculations.en.json';
import calculationsEs from '../messages/calculations.es.json';
import { pressureTestFixtures } from '../pressure-test/pressure-test.fixtures.ts';
import { referenceData } from '../reference/reference-data.fixture.ts';
import { roomLimitFixtures } from '../room-limit/room-limit.fixtures.ts';
import { saturationFixtures } from '../saturation/saturation.fixtures.ts';
import { netMassFixtures, reconcileFixtures } from '../scale/scale.fixtures.ts';
import { superheatSubcoolingFixtures } from '../superheat-subcooling/superheat-subcooling.fixtures.ts';
import { type CalculationPath, everyCalculation } from './calculations.ts';
import type { Fixture } from './fixture.ts';
import { sayMessages } from './say-messages.ts';

const FIXTURES: Record<CalculationPath, readonly Fixture<unknown, unknown>[]> = {
  '/calculations/pressure-test': pressureTestFixtures,
  '/calculations/evacuation': evacuationFixtures,
  '/calculations/saturation': saturationFixtures,
  '/calculations/superheat-subcooling': superheatSubcoolingFixtures,
  '/calculations/line-content': lineContentFixtures,
  '/calculations/room-limit': roomLimitFixtures,
  '/calculations/cylinder-fill': cylinderFillFixtures,
  '/calculations/co2e': co2eFixtures,
  '/calculations/net-mass': netMassFixtures,
  '/calculations/reconcile': reconcileFixtures,
  '/calculations/joint-torque': jointTorqueFixtures,
};

const calls = everyCalculation().flatMap((call) =>
  FIXTURES[call.path as CalculationPath].map((fixture) => ({ call, fixture, title: `${call.path}: ${fixture.name}` })),
);
const english: Readonly<Record<string, string>> = calculationsEn;

describe('Every calculation', () => {
  it('has two or more worked examples', () => {
    for (const { path } of everyCalculation()) expect(FIXTURES[path as CalculationPath].length).toBeGreaterThan(1);
  });

  it.each(calls)('$title', ({ call, fixture }) => {
    const outcome = call.calculate(call.request.parse(fixture.request), referenceData);
    expect(outcome).toEqual({ ok: true, value: fixture.result });
    // With its sentences the result is what the API promises.
    const answer = sayMessages(fixture.result, (key) => english[key] ?? 'no sentence');
    expect(call.response.safeParse(answer).error).toBeUndefined();
    expect(JSON.stringify(answer)).not.toContain('no sentence');
  });

  it.each(calls)('survives JSON and refuses an unknown key: $title', ({ call, fixture }) => {
    expect(JSON.parse(JSON.stringify(fixture.result))).toEqual(fixture.result);
    expect(call.request.safeParse({ ...(fixture.request as object), colour: 'red' }).success).toBe(false);
  });

  it('describes every number of its answer with a unit and decimals', () => {
    for (const { path, response } of everyCalculation()) {
      const schema = z.toJSONSchema(response) as JsonSchema;
      for (const [name, property] of numbersOf(schema)) {
        expect(property.description ?? '', `${path} ${name}`).toMatch(/decimals?/);
      }
    }
  });
});

describe('The sentences of the calculations', () => {
  it('exist in both languages, with the same placeholders', () => {
    const placeholders = (text: string) => [...text.matchAll(/\{\{(.*?)\}\}/g)].map((match) => match[1]).sort();
    expect(Object.keys(calculationsEs).sort()).toEqual(Object.keys(calculationsEn).sort());
    for (const [key, text] of Object.entries(calculationsEn)) {
      expect(placeholders((calculationsEs as Record<string, string>)[key] ?? ''), key).toEqual(placeholders(text));
    }
  });

  it('cover every code that a calculation or the quantity reader refuses with', () => {
    const files = [
      'units/parse-quantity',
      'reference/saturation',
      'reference/require-row',
      'reference/gwp-of-blend',
      'room-limit/judge-room-limit',
      'room-limit/manual-table',
      'evacuation/judge-evacuation',
      'saturation/find-saturation',
      'superheat-subcooling/superheat-subcooling',
      'joint-torque/find-joint-torque',
    ];
    /** Sentences that stand in other files of the catalogue. */
    const elsewhere = new Set(['problem.unknownRefrigerant', 'problem.tooSmall', 'problem.notBelow']);
    const codes = files.flatMap((file) => {
      const text = readFileSync(new URL(`../${file}.ts`, import.meta.url), 'utf8');
      return [...text.matchAll(/(?:code: |refuse\()'(\w+)'/g)].map((match) => `problem.${match[1]}`);
    });
    expect(new Set(codes).size).toBeGreaterThan(12);
    for (const code of codes) expect(Object.hasOwn(english, code) || elsewhere.has(code), code).toBe(true);
  });
});

interface JsonSchema {
  type?: string;
  description?: string;
  properties?: Record<string, JsonSchema>;
  anyOf?: JsonSchema[];
}

/** Properties that are a number, or a number or null. */
function numbersOf(schema: JsonSchema): [string, JsonSchema][] {
  const own = Object.entries(schema.properties ?? {}).flatMap(([name, property]): [string, JsonSchema][] => {
    const number = [property, ...(property.anyOf ?? [])].find((option) => option.type === 'number');
    return number ? [[name, { description: property.description ?? number.description }]] : [];
  });
  return [...own, ...(schema.anyOf ?? []).flatMap(numbersOf)];
}
