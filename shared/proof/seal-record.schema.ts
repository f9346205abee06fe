import { z } from 'zod';
import { id } from '../lists/list.schema.ts';

/**
 * Records that speak of the chain itself. They are chained like any other, so that a seal, a change of key or an export
 * cannot be taken away unseen. `verify.mjs` says how they are checked; their last key has to stay `type`.
 */

/** With milliseconds, as `toISOString` writes it: signed texts have one form. */
const instantUtc = z.iso.datetime({ precision: 3 });
const hash = z.string().regex(/^[0-9a-f]{64}$/);
/** Ed25519 (RFC 8032), 64 bytes. */
const signature = z.string().regex(/^[A-Za-z\d+/]{86}==$/);
const authorship = { id, recordedAt: instantUtc, recordedBy: id };

/** Stands for a person where the program itself writes a record: the nil UUID (RFC 9562, 5.9). */
export const THE_PROGRAM = '00000000-0000-0000-0000-000000000000';

/** What a seal signs, as RFC 8785 text: the head of one firm's chain. */
export const sealStatement = z.strictObject({
  at: instantUtc,
  firmId: id,
  /** Of the record that was the last one. */
  hash,
  /** SHA-256 of the public key (SPKI, DER). */
  keyId: hash,
  sequence: z.string().regex(/^[1-9]\d{0,14}$/),
});
export type SealStatement = z.output<typeof sealStatement>;

export const sealRecord = z.strictObject({
  type: z.literal('seal'),
  ...authorship,
  seal: sealStatement,
  signature,
});
export type SealRecord = z.output<typeof sealRecord>;

/** What the key before signs, as RFC 8785 text. */
export const keyStatement = z.strictObject({
  at: instantUtc,
  firmId: id,
  keyId: hash,
  /** Null: the firm's first key. */
  previousKeyId: hash.nullable(),
  /** SPKI (RFC 8410), DER, base64. */
  publicKey: z.string().regex(/^[A-Za-z\d+/]{59}=$/),
});
export type KeyStatement = z.output<typeof keyStatement>;

export const sealKeyRecord = z.strictObject({
  type: z.literal('sealKey'),
  ...authorship,
  key: keyStatement,
  /** With `secretId`, how the server finds the private key again: the how-manieth of this firm. */
  generation: z.string().regex(/^[1-9]\d{0,5}$/),
  /** Which line of the key file it is derived from; says nothing about the secret itself. */
  secretId: z.string().regex(/^[0-9a-f]{16}$/),
  /** By the key before; null: the first, or the one before was lost. */
  signature: signature.nullable(),
});
export type SealKeyRecord = z.output<typeof sealKeyRecord>;

/** Who took what out of the program. */
export const exportRecord = z.strictObject({
  type: z.literal('export'),
  ...authorship,
  /** `proofPackage`, `entries`, ... */
  document: z.string().min(1).max(60),
  format: z.string().min(1).max(20),
  /** What it is about, filters included; numbers as decimal strings. */
  about: z.record(z.string(), z.unknown()),
});
export type ExportRecord = z.output<typeof exportRecord>;
