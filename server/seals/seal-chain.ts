import type { EntityManager } from 'typeorm';
import type { KeyStatement, SealKeyRecord, SealRecord, SealStatement } from '../../shared/proof/seal-record.schema.ts';
import type { Parts } from '../http/parts.ts';
import { Problem } from '../http/problem.ts';
import { postRecords } from '../journal/post-records.ts';
import { findCurrentKey, findLastSeal, lockHeadToSeal, readHead } from './seal.repository.ts';
import { deriveSealKey, type SealKey } from './seal-key.ts';
import { readSealSecrets, type SealSecret } from './seal-secrets.ts';

/** Who seals: a person, or the program itself (`THE_PROGRAM`). Has to be the person in scope. */
export interface Sealer {
  firmId: string;
  personId: string;
}
type Outside = Pick<Parts, 'settings' | 'now' | 'newId'>;

export const sealSecrets = ({ settings }: Pick<Parts, 'settings'>): SealSecret[] =>
  readSealSecrets(settings.sealKeyFile);

/** The key of this record, if the key file still holds what it was derived from. */
export function heldKey(secrets: readonly SealSecret[], firmId: string, record: SealKeyRecord): SealKey | null {
  const secret = secrets.find(({ id }) => id === record.secretId);
  const key = secret ? deriveSealKey(secret, firmId, Number(record.generation)) : null;
  return key?.keyId === record.key.keyId ? key : null;
}

/**
 * Seals the chain up to its head, with the firm's first key made before where there is none. The record of the seal is
 * the next one. In a transaction of the caller's, which sees to the mail.
 * @returns the record that holds the last seal, and whether it is a new one: where nothing is unsealed, none is made
 * @throws Problem 409 `sealKeyLost` when the key file does not hold the firm's key any more
 */
export async function sealChain(
  parts: Outside,
  manager: EntityManager,
  sealer: Sealer,
): Promise<{ record: number; isNew: boolean }> {
  const head = await lockHeadToSeal(manager);
  const last = await findLastSeal(manager);
  if (last && last.record === head.sequence) return { record: last.record, isNew: false };
  const secrets = sealSecrets(parts);
  const current = await findCurrentKey(manager);
  let key = current ? heldKey(secrets, sealer.firmId, current.content) : null;
  if (current && !key) throw new Problem('sealKeyLost');
  key ??= await addKey(parts, manager, sealer, secrets, null, false);
  const { sequence, hash } = await readHead(manager);
  const at = parts.now().toISOString();
  const seal: SealStatement = { at, firmId: sealer.firmId, hash, keyId: key.keyId, sequence: String(sequence) };
  const record: SealRecord = { type: 'seal', ...authorship(parts, sealer, at), seal, signature: key.sign(seal) };
  const [posted] = await postRecords(manager, [record]);
  return { record: Number(posted?.sequence), isNew: true };
}

/**
 * Replaces the firm's key: the new one is derived from the last line of the key file and signed by the one before.
 * @param isLost the one before is gone, so that it signs nothing: whoever knows only the old one will be told so
 */
export async function replaceKey(
  parts: Outside,
  manager: EntityManager,
  sealer: Sealer,
  { currentKeyId, isLost }: { currentKeyId: string | null; isLost: boolean },
): Promise<SealKey> {
  await lockHeadToSeal(manager);
  const current = await findCurrentKey(manager);
  if ((current?.content.key.keyId ?? null) !== currentKeyId) throw new Problem('stale');
  return addKey(parts, manager, sealer, sealSecrets(parts), current?.content ?? null, isLost);
}

async function addKey(
  parts: Outside,
  manager: EntityManager,
  sealer: Sealer,
  secrets: readonly SealSecret[],
  before: SealKeyRecord | null,
  isLost: boolean,
): Promise<SealKey> {
  const newest = secrets.at(-1) as SealSecret;
  const generation = before ? Number(before.generation) + 1 : 1;
  const key = deriveSealKey(newest, sealer.firmId, generation);
  const signer = before && !isLost ? heldKey(secrets, sealer.firmId, before) : null;
  if (before && !signer && !isLost) throw new Problem('sealKeyLost');
  const at = parts.now().toISOString();
  const statement: KeyStatement = {
    at,
    firmId: sealer.firmId,
    keyId: key.keyId,
    previousKeyId: before?.key.keyId ?? null,
    publicKey: key.publicKey.toString('base64'),
  };
  const record: SealKeyRecord = {
    type: 'sealKey',
    ...authorship(parts, sealer, at),
    key: statement,
    generation: String(generation),
    secretId: newest.id,
    signature: signer?.sign(statement) ?? null,
  };
  await postRecords(manager, [record]);
  return key;
}

const authorship = ({ newId }: Pick<Parts, 'newId'>, { personId }: Sealer, at: string) => ({
  id: newId(),
  recordedAt: at,
  recordedBy: personId,
});
