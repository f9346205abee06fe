/** What the checks need from around them; nodeTools has it for Node.js, src/lib for browsers. */
export interface ProofTools {
  /** SHA-256: 32 bytes. */
  sha256(bytes: Uint8Array): Uint8Array;
  /** Ed25519 (RFC 8032) over raw bytes: 32 of the key, 64 of the signature. */
  verify(publicKey: Uint8Array, message: Uint8Array, signature: Uint8Array): boolean;
  /** Undoes raw deflate (RFC 1951). */
  inflate(chunks: AsyncIterable<Uint8Array>): AsyncIterable<Uint8Array>;
}

export const FAULT_CODES: readonly FaultCode[];
export type FaultCode =
  | 'missing'
  | 'repeated'
  | 'textChanged'
  | 'doesNotFollow'
  | 'sealedOtherwise'
  | 'sealNotSigned'
  | 'sealKeyUnknown'
  | 'ofAnotherFirm'
  | 'keyFalse'
  | 'keyNotSigned'
  | 'otherSigner'
  | 'signerLost'
  | 'notTheKnownHead'
  | 'cutOff'
  | 'notThatMany'
  | 'noSealAtEnd'
  | 'wordsChanged'
  | 'copyDiffers'
  | 'noFile'
  | 'notReadable';

/** What is wrong; `sequence` is the first record that is not as it was, null where it is not about a record. */
export class Fault extends Error {
  constructor(code: FaultCode, sequence?: number | null, values?: Record<string, string | number>);
  readonly code: FaultCode;
  readonly sequence: number | null;
  readonly values: Readonly<Record<string, string | number>>;
}

export interface KnownHead {
  sequence: number;
  /** 64 hexadecimal digits in lower case. */
  hash: string;
}
export interface KnownBefore {
  /** SHA-256 of the public key (SPKI, DER), 64 hexadecimal digits in lower case. */
  keyFingerprint?: string | undefined;
  knownHead?: KnownHead | undefined;
}

export interface Sealed extends KnownHead {
  at: string;
  keyId: string;
  /** The record that holds the seal. */
  record: number;
}
export interface Found {
  records: number;
  whole: number;
  words: number;
  erased: number;
  seals: number;
  /** Null: no seal yet. */
  sealed: Sealed | null;
  keys: { keyId: string; at: string; record: number }[];
  /** Records that bring in a key which the one before did not sign. */
  unsignedKeys: number[];
  head: KnownHead;
  signer: 'checked' | 'notChecked';
  end: 'checked' | 'notChecked';
}

/** The chain of one firm, record after record, in constant memory. */
export class Chain {
  constructor(tools: Pick<ProofTools, 'sha256' | 'verify'>, options?: { firmId?: string } & KnownBefore);
  readonly seals: string[];
  readonly keys: string[];
  /** @throws Fault */
  add(sequence: number, hash: Uint8Array, content: Uint8Array | null, contentHash?: Uint8Array | null): void;
  /** @throws Fault */
  addWords(sequence: number, field: string, salt: string, content: string | null): void;
  /** @throws Fault */
  finish(): Found;
}

export interface PackageFiles {
  open(name: string): AsyncIterable<Uint8Array> | null;
}
/** What proof.json says; only format, firmId, records and hash are checked. */
export interface ProofManifest {
  format: 'tarewright-proof-1';
  firmId: string;
  firmName: string;
  about: {
    kind: 'unit' | 'customer' | 'period';
    id: string | null;
    from: string | null;
    to: string | null;
    label: string;
  };
  madeAt: string;
  records: number;
  hash: string;
}
export interface CheckedPackage extends Found {
  sealed: Sealed;
  proof: ProofManifest;
}

/** @throws Fault, the first */
export function checkPackage(
  files: PackageFiles,
  tools: ProofTools,
  options?: KnownBefore & { onProgress?: (records: number, of: number) => void },
): Promise<CheckedPackage>;

export interface ByteSource {
  size: number;
  read(from: number, to: number): Promise<Uint8Array> | Uint8Array;
  stream(from: number, to: number): AsyncIterable<Uint8Array> | Iterable<Uint8Array>;
}
/** @throws Fault */
export function openZip(source: ByteSource, tools: Pick<ProofTools, 'inflate'>): Promise<PackageFiles>;
export function openPath(path: string, tools: ProofTools): Promise<PackageFiles>;
export function nodeTools(): Promise<ProofTools>;

export function grouped(hex: string): string;
export function readHash(typed: string): string | null;
export function readHead(typed: string): KnownHead | null;
export function report(found: Fault | CheckedPackage, language?: 'en' | 'es'): string[];
