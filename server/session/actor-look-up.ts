import type pg from 'pg';
import type { Role } from '../../shared/permissions/roles.ts';
import type { Locale } from '../../shared/session/session.schema.ts';

/** What a request's rights rest on, as it stands at this moment. */
export interface Standing {
  roles: Role[];
  siteIds: string[] | null;
  locale: Locale;
  passwordChangedAt: Date | null;
}

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

/**
 * Reads a person's standing in a firm; null when there is none or it is not active. Done for every request, hence in one
 * round trip: several statements of a simple query are one transaction, which the settings of the scope last for.
 */
export async function findStanding(pool: pg.Pool, personId: string, firmId: string): Promise<Standing | null> {
  if (!UUID.test(personId) || !UUID.test(firmId)) return null; // they are written into the statement below
  const results = (await pool.query(
    `SELECT set_config('app.firm_id', '${firmId}', true), set_config('app.person_id', '${personId}', true),
            set_config('app.site_ids', '', true);
     SELECT m.roles, m.site_ids AS "siteIds", coalesce(p.preferences ->> 'locale', f.locale) AS locale,
            s.changed_at AS "passwordChangedAt"
       FROM membership m
       JOIN firm f ON f.id = m.firm_id
       JOIN person p ON p.id = m.person_id
       LEFT JOIN person_secret s ON s.person_id = p.id
      WHERE m.firm_id = '${firmId}' AND m.person_id = '${personId}' AND m.active`,
  )) as unknown as pg.QueryResult<Standing>[];
  const standing = results[1]?.rows[0];
  if (!standing) return null;
  // Sites limit those who only read; whoever works for the firm sees all of it.
  return standing.roles.every((role) => role === 'reader') ? standing : { ...standing, siteIds: null };
}
