import { spawn } from 'node:child_process';
import { createHash } from 'node:crypto';
import { once } from 'node:events';
import { copyFileSync, createWriteStream, mkdirSync, mkdtempSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { pipeline } from 'node:stream/promises';
import { ZipFile } from 'yazl';
import { nodeTools, openPath } from '../../shared/proof/verify.mjs';
import type { History } from './history.ts';

/** Outside of the checkout, so that the verifier finds no package and nothing else of ours. */
export const bench = mkdtempSync(path.join(tmpdir(), 'tarewright-proof-'));
let folders = 0;
export function newFolder(): string {
  folders += 1;
  const folder = path.join(bench, String(folders));
  mkdirSync(folder);
  return folder;
}

/** The verifier as a stranger has it: taken before, so that nobody who packs can exchange it. */
export const trustedVerifier = path.join(bench, 'verify.mjs');
copyFileSync('shared/proof/verify.mjs', trustedVerifier);

export interface Verdict {
  status: number | null;
  /** Sentences, the first being the verdict. */
  lines: string[];
}

/** Runs the verifier as a program of its own, with nothing of this process' environment. */
export async function runVerifier(target: string, words: string[] = [], verifier = trustedVerifier): Promise<Verdict> {
  const child = spawn(process.execPath, [verifier, target, ...words], { cwd: bench, env: {} });
  let said = '';
  for (const stream of [child.stdout, child.stderr])
    stream.setEncoding('utf8').on('data', (text) => {
      said += text;
    });
  const [status] = await once(child, 'close');
  return { status, lines: said.trim().split('\n') };
}

/** What the server packs, as a file. */
export async function download(url: string, { client }: Pick<History, 'client'>, query: string): Promise<string> {
  const response = await fetch(`${url}/api/v1/proof-packages?${query}`, { headers: { Cookie: String(client.cookie) } });
  if (response.status !== 200) throw new Error(`${response.status}: ${await response.text()}`);
  const file = path.join(newFolder(), 'package.zip');
  writeFileSync(file, Buffer.from(await response.arrayBuffer()));
  return file;
}

export const FILES = [
  'records.jsonl',
  'seals.jsonl',
  'public-keys.jsonl',
  'proof.json',
  'verify.mjs',
  'README.txt',
  'summary.pdf',
] as const;

/** Unpacked into a folder, each file as bytes. */
export async function unpack(zip: string): Promise<string> {
  const folder = newFolder();
  const files = await openPath(zip, await nodeTools());
  for (const name of FILES) {
    const chunks = files.open(name);
    if (!chunks) throw new Error(`${name} is not in ${zip}`);
    const held: Uint8Array[] = [];
    for await (const chunk of chunks) held.push(chunk);
    writeFileSync(path.join(folder, name), Buffer.concat(held));
  }
  return folder;
}

export async function pack(folder: string, names: readonly string[] = FILES, compress = true): Promise<string> {
  const zip = new ZipFile();
  for (const name of names) zip.addBuffer(readFileSync(path.join(folder, name)), name, { compress });
  zip.end();
  const file = path.join(newFolder(), 'package.zip');
  await pipeline(zip.outputStream, createWriteStream(file));
  return file;
}

export function editFile(folder: string, name: string, change: (text: string) => string): void {
  const file = path.join(folder, name);
  const before = readFileSync(file, 'utf8');
  const after = change(before);
  if (after === before) throw new Error(`nothing in ${name} was changed`);
  writeFileSync(file, after);
}
export const editLines = (folder: string, name: string, change: (lines: string[]) => string[]): void =>
  editFile(folder, name, (text) =>
    change(text.trim().split('\n'))
      .map((line) => `${line}\n`)
      .join(''),
  );

/** A row of journal_record, all columns. */
export interface JournalJson {
  sequence: number;
  type: string;
  record_id: string;
  content: string;
  content_hash: string;
  hash: string;
}

const sha256 = (...parts: (Buffer | string)[]) => {
  const hash = createHash('sha256');
  for (const part of parts) hash.update(part);
  return hash.digest();
};
export function chainedHash(sequence: number, previous: Buffer, content: string): Buffer {
  const place = Buffer.alloc(8);
  place.writeBigUInt64BE(BigInt(sequence));
  return sha256(place, previous, sha256(content));
}

/** Numbers, hashes and the derived columns made anew, so that the chain closes by itself. */
export function rehashed<Row extends JournalJson>(
  rows: readonly Row[],
  change: (row: Row, previous: string) => Row = (row) => row,
): Row[] {
  let previous: Buffer = Buffer.alloc(32);
  return rows.map((held, index) => {
    const row = change(held, previous.toString('hex'));
    const hash = chainedHash(index + 1, previous, row.content);
    previous = hash;
    return {
      ...row,
      sequence: index + 1,
      content_hash: `\\x${sha256(row.content).toString('hex')}`,
      hash: `\\x${hash.toString('hex')}`,
    };
  });
}

export async function journalOf(history: History): Promise<JournalJson[]> {
  const rows = await history.rows<{ row: JournalJson }>(
    'select to_jsonb(j) as row from journal_record j where FIRM order by sequence',
  );
  return rows.map(({ row }) => row);
}

/** Puts other rows in place of a firm's journal, past every trigger, and moves the head to its end. */
export async function replaceJournal(history: History, rows: readonly JournalJson[]): Promise<void> {
  const last = rows.at(-1);
  const json = JSON.stringify(rows).replaceAll("'", "''");
  await history.tamper(`delete from journal_record where FIRM;
    insert into journal_record select * from jsonb_populate_recordset(null::journal_record, '${json}'::jsonb);
    update firm_head set sequence = ${last?.sequence}, hash = '${last?.hash}' where FIRM`);
}

/** A package as somebody builds it who has the rows and knows the format. Records of `hidden` as hashes only. */
export function packageOf(firmId: string, rows: readonly JournalJson[], hidden: readonly number[] = []): string {
  const folder = newFolder();
  const last = rows.at(-1);
  const write = (name: string, text: string) => writeFileSync(path.join(folder, name), text);
  write(
    'records.jsonl',
    rows
      .map(({ sequence, hash, content, content_hash }) =>
        hidden.includes(sequence)
          ? `{"sequence":${sequence},"hash":"${hash.slice(2)}","contentHash":"${content_hash.slice(2)}"}\n`
          : `{"sequence":${sequence},"hash":"${hash.slice(2)}","content":${content}}\n`,
      )
      .join(''),
  );
  const copies = (type: string) =>
    rows
      .filter((row) => row.type === type)
      .map(({ content }) => `${content}\n`)
      .join('');
  write('seals.jsonl', copies('seal'));
  write('public-keys.jsonl', copies('sealKey'));
  const about = { kind: 'period', id: null, from: null, to: null, label: 'everything' };
  const madeAt = '2026-11-30T15:00:00.000Z';
  write(
    'proof.json',
    JSON.stringify({
      format: 'tarewright-proof-1',
      firmId,
      firmName: '',
      about,
      madeAt,
      records: rows.length,
      hash: last?.hash.slice(2),
    }),
  );
  for (const name of ['verify.mjs', 'README.txt', 'summary.pdf']) write(name, '');
  copyFileSync(trustedVerifier, path.join(folder, 'verify.mjs'));
  return folder;
}
