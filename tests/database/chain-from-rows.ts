import { createHash } from 'node:crypto';

export interface ChainRow {
  sequence: string;
  content: string;
  hash: Buffer;
}

const sha256 = (...parts: (Buffer | string)[]) =>
  parts.reduce((hash, part) => hash.update(part), createHash('sha256')).digest();

/**
 * Sequence of the first record that does not follow from the one before; null: the chain is intact.
 * hash = SHA-256(sequence as 8 bytes big-endian, previous hash, SHA-256(text)), 32 zero bytes before the first.
 */
export function firstBrokenRecord(rows: readonly ChainRow[]): number | null {
  let previous: Buffer = Buffer.alloc(32);
  for (const [index, row] of rows.entries()) {
    const sequence = Buffer.alloc(8);
    sequence.writeBigUInt64BE(BigInt(index + 1));
    const expected = sha256(sequence, previous, sha256(row.content));
    if (row.sequence !== String(index + 1) || !expected.equals(row.hash)) return index + 1;
    previous = expected;
  }
  return null;
}
