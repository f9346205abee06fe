import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import path from 'node:path';
import type { DataSource } from 'typeorm';
import type { PageQuery } from '../../shared/lists/list.schema.ts';
import type { JournalState, SealKeyRow, SealRow } from '../../shared/proof/proof.schema.ts';
import { type SealKeyRecord, THE_PROGRAM } from '../../shared/proof/seal-record.schema.ts';
import { grouped } from '../../shared/proof/verify.mjs';
import { projectRoot } from '../commands/project-root.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { instantText } from '../mail/instant-text.ts';
import { dueSeals, isUnsealed } from './due-seals.ts';
import {
  findCurrentKey,
  findSealRow,
  readHead,
  listKeys as readKeys,
  readSealFacts,
  listSeals as readSeals,
} from './seal.repository.ts';
import { heldKey, replaceKey, sealChain, sealSecrets } from './seal-chain.ts';
import { publicKeyOf } from './seal-key.ts';
import { addSealMails, claimSealMails, markSealMailSent, releaseSealMail } from './seal-mail.repository.ts';

/** The verifier as it goes into packages: the file itself, from the checkout that the server runs in. */
export const readVerifier = (): string => readFileSync(path.join(projectRoot, 'shared/proof/verify.mjs'), 'utf8');

export function getState(parts: Parts, actor: Actor): Promise<JournalState> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    const facts = await readSealFacts(manager);
    const lastSeal = facts.lastSeal ? await findSealRow(manager, facts.lastSeal.record) : null;
    const key = await findCurrentKey(manager);
    return {
      head: await readHead(manager),
      lastSeal,
      unsealed: isUnsealed(facts) ? facts.headSequence - (facts.lastSeal?.record ?? 0) : 0,
      keyId: key?.content.key.keyId ?? null,
      verifierSha256: createHash('sha256').update(readVerifier()).digest('hex'),
    };
  });
}

export function listSeals(parts: Parts, actor: Actor, query: PageQuery) {
  return inFirm(parts.dataSource, actor, (manager) => readSeals(manager, query));
}

export function listKeys(parts: Parts, actor: Actor) {
  return inFirm(parts.dataSource, actor, async (manager) => {
    const current = await findCurrentKey(manager);
    const items = await readKeys(manager, presentKey);
    return { items, held: !current || heldKey(sealSecrets(parts), actor.firmId, current.content) !== null };
  });
}

function presentKey(record: number, content: SealKeyRecord, by: SealKeyRow['by']): SealKeyRow {
  const { at, keyId, previousKeyId, publicKey } = content.key;
  const publicKeyPem = publicKeyOf(publicKey).export({ format: 'pem', type: 'spki' }) as string;
  const signed = previousKeyId === null ? 'first' : content.signature === null ? 'unsigned' : 'byTheOneBefore';
  return { record, keyId, fingerprint: grouped(keyId), at, by, publicKeyPem, signed };
}

/** Seals now; where nothing is unsealed, the last seal stands. */
export async function sealNow(parts: Parts, actor: Actor): Promise<{ seal: SealRow; isNew: boolean }> {
  const sealed = await inFirm(parts.dataSource, actor, async (manager) => {
    const { record, isNew } = await sealChain(parts, manager, actor);
    if (isNew) await addSealMails(manager, actor.firmId, record, parts.now());
    return { seal: (await findSealRow(manager, record)) as SealRow, isNew };
  });
  if (sealed.isNew) mailSeals(parts, parts.dataSource, actor);
  return sealed;
}

/** @throws Problem 412 when somebody replaced it before, 409 `sealKeyLost` */
export async function changeKey(
  parts: Parts,
  actor: Actor,
  request: { currentKeyId: string | null; currentKeyLost: boolean },
) {
  const { currentKeyId, currentKeyLost: isLost } = request;
  await inFirm(parts.dataSource, actor, async (manager) => {
    await replaceKey(parts, manager, actor, { currentKeyId, isLost });
    const { record } = await sealChain(parts, manager, actor);
    await addSealMails(manager, actor.firmId, record, parts.now());
  });
  mailSeals(parts, parts.dataSource, actor);
  return listKeys(parts, actor);
}

/**
 * One round of the daily sealing: each firm for which a seal is due, then the mails that are still to be sent. Safe with
 * several servers: what is due is asked again with the firm's head locked.
 * @param jobs connected as the role that may list firms
 */
export async function sealWhatIsDue(parts: Parts, jobs: DataSource): Promise<void> {
  const rows = await jobs.query<{ id: string }[]>('select list_firm_ids() as id');
  for (const { id: firmId } of rows) {
    const program = { firmId, personId: THE_PROGRAM, siteIds: null };
    const isDue = async () =>
      dueSeals(parts.now(), [await inFirm(jobs, program, (manager) => readSealFacts(manager))]).length > 0;
    try {
      if (await isDue()) await sealFirm(parts, jobs, program);
    } catch (error) {
      // One firm's lost key must not keep the others from being sealed.
      parts.log.error({ err: error, firmId }, 'could not be sealed');
    }
    try {
      await sendSealMails(parts, jobs, program);
    } catch (error) {
      parts.log.error({ err: error, firmId }, 'the head could not be mailed');
    }
  }
}

async function sealFirm(parts: Parts, jobs: DataSource, program: Actorless): Promise<void> {
  await inFirm(jobs, program, async (manager) => {
    await manager.query('select from lock_head()');
    if (dueSeals(parts.now(), [await readSealFacts(manager)]).length === 0) return;
    const { record, isNew } = await sealChain(parts, manager, program);
    if (isNew) await addSealMails(manager, program.firmId, record, parts.now());
  });
}

type MailParts = Pick<Parts, 'settings' | 'now' | 'mailer' | 'background'>;
type Actorless = { firmId: string; personId: string; siteIds: null };

/** Behind the answer; what cannot be sent now is tried again by the daily round. */
export function mailSeals(parts: MailParts, dataSource: DataSource, { firmId }: Pick<Actor, 'firmId'>): void {
  const program = { firmId, personId: THE_PROGRAM, siteIds: null };
  parts.background.run('mail a sealed head', () => sendSealMails(parts, dataSource, program));
}

/** After the commit and outside of any transaction. A crash between the mail server's yes and ours mails it once more. */
async function sendSealMails(
  parts: Omit<MailParts, 'background'>,
  dataSource: DataSource,
  program: Actorless,
): Promise<void> {
  const mails = await inFirm(dataSource, program, (manager) => claimSealMails(manager, parts.now()));
  for (const mail of mails) {
    const seal = await inFirm(dataSource, program, (manager) => findSealRow(manager, mail.sequence));
    if (!seal) continue;
    const { sent } = await parts.mailer.send({
      kind: 'sealed',
      to: mail.email,
      locale: mail.locale,
      values: {
        name: mail.name,
        firm: mail.firmName,
        sequence: String(seal.sequence),
        at: instantText(new Date(seal.at), mail.locale),
        head: `${seal.sequence}:${seal.hash}`,
        fingerprint: grouped(seal.keyId),
        link: `${parts.settings.publicUrl}/log/proof`,
      },
    });
    await inFirm(dataSource, program, (manager) =>
      sent ? markSealMailSent(manager, mail, parts.now()) : releaseSealMail(manager, mail),
    );
  }
}
