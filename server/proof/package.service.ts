import { createHash } from 'node:crypto';
import { type PassThrough, Readable, type Writable } from 'node:stream';
import { finished, pipeline } from 'node:stream/promises';
import type { Response } from 'express';
import type { DataSource, EntityManager } from 'typeorm';
import { ZipFile } from 'yazl';
import { PROOF_PACKAGE } from '../../shared/exports/export.schema.ts';
import type { ProofPackageQuery } from '../../shared/proof/proof.schema.ts';
import type { SealRecord } from '../../shared/proof/seal-record.schema.ts';
import type { ProofManifest } from '../../shared/proof/verify.mjs';
import { inFirm } from '../database/firm-scope.ts';
import { placeView, readLabels } from '../entries/place-labels.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { journalExport } from '../journal/journal-export.ts';
import { messageFor } from '../messages/translate.ts';
import { mailSeals, readVerifier } from '../seals/seal.service.ts';
import { sealChain } from '../seals/seal-chain.ts';
import { addSealMails } from '../seals/seal-mail.repository.ts';
import {
  type PackedWords,
  readFirm,
  readPacked,
  readPersonName,
  readSealTexts,
  readShownEntries,
  readWords,
} from './package.repository.ts';
import { type ProofSubject, requireSubject } from './subject.repository.ts';
import { summaryPdf } from './summary-pdf.ts';
import { planForRanges } from './verification.repository.ts';

type PackageParts = Pick<Parts, 'settings' | 'now' | 'newId' | 'log' | 'mailer' | 'background' | 'dataSource'>;

/** Records read and written at a time: what is held in memory, whatever the length of the log. */
const AT_ONCE = 1_000;
/** Entries that the PDF shows; the package holds them all. */
const SHOWN_ENTRIES = 400;

export interface Packing {
  query: ProofPackageQuery;
  subject: ProofSubject;
  /** The record of this very export, and the seal over it that the package ends with. */
  exportSequence: number;
  sealSequence: number;
  withWords: boolean;
}

/**
 * A package at once, as an answer: for programs, and where somebody waits for it.
 * @throws Problem 422 `notKnownHere`, 409 `sealKeyLost`, before the first byte
 */
export async function sendProofPackage(
  parts: Parts,
  actor: Actor,
  query: ProofPackageQuery,
  res: Response,
): Promise<void> {
  const packing = await beginPackage(parts, parts.dataSource, actor, query, null);
  const fileName = `proof-${packing.subject.about.kind}-${parts.now().toISOString().slice(0, 10)}.zip`;
  res.attachment(fileName).type('application/zip');
  await writePackage(parts, parts.dataSource, actor, packing, res);
}

/**
 * Journals who takes out what, seals the log with that, and has the head mailed.
 * @param exportId the job that makes it; null: it is sent at once
 * @throws Problem 422 `notKnownHere`, 409 `sealKeyLost`
 */
export async function beginPackage(
  parts: PackageParts,
  dataSource: DataSource,
  actor: Actor,
  query: ProofPackageQuery,
  exportId: string | null,
): Promise<Packing> {
  const { packing, isNew } = await inFirm(dataSource, actor, async (manager) => {
    const subject = await requireSubject(manager, query);
    const { kind, id, from, to } = subject.about;
    const about = { kind, id, from, to, words: query.words, ...(exportId === null ? {} : { exportId }) };
    const what = { document: PROOF_PACKAGE, format: 'zip', about };
    const exportSequence = await journalExport(parts, manager, actor, what);
    const { record, isNew } = await sealChain(parts, manager, actor);
    if (isNew) await addSealMails(manager, actor.firmId, record, parts.now());
    const packing = { query, subject, exportSequence, sealSequence: record, withWords: query.words };
    return { packing, isNew };
  });
  if (isNew) mailSeals(parts, parts.dataSource, actor);
  return packing;
}

/**
 * Writes the package to the stream and ends it: in constant memory, from one snapshot, up to the seal over its record.
 * @param progress told how many records are written; throws to stop
 * @returns how many records it holds, whole or as hashes
 */
export function writePackage(
  parts: PackageParts,
  dataSource: DataSource,
  actor: Actor,
  packing: Packing,
  stream: Writable,
  progress: (records: number) => void = () => undefined,
): Promise<number> {
  return inFirm(
    dataSource,
    actor,
    async (manager) => {
      await planForRanges(manager);
      const zip = new ZipFile();
      const filled = fillZip(parts, actor, manager, packing, zip, progress).catch((error: Error) => {
        (zip.outputStream as PassThrough).destroy(error);
        throw error;
      });
      // Both are waited for, also when one failed: nothing may still read when the transaction ends.
      const [records, sent] = await Promise.allSettled([filled, pipeline(zip.outputStream, stream)]);
      if (records.status === 'rejected') throw records.reason;
      if (sent.status === 'rejected') throw sent.reason;
      return records.value;
    },
    'REPEATABLE READ',
  );
}

