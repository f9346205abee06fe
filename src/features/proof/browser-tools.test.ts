// @vitest-environment node
import { createHash, generateKeyPairSync, sign } from 'node:crypto';
import { once } from 'node:events';
import { describe, expect, it } from 'vitest';
import { ZipFile } from 'yazl';
import { checkPackage, Fault, nodeTools, openZip, type ProofTools } from '../../../shared/proof/verify.mjs';
import { browserTools, sourceOfFile } from './browser-tools.ts';

const bytes = (hex: string) => Uint8Array.from(Buffer.from(hex, 'hex'));

/** RFC 8032, section 7.1: public key, message, signature of the tests 1 to 3. */
const VECTORS = [
  [
    'd75a980182b10ab7d54bfed3c964073a0ee172f3daa62325af021a68f707511a',
    '',
    'e5564300c360ac729086e2cc806e828a84877f1eb8e5d974d873e065224901555fb8821590a33bacc61e39701cf9b46bd25bf5f0595bbe24655141438e7a100b',
  ],
  [
    '3d4017c3e843895a92b70aa74d1b7ebc9c982ccf2ec4968cc0cd55f12af4660c',
    '72',
    '92a009a9f0d4cab8720e820b5f642540a2b27b5416503f8fb3762223ebdb69da085ac1e43e15996e458f3613d0f11d8c387b2eaeb4302aeeb00d291612bb0c00',
  ],
  [
    'fc51cd8e6218a1a38da47ed00230f0580816ed13ba3303ac5deb911548908025',
    'af82',
    '6291d657deec24024827e69c3abe01a30ce548a284743a445e3680d7db5ac3ac18ff9b538d16f290ae67f760984dc6594a7c15e9716ed28dc027beceea1ec40a',
  ],
] as const;

describe('What a browser checks a package with', () => {
  it('hashes as FIPS 180-4 says: SHA-256 of abc', () => {
    expect(Buffer.from(browserTools.sha256(bytes('616263'))).toString('hex')).toBe(
      'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad',
    );
  });

  it.each(VECTORS)(
    'verifies the signatures of RFC 8032, section 7.1, and no other: key %s',
    (key, message, signature) => {
      const wrong = bytes(signature);
      wrong[3] = (wrong[3] ?? 0) ^ 1;
      expect(browserTools.verify(bytes(key), bytes(message), bytes(signature))).toBe(true);
      expect(browserTools.verify(bytes(key), bytes(message), wrong)).toBe(false);
      expect(browserTools.verify(bytes(key), bytes(`${message}00`), bytes(signature))).toBe(false);
    },
  );

  it('finds a package intact, reads it piece by piece, and says how far it is', async () => {
    const read: number[] = [];
    const files = await openZip(
      sourceOfFile(new Blob([await zipOf(packageOf())]), (to) => read.push(to)),
      browserTools,
    );
    const progress: number[] = [];
    const found = await checkPackage(files, browserTools, { onProgress: (records) => progress.push(records) });
    expect(found).toMatchObject({ records: 30_002, seals: 1, sealed: { sequence: 30_001 } });
    expect(read.length).toBeGreaterThan(3);
    expect(progress).toEqual([20_000]);
  });

  it('comes to the same verdict as Node.js, for what was changed too', async () => {
    const verdict = async (zip: Blob, tools: ProofTools) => {
      try {
        const found = await checkPackage(
          await openZip(
            sourceOfFile(zip, () => undefined),
            tools,
          ),
          tools,
        );
        return ['intact', found.head.sequence];
      } catch (error) {
        if (error instanceof Fault) return [error.code, error.sequence];
        throw error;
      }
    };
    const tampered = [
      [(text: string) => text, 'intact'],
      [(text: string) => text.replace('"n":"17"', '"n":"18"'), 'doesNotFollow'],
      [(text: string) => text.replace(/"signature":"./, '"signature":"x'), 'doesNotFollow'],
      [(text: string) => text.split('\n').slice(0, -2).join('\n'), 'notThatMany'],
      [(text: string) => text.replace('{"sequence":9,', '{"sequence":x,'), 'notReadable'],
    ] as const;
    for (const [change, code] of tampered) {
      const files = packageOf();
      const zip = new Blob([await zipOf({ ...files, 'records.jsonl': change(files['records.jsonl']) })]);
      const here = await verdict(zip, browserTools);
      expect(here[0]).toBe(code);
      expect(await verdict(zip, await nodeTools())).toEqual(here);
    }
    const broken = new Blob([(await zipOf(packageOf())).subarray(0, 60_000)]);
    expect(await verdict(broken, browserTools)).toEqual(['notReadable', null]);
  });
});

const sha256 = (...parts: (Buffer | string)[]) => {
  const hash = createHash('sha256');
  for (const part of parts) hash.update(part);
  return hash.digest();
};

/** 30,000 hidden and whole records, a key and its seal, made by nothing but node:crypto. */
function packageOf() {
  const firmId = '018f0000-0000-7000-8000-000000000001';
  const at = '2026-11-30T15:00:00.000Z';
  const { publicKey, privateKey } = generateKeyPairSync('ed25519');
  const der = publicKey.export({ format: 'der', type: 'spki' });
  const keyId = sha256(der).toString('hex');
  let previous: Buffer = Buffer.alloc(32);
  const lines: string[] = [];
  const add = (content: string, isWhole: boolean) => {
    const sequence = lines.length + 1;
    const place = Buffer.alloc(8);
    place.writeBigUInt64BE(BigInt(sequence));
    const contentHash = sha256(content);
    previous = sha256(place, previous, contentHash);
    const hash = previous.toString('hex');
    const rest = isWhole ? `"content":${content}` : `"contentHash":"${contentHash.toString('hex')}"`;
    lines.push(`{"sequence":${sequence},"hash":"${hash}",${rest}}\n`);
  };
  for (let n = 1; n <= 30_000; n++) add(`{"n":"${n}","type":"entry"}`, n % 3 !== 0);
  const key = { at, firmId, keyId, previousKeyId: null, publicKey: der.toString('base64') };
  const keyRecord = JSON.stringify({ key, signature: null, type: 'sealKey' });
  add(keyRecord, true);
  const seal = { at, firmId, hash: previous.toString('hex'), keyId, sequence: '30001' };
  const signature = sign(null, Buffer.from(JSON.stringify(seal)), privateKey).toString('base64');
  const sealRecord = JSON.stringify({ seal, signature, type: 'seal' });
  add(sealRecord, true);
  return {
    'records.jsonl': lines.join(''),
    'seals.jsonl': `${sealRecord}\n`,
    'public-keys.jsonl': `${keyRecord}\n`,
    'proof.json': JSON.stringify({
      format: 'tarewright-proof-1',
      firmId,
      records: lines.length,
      hash: previous.toString('hex'),
    }),
  };
}

async function zipOf(files: Record<string, string>): Promise<Buffer<ArrayBuffer>> {
  const zip = new ZipFile();
  for (const [name, text] of Object.entries(files)) zip.addBuffer(Buffer.from(text), name);
  zip.end();
  const chunks: Buffer[] = [];
  zip.outputStream.on('data', (chunk) => chunks.push(chunk));
  await once(zip.outputStream, 'end');
  return Buffer.concat(chunks);
}
