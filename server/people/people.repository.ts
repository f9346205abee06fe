import type { EntityManager } from 'typeorm';
import type { Person } from '../../shared/people/people.schema.ts';
import type { Role } from '../../shared/permissions/roles.ts';
import { decodeCursor, presentPage } from '../http/keyset.ts';

type PersonRow = Omit<Person, 'lastSignInAt'> & { lastSignInAt: Date | null };

const SELECT_PEOPLE = `
  SELECT m.person_id AS id, p.name, p.email, m.roles, m.site_ids AS "siteIds", m.active, m.van, m.version,
         s.signed_in_at AS "lastSignInAt"
    FROM membership m
    JOIN person p ON p.id = m.person_id
    LEFT JOIN last_sign_in s ON s.firm_id = m.firm_id AND s.person_id = m.person_id`;

const present = (row: PersonRow): Person => ({ ...row, lastSignInAt: row.lastSignInAt?.toISOString() ?? null });

export interface PeopleQuery {
  cursor?: string | undefined;
  limit: number;
  role?: Role | undefined;
  active?: 'true' | 'false' | undefined;
}

/** People of the firm in scope, by name. */
export async function listPeople(manager: EntityManager, query: PeopleQuery) {
  const of = `people ${query.role ?? ''} ${query.active ?? ''}`;
  const [name = null, id = null] = query.cursor === undefined ? [] : decodeCursor(of, query.cursor, 2);
  const rows: PersonRow[] = await manager.query(
    `${SELECT_PEOPLE}
      WHERE ($1::text IS NULL OR $1 = ANY (m.roles)) AND ($2::boolean IS NULL OR m.active = $2)
        AND ($3::text IS NULL OR (p.name, m.person_id::text) > ($3::text, $4::text))
      ORDER BY p.name, m.person_id::text LIMIT $5`,
    [query.role ?? null, query.active ?? null, name, id, query.limit + 1],
  );
  return presentPage(rows, query.limit, of, (row) => [row.name, row.id], present);
}

export async function findPerson(manager: EntityManager, personId: string): Promise<Person | null> {
  const rows: PersonRow[] = await manager.query(`${SELECT_PEOPLE} WHERE m.person_id = $1`, [personId]);
  return rows[0] ? present(rows[0]) : null;
}

/** Whether the firm in scope would still have an active owner without this person. */
export async function hasOtherOwner(manager: EntityManager, personId: string): Promise<boolean> {
  const rows: unknown[] = await manager.query(
    `SELECT FROM membership WHERE active AND 'owner' = ANY (roles) AND person_id <> $1 LIMIT 1`,
    [personId],
  );
  return rows.length > 0;
}

/** Those of the given sites that the firm in scope does not have. */
export async function findUnknownSites(manager: EntityManager, siteIds: readonly string[]): Promise<string[]> {
  if (siteIds.length === 0) return [];
  const rows: { id: string }[] = await manager.query(
    'SELECT wanted.id FROM unnest($1::uuid[]) AS wanted (id) WHERE NOT EXISTS (SELECT FROM site WHERE site.id = wanted.id)',
    [siteIds],
  );
  return rows.map(({ id }) => id);
}
