import type { EntityManager } from 'typeorm';
import type { Preferences, Session } from '../../shared/session/session.schema.ts';
import { asPerson, inFirm } from '../database/firm-scope.ts';
import type { Parts } from '../http/parts.ts';
import { poolOf } from './pool.ts';

export interface PersonRow {
  id: string;
  name: string;
  email: string;
  preferences: Partial<Preferences>;
  version: number;
}

export async function findPersonId(parts: Parts, email: string): Promise<string | null> {
  const { rows } = await poolOf(parts.dataSource).query<{ id: string | null }>('SELECT sign_in_candidate($1) AS id', [
    email,
  ]);
  return rows[0]?.id ?? null;
}

export function findPasswordHash(parts: Parts, personId: string): Promise<string | null> {
  return asPerson(parts.dataSource, personId, async (manager) => {
    const rows: { hash: string }[] = await manager.query(
      'SELECT password_hash AS hash FROM person_secret WHERE person_id = $1',
      [personId],
    );
    return rows[0]?.hash ?? null;
  });
}

/** The firms in which the person is active. */
export async function firmIdsOf(parts: Parts, personId: string): Promise<string[]> {
  const { rows } = await poolOf(parts.dataSource).query<{ id: string }>('SELECT firm_ids_of_person($1) AS id', [
    personId,
  ]);
  return rows.map(({ id }) => id);
}

export function findLastSignIn(parts: Parts, personId: string, firmId: string): Promise<Date | null> {
  return inFirm(parts.dataSource, { firmId, personId, siteIds: null }, async (manager) => {
    const rows: { at: Date }[] = await manager.query(
      'SELECT signed_in_at AS at FROM last_sign_in WHERE firm_id = $1 AND person_id = $2',
      [firmId, personId],
    );
    return rows[0]?.at ?? null;
  });
}

export async function noteSignIn(parts: Parts, personId: string, firmId: string): Promise<void> {
  await inFirm(parts.dataSource, { firmId, personId, siteIds: null }, async (manager) => {
    await manager.query(
      `INSERT INTO last_sign_in (firm_id, person_id, signed_in_at) VALUES ($1, $2, $3)
         ON CONFLICT (firm_id, person_id) DO UPDATE SET signed_in_at = $3`,
      [firmId, personId, parts.now()],
    );
  });
}

export async function requirePerson(manager: EntityManager, personId: string): Promise<PersonRow> {
  const rows: PersonRow[] = await manager.query(
    'SELECT id, name, email, preferences, version FROM person WHERE id = $1',
    [personId],
  );
  return only(rows);
}

/** Names and preferences that are not given stay. */
export async function updatePerson(
  manager: EntityManager,
  personId: string,
  change: { name?: string | undefined; preferences?: Partial<Preferences> | undefined },
): Promise<void> {
  await manager.query(
    `UPDATE person SET name = coalesce($2, name), preferences = preferences || $3::jsonb, version = version + 1
      WHERE id = $1`,
    [personId, change.name ?? null, JSON.stringify(change.preferences ?? {})],
  );
}

export async function requireFirm(manager: EntityManager, firmId: string): Promise<Session['firm']> {
  const rows: Session['firm'][] = await manager.query(
    'SELECT id, name, jurisdiction, time_zone AS "timeZone", locale, gwp_set AS "gwpSet" FROM firm WHERE id = $1',
    [firmId],
  );
  return only(rows);
}

export async function requireMembership(manager: EntityManager, firmId: string, personId: string) {
  const rows: Pick<Session, 'roles' | 'siteIds'>[] = await manager.query(
    'SELECT roles, site_ids AS "siteIds" FROM membership WHERE firm_id = $1 AND person_id = $2',
    [firmId, personId],
  );
  return only(rows);
}

function only<T>(rows: readonly T[]): T {
  const [row] = rows;
  if (row === undefined) throw new Error('a row that a signed-in person must have is missing');
  return row;
}
