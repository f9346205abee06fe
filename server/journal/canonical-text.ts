import { createHash, randomBytes } from 'node:crypto';
import canonicalize from 'canonicalize';

/** The RFC 8785 form of a value: what is chained and hashed. */
export function canonicalText(value: unknown): string {
  const text = canonicalize(value);
  if (text === undefined) throw new TypeError('nothing that JSON can write');
  return text;
}

export function sha256Hex(...parts: (string | Buffer)[]): string {
  const hash = createHash('sha256');
  for (const part of parts) hash.update(part);
  return hash.digest('hex');
}

/** SHA-256 of the RFC 8785 form of a request without what its device says of itself: the same content, the same hash. */
export function requestHash(body: object): string {
  const { deviceSentAt: _, ...content } = body as { deviceSentAt?: unknown };
  return sha256Hex(canonicalText(content));
}

/** Words that stand beside the chain: the record holds SHA-256 of salt and words, so that the words can be erased. */
export interface SaltedText {
  saltHex: string;
  hash: string;
}

export function saltText(content: string): SaltedText {
  const salt = randomBytes(16);
  return { saltHex: salt.toString('hex'), hash: sha256Hex(salt, content) };
}

export const isSaltedText = (content: string, { salt, hash }: { salt: Buffer; hash: string }): boolean =>
  sha256Hex(salt, content) === hash;
