import type { EntityManager } from 'typeorm';
import type { ProofPackageQuery } from '../../shared/proof/proof.schema.ts';
import { problemOfRefusals } from '../http/problem.ts';

/** What a package is about, as the ids and times that decide which records it holds whole. */
export interface ProofSubject {
  about: {
    kind: 'unit' | 'customer' | 'period';
    id: string | null;
    from: string | null;
    to: string | null;
    label: string;
  };
  unitIds: string[];
  siteIds: string[];
  /** Ends of entries that count by themselves. */
  placeIds: string[];
  /** Rows of registers. */
  subjectIds: string[];
  /** From the first instant of a period to the first after it; null: no period. */
  from: Date | null;
  until: Date | null;
}

const NOTHING = { unitIds: [], siteIds: [], placeIds: [], subjectIds: [], from: null, until: null };

/** @throws Problem 422 `notKnownHere` */
export function requireSubject(manager: EntityManager, query: ProofPackageQuery): Promise<ProofSubject> {
  const { unitId, customerId, from, to } = query;
  if (unitId !== undefined) return requireUnit(manager, unitId, query.words);
  if (customerId !== undefined) return requireCustomer(manager, customerId);
  return readPeriod(manager, String(from), String(to));
}

/** What a machine in somebody's home is called may name a person: only with the other words. */
async function requireUnit(manager: EntityManager, id: string, words: boolean): Promise<ProofSubject> {
  const [unit] = await manager.query<{ label: string }[]>(
    `select concat_ws(', ', u.tag, case when $2 then u.name end, s.name, c.name) as label from unit u
       join site s on s.firm_id = u.firm_id and s.id = u.site_id
       join customer c on c.firm_id = s.firm_id and c.id = s.customer_id where u.id = $1`,
    [id, words],
  );
  if (!unit) throw problemOfRefusals([{ code: 'notKnownHere', path: '/unitId', given: id }]);
  const about = { kind: 'unit' as const, id, from: null, to: null, label: unit.label };
  return { ...NOTHING, about, unitIds: [id], placeIds: [id], subjectIds: [id] };
}

/** Everything at the customer's sites, the units that stand there now, and cylinders that are the customer's own. */
async function requireCustomer(manager: EntityManager, id: string): Promise<ProofSubject> {
  const [customer] = await manager.query<
    { name: string; siteIds: string[]; unitIds: string[]; cylinderIds: string[] }[]
  >(
    `select c.name,
         array(select s.id from site s where s.firm_id = c.firm_id and s.customer_id = c.id) as "siteIds",
         array(select u.id from unit u join site s on s.firm_id = u.firm_id and s.id = u.site_id
           where s.firm_id = c.firm_id and s.customer_id = c.id) as "unitIds",
         array(select y.id from cylinder y where y.firm_id = c.firm_id and y.owner_customer_id = c.id) as "cylinderIds"
       from customer c where c.id = $1`,
    [id],
  );
  if (!customer) throw problemOfRefusals([{ code: 'notKnownHere', path: '/customerId', given: id }]);
  const { name, siteIds, unitIds, cylinderIds } = customer;
  return {
    ...NOTHING,
    about: { kind: 'customer', id, from: null, to: null, label: name },
    unitIds,
    siteIds,
    placeIds: [id, ...cylinderIds],
    subjectIds: [id, ...siteIds, ...unitIds, ...cylinderIds],
  };
}

/** By when it happened; changes of registers by when they were recorded. */
async function readPeriod(manager: EntityManager, from: string, to: string): Promise<ProofSubject> {
  const [firm] = await manager.query<{ from: Date; until: Date }[]>(
    `select $1::date::timestamp at time zone time_zone as "from",
       ($2::date + 1)::timestamp at time zone time_zone as until from firm`,
    [from, to],
  );
  const about = { kind: 'period' as const, id: null, from, to, label: `${from} – ${to}` };
  return { ...NOTHING, about, from: firm?.from ?? null, until: firm?.until ?? null };
}
