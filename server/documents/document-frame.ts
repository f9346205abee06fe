import type { Writable } from 'node:stream';
import type { EntityManager } from 'typeorm';
import type { Preferences, Session } from '../../shared/session/session.schema.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { findLastSeal, readHead } from '../seals/seal.repository.ts';
import { Paper } from './paper.ts';
import { type Words, wordsOf } from './words.ts';

export type DocumentParts = Pick<Parts, 'settings' | 'dataSource' | 'reference' | 'now' | 'newId' | 'log'>;

/** What every paper needs: who makes it for whom, in which words, and what vouches for the log at this moment. */
export interface DocumentFrame {
  parts: DocumentParts;
  manager: EntityManager;
  actor: Actor;
  stream: Writable;
  words: Words;
  firm: Pick<Session['firm'], 'name' | 'jurisdiction' | 'timeZone' | 'gwpSet'>;
  madeBy: string;
  /** Short forms of the last seal and of the head; null for a reader, who does not see the journal. */
  vouched: string | null;
}

export async function frameOf(
  parts: DocumentParts,
  manager: EntityManager,
  actor: Actor,
  stream: Writable,
): Promise<DocumentFrame> {
  const [row] = await manager.query<
    (DocumentFrame['firm'] & { madeBy: string; mass?: Preferences['mass']; length?: Preferences['length'] })[]
  >(
    `select f.name, f.jurisdiction, f.time_zone as "timeZone", f.gwp_set as "gwpSet", p.name as "madeBy",
       p.preferences ->> 'mass' as mass, p.preferences ->> 'length' as length from firm f join person p on p.id = $1`,
    [actor.personId],
  );
  if (!row) throw new Error('a paper is made for somebody of the firm');
  const words = wordsOf(
    actor.locale,
    row.mass ?? (actor.locale === 'en-US' ? 'lbOz' : 'g'),
    row.length ?? (actor.locale.endsWith('-US') ? 'ft' : 'm'),
  );
  return {
    parts,
    manager,
    actor,
    stream,
    words,
    firm: row,
    madeBy: row.madeBy,
    vouched: await vouchedBy(manager, words),
  };
}

async function vouchedBy(manager: EntityManager, words: Words): Promise<string | null> {
  const head = await readHead(manager);
  if (head.sequence === 0) return null;
  const seal = await findLastSeal(manager);
  const sealed =
    seal && words.say('foot.seal', { ...shortOf(seal.content.seal), day: seal.content.seal.at.slice(0, 10) });
  return [sealed, words.say('foot.head', shortOf(head))].filter(Boolean).join('   ');
}
const shortOf = ({ sequence, hash }: { sequence: number | string; hash: string }) => ({
  sequence: String(sequence),
  hash: hash.slice(0, 16).replaceAll(/(.{4})(?=.)/g, '$1 '),
});

/** A4 where the firm works under the rules of the EU, Letter in the US. */
export async function openPaper(
  { parts, actor, stream, words, firm, madeBy, vouched }: DocumentFrame,
  { title, subject, link }: { title: string; subject: string; link: string | null },
): Promise<Paper> {
  const at = parts.now();
  const made = words.say('foot.made', { firm: firm.name, at: words.instant(at, firm.timeZone), by: madeBy });
  const paper = await Paper.open({
    size: firm.jurisdiction === 'US' ? 'LETTER' : 'A4',
    language: actor.locale,
    title: `${title}: ${subject}`,
    author: firm.name,
    at,
    footer: [made, ...(vouched === null ? [] : [vouched])],
    pageWords: (page, pages) => words.say('foot.page', { page, pages }),
    stream,
  });
  const top = paper.y;
  const qrSize = 84;
  if (link)
    await paper.qr(`${parts.settings.publicUrl}${link}`, paper.left + paper.width - qrSize + 8, top - 12, qrSize);
  paper.line(firm.name, paper.left, top, { face: 'condensed', size: 10 });
  paper.line(title, paper.left, top + 15, { face: 'wide', size: 20 });
  paper.line(subject, paper.left, top + 44, { face: 'strong', size: 11 });
  paper.y = top + (link ? 76 : 64);
  paper.rule(1.5);
  paper.space(10);
  return paper;
}