async function fillZip(
  parts: PackageParts,
  actor: Actor,
  manager: EntityManager,
  packing: Packing,
  zip: ZipFile,
  progress: (records: number) => void,
): Promise<number> {
  const mtime = parts.now();
  const counts = { records: 0, whole: 0, hash: '' };
  const lines = recordLines(manager, packing, counts, progress);
  const records = Readable.from(lines, { objectMode: false });
  zip.outputStream.once('close', () => records.destroy());
  zip.addReadStream(records, 'records.jsonl', { mtime });
  try {
    await finished(records);
  } catch (error) {
    await lines.return(undefined); // after what it is reading at the moment
    throw error;
  }

  const texts = await readSealTexts(manager, packing.sealSequence);
  const linesOf = (type: 'seal' | 'sealKey') =>
    texts.filter((text) => text.type === type).map(({ content }) => `${content}\n`);
  const firm = await readFirm(manager);
  const manifest: ProofManifest = {
    format: 'tarewright-proof-1',
    firmId: actor.firmId,
    firmName: firm.name,
    about: packing.subject.about,
    madeAt: mtime.toISOString(),
    records: counts.records,
    hash: counts.hash,
  };
  const verifier = readVerifier();
  const last = JSON.parse(linesOf('seal').at(-1) ?? '{}') as SealRecord;
  const summary = await summaryPdf({
    manifest,
    counts,
    seal: last.seal,
    madeBy: await readPersonName(manager, actor.personId),
    verifierSha256: createHash('sha256').update(verifier).digest('hex'),
    timeZone: firm.timeZone,
    locale: actor.locale,
    paper: packing.query.paper ?? (firm.jurisdiction === 'US' ? 'Letter' : 'A4'),
    entries: await entriesToShow(manager, packing, actor),
    shownAtMost: SHOWN_ENTRIES,
  });
  const add = (name: string, content: string | Buffer) =>
    zip.addBuffer(typeof content === 'string' ? Buffer.from(content, 'utf8') : content, name, { mtime });
  add('seals.jsonl', linesOf('seal').join(''));
  add('public-keys.jsonl', linesOf('sealKey').join(''));
  add('proof.json', `${JSON.stringify(manifest, null, 2)}\n`);
  add('verify.mjs', verifier);
  add('README.txt', `${messageFor('proof.readme', 'en-GB')}\n\n\n${messageFor('proof.readme', 'es-ES')}\n`);
  add('summary.pdf', summary);
  zip.end();
  return counts.records;
}

/** One line a record, and after it the words beside it, in the form that `verify.mjs` describes. */
async function* recordLines(
  manager: EntityManager,
  { subject, exportSequence, sealSequence, withWords }: Packing,
  counts: { records: number; whole: number; hash: string },
  progress: (records: number) => void,
): AsyncGenerator<Buffer> {
  for (let after = 0; after < sealSequence; ) {
    const range = { after, upTo: sealSequence, limit: AT_ONCE, exportSequence };
    const rows = await readPacked(manager, subject, range);
    if (rows.length === 0) return;
    progress(counts.records);
    const whole = rows.filter(({ isWhole }) => isWhole).map(({ recordId }) => recordId);
    const words = withWords ? await readWords(manager, whole) : new Map<string, PackedWords[]>();
    const lines: string[] = [];
    for (const { sequence, recordId, content, hash, isWhole } of rows) {
      counts.records++;
      counts.hash = hash;
      if (!isWhole) {
        // Hashed anew, so that a text that was changed behind the log's back shows even where it does not leave.
        const contentHash = createHash('sha256').update(content, 'utf8').digest('hex');
        lines.push(`{"sequence":${sequence},"hash":"${hash}","contentHash":"${contentHash}"}\n`);
        continue;
      }
      counts.whole++;
      lines.push(`{"sequence":${sequence},"hash":"${hash}","content":${content}}\n`);
      for (const { field, salt, content: text } of words.get(recordId) ?? [])
        lines.push(`${JSON.stringify({ words: Number(sequence), field, salt, content: text })}\n`);
    }
    after = Number(rows.at(-1)?.sequence);
    yield Buffer.from(lines.join(''), 'utf8');
  }
}

async function entriesToShow(manager: EntityManager, { subject, sealSequence }: Packing, { locale }: Actor) {
  const rows = await readShownEntries(manager, subject, sealSequence, SHOWN_ENTRIES + 1);
  const labels = await readLabels(
    manager,
    rows.flatMap(({ fromId, toId }) => [fromId, toId]),
  );
  return rows.map((row) => ({
    ...row,
    from: placeView({ place: row.fromPlace, id: row.fromId, as: row.fromAs }, labels, locale).label,
    to: placeView({ place: row.toPlace, id: row.toId, as: row.toAs }, labels, locale).label,
  }));
}
