import type { EntityManager } from 'typeorm';
import { plainWords } from '../../shared/imports/import-fields.ts';

interface Named {
  id: string;
  name: string;
}

/** What rows of a table speak of by name, as it stands in the registers. */
export interface Names {
  timeZone: string;
  sites: (Named & { customer: string; timeZone: string })[];
  units: { id: string; tag: string; siteId: string; site: string; refrigerant: string }[];
  cylinders: { id: string; tag: string; refrigerant: string }[];
  parties: (Named & { kind: string })[];
  customers: Named[];
  people: (Named & { email: string; van: string | null })[];
}

export async function readNames(manager: EntityManager): Promise<Names> {
  const rows = <Row>(sql: string): Promise<Row[]> => manager.query(sql);
  const [firm] = await rows<{ timeZone: string }>('select time_zone as "timeZone" from firm');
  return {
    timeZone: firm?.timeZone ?? 'UTC',
    sites: await rows(`select s.id, s.name, c.name as customer, s.time_zone as "timeZone"
      from site s join customer c on c.firm_id = s.firm_id and c.id = s.customer_id`),
    units: await rows(`select u.id, u.tag, u.site_id as "siteId", s.name as site, u.refrigerant
      from unit u join site s on s.firm_id = u.firm_id and s.id = u.site_id`),
    cylinders: await rows('select id, tag, refrigerant from cylinder'),
    parties: await rows('select id, name, kind from party'),
    customers: await rows('select id, name from customer'),
    people: await rows(`select p.id, p.name, p.email, m.van from membership m join person p on p.id = m.person_id
      where m.active`),
  };
}

/** What may be called by a text, whatever its capitals and accents. */
export interface Index<T> {
  find(text: string): { is: 'one'; value: T } | { is: 'none' | 'several' };
}

export function indexOf<T>(rows: readonly T[], ...namesOf: ((row: T) => string | null)[]): Index<T> {
  const byName = new Map<string, Set<T>>();
  for (const row of rows) {
    for (const nameOf of namesOf) {
      const name = plainWords(nameOf(row) ?? '');
      if (name === '') continue;
      const held = byName.get(name);
      if (held) held.add(row);
      else byName.set(name, new Set([row]));
    }
  }
  return {
    find(text) {
      const [value, ...others] = byName.get(plainWords(text)) ?? [];
      if (value === undefined) return { is: 'none' };
      return others.length > 0 ? { is: 'several' } : { is: 'one', value };
    },
  };
}
