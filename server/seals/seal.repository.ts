import type { EntityManager } from 'typeorm';
import type { SealKeyRow, SealRow } from '../../shared/proof/proof.schema.ts';
import { type SealKeyRecord, type SealRecord, THE_PROGRAM } from '../../shared/proof/seal-record.schema.ts';
import type { PageRequest } from '../lists/list-query.ts';
import { Conditions, readPage } from '../lists/list-query.ts';

export interface Head {
  sequence: number;
  /** 64 hexadecimal digits. */
  hash: string;
}

const HEAD = `sequence, encode(hash, 'hex') as hash`;
const headOf = (rows: { sequence: string; hash: string }[]): Head => ({
  sequence: Number(rows[0]?.sequence ?? 0),
  hash: rows[0]?.hash ?? '0'.repeat(64),
});

/** As `lockHead` of the journal, with the hash: nothing else is recorded for this firm until the transaction ends. */
export async function lockHeadToSeal(manager: EntityManager): Promise<Head> {
  return headOf(await manager.query(`select ${HEAD} from lock_head()`));
}

export async function readHead(manager: EntityManager): Promise<Head> {
  return headOf(await manager.query(`select ${HEAD} from firm_head`));
}

async function newest<T>(manager: EntityManager, type: string): Promise<{ record: number; content: T } | null> {
  const [row] = await manager.query<{ sequence: string; content: string }[]>(
    `select sequence, content from journal_record where type = $1 and type in ('seal', 'sealKey')
       order by sequence desc limit 1`,
    [type],
  );
  return row ? { record: Number(row.sequence), content: JSON.parse(row.content) as T } : null;
}
export const findLastSeal = (manager: EntityManager) => newest<SealRecord>(manager, 'seal');
export const findCurrentKey = (manager: EntityManager) => newest<SealKeyRecord>(manager, 'sealKey');

interface AuthoredJson {
  sequence: string;
  content: string;
  recordedBy: string;
  name: string | null;
}
const AUTHORED = `j.sequence, j.content, j.recorded_by as "recordedBy", p.name`;
const AUTHORED_FROM = 'journal_record j left join person p on p.id = j.recorded_by';

export const authorOf = ({ recordedBy, name }: { recordedBy: string; name: string | null }): SealRow['by'] =>
  recordedBy === THE_PROGRAM ? null : { id: recordedBy, name: name ?? '' };

export function sealRowOf(row: AuthoredJson): SealRow {
  const { seal } = JSON.parse(row.content) as SealRecord;
  const { at, hash, keyId, sequence } = seal;
  return { record: Number(row.sequence), sequence: Number(sequence), hash, at, keyId, by: authorOf(row) };
}

export function listSeals(manager: EntityManager, page: PageRequest) {
  const conditions = new Conditions().and(`j.type = 'seal'`);
  const sort = { columns: [{ sql: 'j.sequence', type: 'bigint' as const }], direction: 'desc' as const };
  return readPage<AuthoredJson, SealRow>(
    manager,
    { select: AUTHORED, from: AUTHORED_FROM, conditions, sort, page, of: 'seals' },
    sealRowOf,
  );
}

export async function findSealRow(manager: EntityManager, record: number): Promise<SealRow | null> {
  const [row] = await manager.query<AuthoredJson[]>(
    `select ${AUTHORED} from ${AUTHORED_FROM} where j.sequence = $1 and j.type = 'seal'`,
    [record],
  );
  return row ? sealRowOf(row) : null;
}

/** Newest first: a firm has few. */
export async function listKeys(
  manager: EntityManager,
  present: (record: number, content: SealKeyRecord, by: SealKeyRow['by']) => SealKeyRow,
): Promise<SealKeyRow[]> {
  const rows = await manager.query<AuthoredJson[]>(
    `select ${AUTHORED} from ${AUTHORED_FROM} where j.type = 'sealKey'
       order by j.sequence desc`,
  );
  return rows.map((row) => present(Number(row.sequence), JSON.parse(row.content) as SealKeyRecord, authorOf(row)));
}

export async function readSealFacts(manager: EntityManager) {
  const [firm] = await manager.query<{ id: string; name: string; timeZone: string }[]>(
    'select id, name, time_zone as "timeZone" from firm',
  );
  const head = await readHead(manager);
  const last = await findLastSeal(manager);
  return {
    firmId: String(firm?.id),
    name: String(firm?.name),
    timeZone: String(firm?.timeZone),
    headSequence: head.sequence,
    lastSeal: last ? { at: new Date(last.content.seal.at), record: last.record } : null,
  };
}
