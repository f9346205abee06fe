import { Problem } from './problem.ts';

/**
 * What any thrown value means to the caller. The one place that knows the errors of the body reader and of PostgreSQL;
 * whatever it does not know is a bug and stays a 500 without inner text.
 */
export function problemOfError(error: unknown): Problem {
  if (error instanceof Problem) return error;
  return (
    problemOfHttpError(error) ??
    problemOfDatabaseError(error) ??
    problemOfLostConnection(error) ??
    new Problem('internal', { cause: error })
  );
}

/** Errors of Express and its body reader carry a status below 500 and, the reader's, a type. */
function problemOfHttpError(error: unknown): Problem | null {
  const { status, type } = (error ?? {}) as { status?: unknown; type?: unknown };
  if (typeof status !== 'number' || status < 400 || status >= 500 || !(error instanceof Error)) return null;
  if (status === 413) return new Problem('bodyTooLarge', { cause: error });
  if (status === 415) return new Problem('unsupportedMediaType', { cause: error });
  if (status === 404) return new Problem('notFound', { cause: error });
  return new Problem(type === 'entity.parse.failed' ? 'malformedJson' : 'malformedRequest', { cause: error });
}

interface DatabaseError {
  code?: string;
  constraint?: string;
  detail?: string;
}

/** TypeORM wraps the driver's error and copies its fields; `code` is the SQLSTATE. */
function databaseErrorOf(error: unknown): DatabaseError | null {
  const outer = error as { driverError?: DatabaseError } & DatabaseError;
  const inner = outer?.driverError ?? outer;
  return typeof inner?.code === 'string' && /^[0-9A-Z]{5}$/.test(inner.code) ? inner : null;
}

/** What Node.js and the driver say when nothing answers at the database's address, or the connection broke. */
const NO_CONNECTION = new Set(['ECONNREFUSED', 'ECONNRESET', 'EPIPE', 'ENOENT', 'ENOTFOUND', 'ETIMEDOUT']);
const BROKEN =
  /^(Connection terminated|Client has encountered a connection error|timeout exceeded when trying to connect)/;

function problemOfLostConnection(error: unknown): Problem | null {
  if (!(error instanceof Error)) return null;
  const { code, syscall } = error as NodeJS.ErrnoException;
  const refused = code !== undefined && NO_CONNECTION.has(code) && /^(connect|read|write)$/.test(syscall ?? '');
  if (!refused && !BROKEN.test(error.message)) return null;
  return new Problem('notReady', { cause: error, headers: { 'Retry-After': '5' } });
}

function problemOfDatabaseError(error: unknown): Problem | null {
  const found = databaseErrorOf(error);
  if (!found?.code) return null;
  const options = { cause: error };
  switch (found.code) {
    case '23505': // unique_violation
      return new Problem('alreadyExists', options);
    case '23503': // foreign_key_violation
      return new Problem('notKnownHere', { ...options, errors: [{ code: 'notKnownHere', path: '' }] });
    case '23001': // restrict_violation
      return new Problem('inUse', options);
    case '22021': // a character that the encoding cannot hold
    case '22P05':
      return new Problem('textNotStorable', { ...options, errors: [{ code: 'textNotStorable', path: '' }] });
    case '22001': // too long, out of range, no number, no date, no such text, against a check: a schema let it through
    case '22003':
    case '22007':
    case '22008':
    case '22P02':
    case '23502':
    case '23514':
      return new Problem('valueNotStorable', { ...options, errors: [{ code: 'valueNotStorable', path: '' }] });
    case '40001': // serialization_failure
    case '40P01': // deadlock_detected
    case '55P03': // lock_timeout
    case '53300': // too many connections
    case '57014': // statement_timeout
      return new Problem('busy', { ...options, headers: { 'Retry-After': '1' } });
    case '57P01': // the server is shutting down
    case '57P02':
    case '57P03':
    case '08006':
    case '08001':
      return new Problem('notReady', { ...options, headers: { 'Retry-After': '5' } });
    default:
      return null;
  }
}
