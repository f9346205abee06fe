import { readPreferences } from '../lib/preferences.ts';

/**
 * The one way to the server. Answers are trusted in their types and not parsed again: the server checks what it sends,
 * and a page older than the server must not break on a field that was added since.
 */
const BASE = '/api/v1';

/** One reason of a refusal; `path` is a JSON Pointer into the request. */
export interface ProblemReason {
  path: string;
  code: string;
  message: string;
  given?: unknown;
  allowed?: unknown;
}

/** A refusal as `application/problem+json` (RFC 9457). `message` is a sentence in the person's language. */
export class Problem extends Error {
  override readonly name = 'Problem';
  constructor(
    readonly status: number,
    readonly code: string,
    message: string,
    readonly errors: readonly ProblemReason[],
    readonly requestId: string | null,
  ) {
    super(message);
  }
}

/** The request did not reach the server, or no answer came back. Whether it was carried out is not known. */
export class NetworkError extends Error {
  override readonly name = 'NetworkError';
}

/** Somebody else has changed the row meanwhile: it is read again, and the next try starts from what stands now. */
export const isStale = (error: unknown): boolean => error instanceof Problem && error.status === 412;

interface Options {
  signal?: AbortSignal;
  /** Sent as `If-Match`: the version that the change was made on. */
  version?: number;
  /** A 401 is an answer here, not the end of a session (asking for the session, signing in). */
  allowSignedOut?: boolean;
}

let onSignedOut: () => void = () => {};
/** Called when the server no longer knows the session; the frame then asks for sign-in and keeps the place. */
export function whenSignedOut(handler: () => void): void {
  onSignedOut = handler;
}

async function request<T>(method: string, path: string, body: unknown, options: Options = {}): Promise<T> {
  const headers: Record<string, string> = {
    Accept: 'application/json, application/problem+json',
    'Accept-Language': readPreferences().locale,
  };
  // A form with a file names its own type, with the mark that separates its parts.
  const isForm = body instanceof FormData;
  if (body !== undefined && !isForm) headers['Content-Type'] = 'application/json';
  if (options.version !== undefined) headers['If-Match'] = `"${options.version}"`;
  let response: Response;
  try {
    response = await fetch(BASE + path, {
      method,
      headers,
      credentials: 'same-origin',
      body: body === undefined ? null : isForm ? body : JSON.stringify(body),
      signal: options.signal ?? null,
    });
  } catch (error) {
    if (options.signal?.aborted) throw error;
    throw new NetworkError('No connection to the server', { cause: error });
  }
  if (response.ok) {
    const text = await response.text();
    return (text === '' ? undefined : JSON.parse(text)) as T;
  }
  const problem = await problemOf(response);
  if (response.status === 401 && !options.allowSignedOut) onSignedOut();
  throw problem;
}

async function problemOf(response: Response): Promise<Problem> {
  const requestId = response.headers.get('x-request-id');
  // A proxy in between may answer with a page of its own; then only the status speaks.
  const isProblem = /^application\/(problem\+)?json/.test(response.headers.get('content-type') ?? '');
  const body = isProblem ? ((await response.json().catch(() => ({}))) as Record<string, unknown>) : {};
  const text = [body.detail, body.title].find((part): part is string => typeof part === 'string' && part !== '');
  return new Problem(
    response.status,
    typeof body.code === 'string' ? body.code : `http${response.status}`,
    text ?? `${response.status} ${response.statusText}`.trim(),
    Array.isArray(body.errors) ? (body.errors as ProblemReason[]) : [],
    typeof body.requestId === 'string' ? body.requestId : requestId,
  );
}

export const http = {
  get: <T>(path: string, options?: Options) => request<T>('GET', path, undefined, options),
  post: <T>(path: string, body?: unknown, options?: Options) => request<T>('POST', path, body ?? {}, options),
  put: <T>(path: string, body: unknown, options?: Options) => request<T>('PUT', path, body, options),
  patch: <T>(path: string, body: unknown, options?: Options) => request<T>('PATCH', path, body, options),
  delete: <T>(path: string, options?: Options) => request<T>('DELETE', path, undefined, options),
};

/** `?a=1&b=2` of what is set; empty and null values are left out. */
export function queryString(values: Record<string, string | number | boolean | null | undefined>): string {
  const set = Object.entries(values).filter(([, value]) => value !== null && value !== undefined && value !== '');
  return set.length === 0 ? '' : `?${new URLSearchParams(set.map(([key, value]) => [key, String(value)]))}`;
}

/** Tells the server's log about an error that happened here; never fails, never asks again. */
export function reportClientError(error: unknown, where: string): void {
  const fault = error instanceof Error ? error : new Error(String(error));
  void fetch(`${BASE}/client-errors`, {
    method: 'POST',
    credentials: 'same-origin',
    keepalive: true,
    headers: { 'Content-Type': 'application/json' },
    body: JSON.stringify({ message: fault.message.slice(0, 500), stack: (fault.stack ?? '').slice(0, 4000), where }),
  }).catch(() => undefined);
}
