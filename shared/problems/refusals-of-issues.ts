import type { z } from 'zod';
import { jsonPointer } from './json-pointer.ts';
import type { Refusal } from './outcome.ts';

type Issue = z.core.$ZodIssue;
type Path = readonly PropertyKey[];

/**
 * Turns what zod found into refusals: where, which code of the catalogue, what was given and what would be allowed.
 * The form beside the field and the server's answer both come from here, so they say the same.
 *
 * A refinement names its own code and values: `params: { code, given?, allowed?, params? }`; without one it is
 * `notValid`.
 */
export function refusalsOfIssues(issues: readonly Issue[], input: unknown, base: Path = []): Refusal[] {
  return issues.flatMap((issue) => refusalsOfIssue(issue, input, [...base, ...issue.path]));
}

function refusalsOfIssue(issue: Issue, input: unknown, path: Path): Refusal[] {
  const given = givenAt(input, path);
  const one = (code: string, more: Partial<Refusal> = {}): Refusal[] => [
    { code, path: jsonPointer(path), ...(given === undefined ? {} : { given }), ...more },
  ];
  switch (issue.code) {
    case 'invalid_type':
      return valueAt(input, path) === undefined ? one('required') : one('wrongType', { allowed: issue.expected });
    case 'unrecognized_keys':
      return issue.keys.map((key) => ({ code: 'unknownKey', path: jsonPointer([...path, key]) }));
    case 'too_small':
      return one(sizeCode(issue.origin, 'tooShort', 'tooFew', issue.inclusive === false ? 'notAbove' : 'tooSmall'), {
        allowed: Number(issue.minimum),
      });
    case 'too_big':
      return one(sizeCode(issue.origin, 'tooLong', 'tooMany', issue.inclusive === false ? 'notBelow' : 'tooLarge'), {
        allowed: Number(issue.maximum),
      });
    case 'not_multiple_of':
      return one('notMultiple', { allowed: issue.divisor });
    case 'invalid_format':
      return one(FORMAT_CODES[issue.format] ?? 'wrongFormat');
    case 'invalid_value':
      return valueAt(input, path) === undefined
        ? one('required', { allowed: issue.values.map(String) })
        : one('notAllowedValue', { allowed: issue.values.map(String) });
    case 'invalid_union':
      return unionRefusals(issue, input, path);
    case 'invalid_key':
    case 'invalid_element':
      return refusalsOfIssues(issue.issues, input, path);
    case 'custom': {
      const { code = 'notValid', ...more } = (issue.params ?? {}) as Partial<Refusal>;
      return one(code, more);
    }
    default:
      return one('notValid');
  }
}

function sizeCode(origin: string, ofText: string, ofList: string, ofNumber: string): string {
  if (origin === 'string') return ofText;
  return origin === 'array' || origin === 'set' || origin === 'map' ? ofList : ofNumber;
}

const FORMAT_CODES: Record<string, string> = {
  email: 'notEmail',
  uuid: 'notId',
  guid: 'notId',
  datetime: 'notInstant',
  date: 'notDay',
  time: 'notTime',
  url: 'notAddress',
};

/**
 * Of a union, the alternative that the person most likely meant: the one whose `kind` fits, which zod picks itself, or
 * the one that got furthest (its first complaint lies deepest), else the shortest list of complaints.
 */
function unionRefusals(issue: Extract<Issue, { code: 'invalid_union' }>, input: unknown, path: Path): Refusal[] {
  const alternatives = issue.errors.filter((list) => list.length > 0);
  const options = 'options' in issue ? (issue.options as unknown[] | undefined) : undefined;
  if (alternatives.length === 0 || issue.discriminator) {
    const given = givenAt(input, path);
    const missing = valueAt(input, path) === undefined;
    return [
      {
        code: missing ? 'required' : 'notAllowedValue',
        path: jsonPointer(path),
        ...(given === undefined ? {} : { given }),
        ...(options ? { allowed: options.map(String) } : {}),
      },
    ];
  }
  const depth = (list: readonly Issue[]) => Math.max(...list.map((inner) => inner.path.length));
  const best = alternatives.reduce((held, next) =>
    depth(next) > depth(held) || (depth(next) === depth(held) && next.length < held.length) ? next : held,
  );
  return refusalsOfIssues(best, input, path);
}

function valueAt(input: unknown, path: Path): unknown {
  let value = input;
  for (const part of path) {
    if (typeof value !== 'object' || value === null || !Object.hasOwn(value, part)) return undefined;
    value = (value as Record<PropertyKey, unknown>)[part];
  }
  return value;
}

const SECRET = /password|token|secret/i;
const LONGEST_GIVEN = 100;

/** What was sent, when it is small and no secret: numbers, switches and short texts. */
function givenAt(input: unknown, path: Path): Refusal['given'] | undefined {
  if (path.some((part) => SECRET.test(String(part)))) return undefined;
  const value = valueAt(input, path);
  if (value === null || typeof value === 'boolean') return value;
  if (typeof value === 'number') return Number.isFinite(value) ? value : undefined;
  if (typeof value !== 'string') return undefined;
  return value.length > LONGEST_GIVEN ? `${value.slice(0, LONGEST_GIVEN)}…` : value;
}
