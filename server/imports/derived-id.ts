import { createHash } from 'node:crypto';

/**
 * An id made from what a row says, so that the same row of the same firm is the same thing however often its file comes:
 * shaped as UUID version 7 (RFC 9562), which the log asks for. Its time is nothing (1970), because what the row says of
 * time depends on how the file was read; its other 74 bits are SHA-256.
 */
export function derivedId(...content: readonly string[]): string {
  const bytes = Buffer.alloc(16);
  createHash('sha256').update(JSON.stringify(content)).digest().copy(bytes, 6, 0, 10);
  bytes[6] = 0x70 | ((bytes[6] ?? 0) & 0x0f);
  bytes[8] = 0x80 | ((bytes[8] ?? 0) & 0x3f);
  const hex = bytes.toString('hex');
  return [hex.slice(0, 8), hex.slice(8, 12), hex.slice(12, 16), hex.slice(16, 20), hex.slice(20)].join('-');
}
