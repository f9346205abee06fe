import { createHash, createPrivateKey, createPublicKey, hkdfSync, type KeyObject, sign } from 'node:crypto';
import { canonicalText } from '../journal/canonical-text.ts';
import type { SealSecret } from './seal-secrets.ts';

export interface SealKey {
  /** SHA-256 of the public key (SPKI, DER), in hexadecimal: its fingerprint. */
  keyId: string;
  /** SPKI, DER (RFC 8410). */
  publicKey: Buffer;
  /** Ed25519 (RFC 8032) over the RFC 8785 text, in base64. */
  sign(statement: object): string;
}

/** PKCS #8 of an Ed25519 private key but for its 32 bytes (RFC 8410, section 7). */
const PKCS8 = Buffer.from('302e020100300506032b657004220420', 'hex');

/**
 * A firm's key, derived (HKDF with SHA-256, RFC 5869) from a line of the key file: each firm has its own, can change it
 * without touching another's, and servers that share the file need nothing else.
 * @param generation the how-manieth key of this firm, from 1
 */
export function deriveSealKey(secret: SealSecret, firmId: string, generation: number): SealKey {
  const seed = hkdfSync('sha256', secret.bytes, 'tarewright seal key', `${firmId}/${generation}`, 32);
  const privateKey = createPrivateKey({
    key: Buffer.concat([PKCS8, Buffer.from(seed)]),
    format: 'der',
    type: 'pkcs8',
  });
  const publicKey = createPublicKey(privateKey).export({ format: 'der', type: 'spki' });
  return {
    keyId: fingerprintOf(publicKey),
    publicKey,
    sign: (statement) => sign(null, Buffer.from(canonicalText(statement), 'utf8'), privateKey).toString('base64'),
  };
}

export const fingerprintOf = (publicKey: Buffer): string => createHash('sha256').update(publicKey).digest('hex');

export function publicKeyOf(base64: string): KeyObject {
  return createPublicKey({ key: Buffer.from(base64, 'base64'), format: 'der', type: 'spki' });
}
