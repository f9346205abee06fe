import type { FieldValues, Path, UseFormSetError } from 'react-hook-form';
import { NetworkError, Problem } from '../../api/http.ts';
import { translate } from '../../lib/messages.ts';

/**
 * Puts what the server refused beside the fields that it names, and the rest under `root`. Nothing typed is touched.
 * `fields` are the form's own names; the server's paths are JSON Pointers with the same names.
 */
export function showProblem<T extends FieldValues>(
  error: unknown,
  setError: UseFormSetError<T>,
  fields: readonly Path<T>[],
): void {
  if (error instanceof Problem) {
    let placed = false;
    for (const reason of error.errors) {
      const field = fields.find((name) => `/${name}` === reason.path);
      if (!field) continue;
      setError(field, { type: reason.code, message: reason.message });
      placed = true;
    }
    if (!placed) setError('root', { type: error.code, message: error.message });
    return;
  }
  const message = error instanceof NetworkError ? translate('session.noConnection') : String(error);
  setError('root', { type: 'failed', message });
}

/** The schema's own words are for programmers; a person gets the sentence of the code. */
export function fieldMessage(
  error: { type?: string | undefined; message?: string | undefined } | undefined,
): string | undefined {
  if (!error) return undefined;
  switch (error.type) {
    case 'invalid_format':
      return translate('session.error.email');
    case 'too_small':
      return translate('session.error.tooShort');
    case 'too_big':
      return translate('session.error.tooLong');
    case 'invalid_type':
      return translate('session.error.required');
    default:
      return error.message;
  }
}
