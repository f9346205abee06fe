import type { z } from 'zod';
import type { Refusal } from '../../shared/problems/outcome.ts';
import { refusalsOfIssues } from '../../shared/problems/refusals-of-issues.ts';
import { hasMessage, translate } from '../lib/messages.ts';
import { readPreferences } from '../lib/preferences.ts';
import { NetworkError, Problem } from './http.ts';

/** What stands in the way, each sentence at its JSON Pointer into the request. */
export interface FormError {
  pointer: string;
  code: string;
  message: string;
}

/**
 * The shared schema's complaints about a request that is not sent yet, in the words in which the server would say them.
 * Needs the messages `server`.
 */
export function schemaErrors(schema: z.ZodType, request: unknown): FormError[] {
  const parsed = schema.safeParse(request);
  return parsed.success ? [] : refusalsOfIssues(parsed.error.issues, request).map(said);
}

/** A refusal in words: what was given, what is allowed. */
function said({ code: found, path, given, allowed, params }: Refusal): FormError {
  // An empty field is missing, not too short.
  const code = found === 'tooShort' && (given === '' || given === undefined) ? 'required' : found;
  const list = Array.isArray(allowed)
    ? new Intl.ListFormat(readPreferences().locale, { type: 'disjunction' }).format(allowed.map(String))
    : allowed;
  const key = hasMessage(`problem.${code}`) ? `problem.${code}` : 'problem.notValid';
  const values = { given: given ?? '', allowed: list ?? '', ...params } as Record<string, string | number>;
  return { pointer: path, code, message: translate(key, values) };
}

/** What the server refused, or that it could not be asked; one sentence at least. */
export function answerErrors(error: unknown): FormError[] {
  if (error instanceof Problem) {
    const reasons = error.errors.map(({ path, code, message }) => ({ pointer: path, code, message }));
    return reasons.length > 0 ? reasons : [{ pointer: '', code: error.code, message: error.message }];
  }
  const code = error instanceof NetworkError ? 'noConnection' : 'failed';
  return [{ pointer: '', code, message: translate(code === 'noConnection' ? 'ui.noConnection' : 'ui.notDone') }];
}

/** The first sentence at one of these places; a place stands for everything under it too. */
export function errorAt(errors: readonly FormError[], ...pointers: string[]): string | undefined {
  return errors.find(({ pointer }) => pointers.some((place) => pointer === place || pointer.startsWith(`${place}/`)))
    ?.message;
}

/** Sentences that none of the form's places shows, so that nothing is swallowed; each once. */
export function errorsElsewhere(errors: readonly FormError[], shown: readonly string[]): string[] {
  const rest = errors.filter(
    ({ pointer }) => !shown.some((place) => pointer === place || pointer.startsWith(`${place}/`)),
  );
  return [...new Set(rest.map(({ message }) => message))];
}
