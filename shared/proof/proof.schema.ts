import { z } from 'zod';
import { day, id, pageOf, pageQuery } from '../lists/list.schema.ts';
import { readHash, readHead } from './verify.mjs';

const hash = z.string().regex(/^[0-9a-f]{64}$/);
const instant = z.iso.datetime();

/** Null: the program itself. */
const author = z.strictObject({ id, name: z.string() }).nullable();

export const journalQuery = pageQuery.extend({
  type: z.enum(['group', 'entry', 'register', 'seal', 'sealKey', 'export']).optional(),
});
export type JournalQuery = z.output<typeof journalQuery>;

export const journalRow = z.strictObject({
  sequence: z.int(),
  type: z.string(),
  id,
  recordedAt: instant,
  recordedBy: author,
  /** Of a register record. */
  noun: z.string().nullable(),
  subjectId: id.nullable(),
  version: z.int().nullable(),
  /** RFC 8785 text, byte for byte as it is chained. */
  content: z.string(),
  contentHash: hash,
  hash,
});
export type JournalRow = z.output<typeof journalRow>;
export const journalPage = pageOf(journalRow);

export const sealRow = z.strictObject({
  /** The record that holds the seal. */
  record: z.int(),
  /** The record that was the last one when it was made. */
  sequence: z.int(),
  hash,
  at: instant,
  keyId: hash,
  by: author,
});
export type SealRow = z.output<typeof sealRow>;
export const sealListQuery = pageQuery;
export const sealPage = pageOf(sealRow);

export const sealKeyRow = z.strictObject({
  record: z.int(),
  keyId: hash,
  /** The same in groups of four digits, as it is printed and mailed. */
  fingerprint: z.string(),
  at: instant,
  by: author,
  publicKeyPem: z.string(),
  /** By the key before: `first` has none, `unsigned` means that the one before was lost. */
  signed: z.enum(['first', 'byTheOneBefore', 'unsigned']),
});
export type SealKeyRow = z.output<typeof sealKeyRow>;

export const sealKeysResponse = z.strictObject({
  /** Newest first. */
  items: z.array(sealKeyRow),
  /** Whether this server still holds the private key of the newest; true where there is none yet. */
  held: z.boolean(),
});
export const newKeyRequest = z.strictObject({
  /** The key to be replaced, so that a second press changes nothing; null where there is none yet. */
  currentKeyId: hash.nullable(),
  /** The private key is gone for good: the new one is not signed by it, and whoever knows the old one is told so. */
  currentKeyLost: z.boolean().default(false),
});

export const journalState = z.strictObject({
  head: z.strictObject({ sequence: z.int(), hash }),
  lastSeal: sealRow.nullable(),
  /** Records after the last seal; the record of the seal itself is not counted. */
  unsealed: z.int(),
  keyId: hash.nullable(),
  /** SHA-256 of the verifier that goes into each package. */
  verifierSha256: hash,
});
export type JournalState = z.output<typeof journalState>;

/** What somebody holds from before; groups, blanks and capitals as on the print are let through. */
export const keyFingerprint = z
  .string()
  .max(200)
  .transform((typed, context) => readHash(typed) ?? refuse(context));
export const knownHead = z
  .string()
  .max(200)
  .transform((typed, context) => readHead(typed) ?? refuse(context));
function refuse(context: z.RefinementCtx): never {
  context.addIssue({ code: 'custom', params: { code: 'wrongFormat' } });
  return z.NEVER;
}
export const verificationQuery = z.strictObject({
  keyFingerprint: keyFingerprint.optional(),
  knownHead: knownHead.optional(),
});
export type VerificationQuery = z.output<typeof verificationQuery>;

/** One line of `/journal/verification` (application/x-ndjson): how far it is, or, as the last line, what it found. */
export const verificationProgress = z.strictObject({ checked: z.int(), of: z.int() });
export const verificationResult = z.strictObject({
  result: z.enum(['intact', 'notIntact', 'brokenOff']),
  records: z.int(),
  head: z.strictObject({ sequence: z.int(), hash }).nullable(),
  seals: z.int(),
  sealedUpTo: z.int().nullable(),
  /** The first record that is not as it was, and how. */
  fault: z
    .strictObject({
      code: z.string(),
      sequence: z.int().nullable(),
      /** Table, column, and what the sentence of this code needs besides. */
      values: z.record(z.string(), z.union([z.string(), z.number()])),
      message: z.string(),
    })
    .nullable(),
  /** Bytes of text that were hashed. */
  bytes: z.int(),
});
export type VerificationProgress = z.output<typeof verificationProgress>;
export type VerificationResult = z.output<typeof verificationResult>;

const flag = z.enum(['true', 'false']).transform((text) => text === 'true');
export const PAPERS = ['A4', 'Letter'] as const;

/** One of: a unit, a customer, a period (days in the firm's zone, both included; by when it happened). */
const packageFields = {
  unitId: id.optional(),
  customerId: id.optional(),
  from: day.optional(),
  to: day.optional(),
  paper: z.enum(PAPERS).optional(),
};
/** `words`: with the words beside the records, which may name people. In an address it is text. */
export const proofPackageQuery = z
  .strictObject({ ...packageFields, words: flag.default(false) })
  .superRefine(refuseOtherThanOneSubject);
export const proofPackageFilters = z
  .strictObject({ ...packageFields, words: z.boolean().default(false) })
  .superRefine(refuseOtherThanOneSubject);
export type ProofPackageQuery = z.output<typeof proofPackageQuery>;

function refuseOtherThanOneSubject(
  { unitId, customerId, from, to }: { unitId?: string; customerId?: string; from?: string; to?: string },
  context: z.RefinementCtx,
): void {
  const subjects = [unitId, customerId, from ?? to].filter((subject) => subject !== undefined);
  if (subjects.length !== 1) context.addIssue({ code: 'custom', path: [], params: { code: 'proofSubject' } });
  else if ((from === undefined) !== (to === undefined))
    context.addIssue({ code: 'custom', path: [from === undefined ? 'from' : 'to'], params: { code: 'required' } });
  else if (from !== undefined && to !== undefined && from > to)
    context.addIssue({ code: 'custom', path: ['to'], params: { code: 'periodBackwards', allowed: from } });
}
