import { hashes, verify } from '@noble/ed25519';
import { sha256, sha512 } from '@noble/hashes/sha2.js';
import type { ByteSource, ProofTools } from '../../../shared/proof/verify.mjs';

// In JavaScript, not by the browser: its own hashing answers later, each time, and is missing where a page came by plain
// HTTP; its Ed25519 is missing in browsers of 2024.
hashes.sha512 = sha512;

export const browserTools: ProofTools = {
  sha256,
  verify: (publicKey, message, signature) => verify(signature, message, publicKey),
  inflate: (chunks) => inflated(chunks),
};

/** A reader and no `for await`, which not every browser has for streams. */
async function* inflated(chunks: AsyncIterable<Uint8Array>): AsyncGenerator<Uint8Array> {
  const inflate = new DecompressionStream('deflate-raw');
  const writer = inflate.writable.getWriter();
  const written = (async () => {
    for await (const chunk of chunks) await writer.write(chunk as Uint8Array<ArrayBuffer>);
    await writer.close();
  })();
  written.catch(() => undefined); // what went wrong comes out where it is read
  const reader = inflate.readable.getReader();
  for (let part = await reader.read(); !part.done; part = await reader.read()) yield part.value;
  await written;
}

const AT_ONCE = 262_144;

/**
 * A dropped file, read piece by piece. Between two pieces the page may draw and be used.
 * @param onRead hears how many bytes were read so far
 */
export function sourceOfFile(file: Blob, onRead: (bytes: number) => void): ByteSource {
  const read = async (from: number, to: number) => new Uint8Array(await file.slice(from, to).arrayBuffer());
  return {
    size: file.size,
    read,
    async *stream(from, to) {
      for (let at = from; at < to; at += AT_ONCE) {
        yield await read(at, Math.min(to, at + AT_ONCE));
        onRead(at + AT_ONCE);
        await new Promise((resolve) => setTimeout(resolve));
      }
    },
  };
}
