import { createHash, randomBytes } from 'node:crypto';

/** A random secret for a link or a token: 256 bits, safe in URLs. `prefix` lets people and scanners recognise it. */
export function newSecretToken(prefix = ''): string {
  return prefix + randomBytes(32).toString('base64url');
}

/** Only this is stored: whoever reads the database holds no secret. A random one needs no slow hash. */
export function hashOfSecretToken(token: string): Buffer {
  return createHash('sha256').update(token).digest();
}
