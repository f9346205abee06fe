import express, { type Request, type RequestHandler, type Response } from 'express';
import { Problem } from './problem.ts';

export const DEFAULT_BODY_LIMIT_BYTES = 256 * 1024;

const readers = new Map<number, RequestHandler>();

/**
 * Reads a JSON body into `req.body`, after the caller is known to be allowed. Compressed bodies are refused, so that a
 * small one cannot unpack into a large one.
 * @throws Problem 415 for another media type or encoding, 400 for no JSON, 413 above the limit
 */
export async function readJsonBody(req: Request, res: Response, limit = DEFAULT_BODY_LIMIT_BYTES): Promise<void> {
  if (!req.is('application/json')) {
    const hasBody = req.headers['transfer-encoding'] !== undefined || Number(req.headers['content-length'] ?? 0) > 0;
    throw new Problem(hasBody ? 'unsupportedMediaType' : 'malformedJson');
  }
  await new Promise<void>((resolve, reject) => {
    readerFor(limit)(req, res, (error?: unknown) => (error ? reject(error) : resolve()));
  });
  if (req.body === undefined) throw new Problem('malformedJson');
}

function readerFor(limit: number): RequestHandler {
  const held = readers.get(limit);
  if (held) return held;
  const reader = express.json({
    limit,
    inflate: false,
    strict: true,
    verify: (req, _res, bytes) => {
      req.mayHoldUnstorableText = bytes.includes('\\u');
    },
  });
  readers.set(limit, reader);
  return reader;
}
