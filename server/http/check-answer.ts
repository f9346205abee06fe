import type { z } from 'zod';
import type { Operation } from './api-routes.ts';

/**
 * Holds an answer against the schema that documents it, so that the API reference cannot drift from what is sent.
 * @throws Error when status or body is undocumented; a 500 in tests and development
 */
export function checkAnswer(operation: Operation, answer: { status: number; body?: unknown }): void {
  const name = `${operation.method.toUpperCase()} ${operation.path} ${answer.status}`;
  if (!(answer.status in operation.responses)) throw new Error(`${name} is not documented`);
  const shape = operation.responses[answer.status];
  if (!shape || !('safeParse' in shape)) return;
  const sent: unknown = JSON.parse(JSON.stringify(answer.body));
  const parsed = (shape as z.ZodType).safeParse(sent);
  if (!parsed.success) throw new Error(`${name} differs from its schema: ${parsed.error.message}`);
}
