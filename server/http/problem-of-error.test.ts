import { describe, expect, it } from 'vitest';
import { Problem } from './problem.ts';
import { problemOfError } from './problem-of-error.ts';

/** As TypeORM hands it on: the driver's error inside. */
const queryFailed = (code: string) =>
  Object.assign(new Error('secret words of the database'), { driverError: Object.assign(new Error(), { code }), code });

describe('What the caller learns of an error', () => {
  it.each([
    ['23505', 409, 'alreadyExists'],
    ['23503', 422, 'notKnownHere'],
    ['22021', 422, 'textNotStorable'],
    ['22003', 422, 'valueNotStorable'],
    ['22008', 422, 'valueNotStorable'],
    ['23514', 422, 'valueNotStorable'],
    ['55P03', 503, 'busy'],
    ['40001', 503, 'busy'],
    ['40P01', 503, 'busy'],
    ['57P01', 503, 'notReady'],
    ['42P01', 500, 'internal'],
    ['42501', 500, 'internal'],
    ['TW015', 500, 'internal'],
  ])('of PostgreSQL with SQLSTATE %s is %d %s', (sqlstate, status, code) => {
    for (const error of [queryFailed(sqlstate), Object.assign(new Error(), { code: sqlstate })]) {
      const problem = problemOfError(error);
      expect([problem.status, problem.code, problem.cause]).toEqual([status, code, error]);
    }
  });

  it('is when to come back, where waiting helps', () => {
    expect(problemOfError(queryFailed('55P03')).headers).toEqual({ 'Retry-After': '1' });
    expect(problemOfError(queryFailed('57P03')).headers).toEqual({ 'Retry-After': '5' });
  });

  it.each([
    [Object.assign(new Error('connect ECONNREFUSED'), { code: 'ECONNREFUSED', syscall: 'connect' }), 'notReady'],
    [new Error('Connection terminated unexpectedly'), 'notReady'],
    [Object.assign(new Error('no such file'), { code: 'ENOENT', syscall: 'open' }), 'internal'],
    [new TypeError('x is undefined'), 'internal'],
    ['a thrown text', 'internal'],
    [undefined, 'internal'],
    [{ status: 404 }, 'internal'],
  ])('that is no refusal (%#) is %s', (error, code) => {
    expect(problemOfError(error).code).toBe(code);
  });

  it('that was meant as a refusal is that refusal', () => {
    const problem = new Problem('stale');
    expect(problemOfError(problem)).toBe(problem);
  });
});
