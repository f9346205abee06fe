import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { refusalsOfIssues } from './refusals-of-issues.ts';

function refusalsFor(schema: z.ZodType, input: unknown) {
  const parsed = schema.safeParse(input);
  if (parsed.success) throw new Error('the example is meant to be refused');
  return refusalsOfIssues(parsed.error.issues, input);
}

describe('What a schema refuses', () => {
  it('names a missing field as missing and a wrong one by the type it has to be', () => {
    const schema = z.strictObject({ lengthM: z.number(), name: z.string() });
    expect(refusalsFor(schema, { name: 7 })).toEqual([
      { code: 'required', path: '/lengthM' },
      { code: 'wrongType', path: '/name', given: 7, allowed: 'string' },
    ]);
  });

  it('names each unknown key at its own place', () => {
    const schema = z.strictObject({ lineSet: z.strictObject({ branches: z.array(z.number()) }) });
    expect(refusalsFor(schema, { lineSet: { branches: [], bends: 1, 'a/b': 2 } })).toEqual([
      { code: 'unknownKey', path: '/lineSet/bends' },
      { code: 'unknownKey', path: '/lineSet/a~1b' },
    ]);
  });

  it.each([
    [z.number().min(3), 2.5, { code: 'tooSmall', path: '/v', given: 2.5, allowed: 3 }],
    [z.number().max(3), 4, { code: 'tooLarge', path: '/v', given: 4, allowed: 3 }],
    [z.number().positive(), 0, { code: 'notAbove', path: '/v', given: 0, allowed: 0 }],
    [z.number().lt(1), 1, { code: 'notBelow', path: '/v', given: 1, allowed: 1 }],
    [z.string().min(12), 'short', { code: 'tooShort', path: '/v', given: 'short', allowed: 12 }],
    [z.string().max(2), 'long', { code: 'tooLong', path: '/v', given: 'long', allowed: 2 }],
    [z.array(z.number()).min(1), [], { code: 'tooFew', path: '/v', allowed: 1 }],
    [z.array(z.number()).max(1), [1, 2], { code: 'tooMany', path: '/v', allowed: 1 }],
    [z.int(), 1.5, { code: 'wrongType', path: '/v', given: 1.5, allowed: 'int' }],
    [z.enum(['up', 'down']), 'left', { code: 'notAllowedValue', path: '/v', given: 'left', allowed: ['up', 'down'] }],
    [z.uuid(), 'x', { code: 'notId', path: '/v', given: 'x' }],
    [z.email(), 'x', { code: 'notEmail', path: '/v', given: 'x' }],
    [z.iso.date(), '2026-02-30', { code: 'notDay', path: '/v', given: '2026-02-30' }],
    [z.iso.datetime({ offset: true }), 'x', { code: 'notInstant', path: '/v', given: 'x' }],
  ])('names value and limit (%#)', (schema, value, refusal) => {
    expect(refusalsFor(z.strictObject({ v: schema }), { v: value })).toEqual([refusal]);
  });

  it('passes on the code, the values and the limit of a rule written in the schema', () => {
    const params = { code: 'massNotPositive', allowed: 0, params: { unit: 'g' } };
    const schema = z.strictObject({ mass: z.string().refine((text) => text !== '0', { params }) });
    expect(refusalsFor(schema, { mass: '0' })).toEqual([
      { code: 'massNotPositive', path: '/mass', given: '0', allowed: 0, params: { unit: 'g' } },
    ]);
  });

  it('speaks about the alternative whose kind was named, and lists the kinds when it is none of them', () => {
    const rate = z.discriminatedUnion('kind', [
      z.strictObject({ kind: z.literal('flat'), gPerM: z.number() }),
      z.strictObject({ kind: z.literal('fixedMass'), extraG: z.number() }),
    ]);
    expect(refusalsFor(rate, { kind: 'flat' })).toEqual([{ code: 'required', path: '/gPerM' }]);
    expect(refusalsFor(rate, { kind: 'perYard' })).toEqual([
      { code: 'notAllowedValue', path: '/kind', given: 'perYard', allowed: ['flat', 'fixedMass'] },
    ]);
    expect(refusalsFor(rate, {})).toMatchObject([{ code: 'required', path: '/kind' }]);
  });

  it('speaks about the alternative that fits best where no kind tells them apart', () => {
    const mass = z.union([z.number(), z.strictObject({ value: z.string(), unit: z.enum(['g', 'oz']) })]);
    expect(refusalsFor(z.strictObject({ mass }), { mass: { value: '3', unit: 'lb' } })).toEqual([
      { code: 'notAllowedValue', path: '/mass/unit', given: 'lb', allowed: ['g', 'oz'] },
    ]);
  });

  it('never repeats a password or a token', () => {
    const schema = z.strictObject({ newPassword: z.string().min(12), token: z.string().min(20) });
    expect(JSON.stringify(refusalsFor(schema, { newPassword: 'opensesame', token: 'abc' }))).not.toMatch(
      /opensesame|abc/,
    );
  });

  it('repeats no more than a hundred characters of a long text', () => {
    const [refusal] = refusalsFor(z.strictObject({ note: z.string().max(10) }), { note: 'x'.repeat(5000) });
    expect(String(refusal?.given)).toHaveLength(101);
  });
});
