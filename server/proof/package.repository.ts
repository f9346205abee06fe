import type { EntityManager } from 'typeorm';
import type { AtmosphereKind, PlaceKind } from '../../shared/ledger/place.ts';
import { siteThen } from '../units/dated-site.ts';
import type { ProofSubject } from './subject.repository.ts';

export interface PackedRow {
  sequence: string;
  recordId: string;
  content: string;
  hash: string;
  /** Held whole in the package; of any other only its hashes leave. */
  isWhole: boolean;
}

/**
 * `e` is an entry; $1 to $6 as `valuesOf` gives them. Of a customer's units what happened at the customer's sites alone:
 * before or after, they stood elsewhere.
 */
const OWN_ENTRY = `((cardinality($2::uuid[]) = 0 and e.unit_id = any ($1::uuid[])) or ${siteThen('e')} = any ($2::uuid[])
  or e.from_id = any ($3::uuid[]) or e.to_id = any ($3::uuid[])
  or (e.occurred_at >= $5::timestamptz and e.occurred_at < $6::timestamptz))`;
/** A group is told whole with the first of its entries, readings and statements that counts. */
const OWN_GROUP = `((cardinality($2::uuid[]) = 0 and g.unit_id = any ($1::uuid[])) or ${siteThen('g')} = any ($2::uuid[])
  or (g.occurred_at >= $5::timestamptz and g.occurred_at < $6::timestamptz)
  or exists (select from entry e where e.firm_id = g.firm_id and e.group_id = g.id and ${OWN_ENTRY})
  or exists (select from reading r where r.firm_id = g.firm_id and r.group_id = g.id and r.cylinder_id = any ($3::uuid[]))
  or exists (select from statement t where t.firm_id = g.firm_id and t.group_id = g.id
    and cardinality($2::uuid[]) = 0 and t.unit_id = any ($1::uuid[])))`;
const OWN_REGISTER = `(j.subject_id = any ($4::uuid[])
  or (j.recorded_at >= $5::timestamptz and j.recorded_at < $6::timestamptz)
  or (j.noun <> 'unit' and (cardinality($1::uuid[]) > 0 or cardinality($3::uuid[]) > 0) and (
    j.content::jsonb #>> '{after,unitId}' = any ($1::text[]) or j.content::jsonb #>> '{after,cylinderId}' = any ($3::text[]))))`;

const valuesOf = ({ unitIds, siteIds, placeIds, subjectIds, from, until }: ProofSubject): unknown[] => [
  unitIds,
  siteIds,
  placeIds,
  subjectIds,
  from,
  until,
];

/** The next records, each with whether it is one that the package is about. Seals and keys are always told whole. */
export function readPacked(
  manager: EntityManager,
  subject: ProofSubject,
  range: { after: number; upTo: number; limit: number; exportSequence: number },
): Promise<PackedRow[]> {
  return manager.query(
    `select j.sequence, j.record_id as "recordId", j.content, encode(j.hash, 'hex') as hash,
         case j.type
           when 'entry' then exists (select from entry e
             where e.firm_id = j.firm_id and e.id = j.record_id and ${OWN_ENTRY})
           when 'group' then exists (select from entry_group g
             where g.firm_id = j.firm_id and g.id = j.record_id and ${OWN_GROUP})
           when 'register' then coalesce(${OWN_REGISTER}, false)
           when 'export' then j.sequence = $10 or coalesce(j.recorded_at >= $5::timestamptz and j.recorded_at < $6::timestamptz, false)
           else j.type in ('seal', 'sealKey') end as "isWhole"
       from journal_record j where j.sequence > $7 and j.sequence <= $8 order by j.sequence limit $9`,
    [...valuesOf(subject), range.after, range.upTo, range.limit, range.exportSequence],
  );
}

export interface PackedWords {
  recordId: string;
  field: string;
  salt: string;
  /** Null: erased. */
  content: string | null;
}
/** Words beside these records, by record. */
export async function readWords(
  manager: EntityManager,
  recordIds: readonly string[],
): Promise<Map<string, PackedWords[]>> {
  const byRecord = new Map<string, PackedWords[]>();
  if (recordIds.length === 0) return byRecord;
  const rows = await manager.query<PackedWords[]>(
    `select record_id as "recordId", field, encode(salt, 'hex') as salt, content from personal_text
       where record_id = any ($1::uuid[]) order by record_id, field`,
    [recordIds],
  );
  for (const row of rows) {
    const held = byRecord.get(row.recordId);
    if (held) held.push(row);
    else byRecord.set(row.recordId, [row]);
  }
  return byRecord;
}

export interface ShownEntry {
  sequence: string;
  occurredAt: Date;
  timeZone: string;
  refrigerant: string;
  mass: string;
  fromPlace: PlaceKind;
  fromId: string | null;
  fromAs: AtmosphereKind | null;
  toPlace: PlaceKind;
  toId: string | null;
  toAs: AtmosphereKind | null;
  isReversed: boolean;
}

/** The entries that the package is about, in the order of the log, for reading. */
export function readShownEntries(
  manager: EntityManager,
  subject: ProofSubject,
  upTo: number,
  limit: number,
): Promise<ShownEntry[]> {
  // $4 decides about registers alone.
  return manager.query(
    `select e.sequence, e.occurred_at as "occurredAt", coalesce(s.time_zone, f.time_zone) as "timeZone", e.refrigerant,
         e.mass_micrograms::text as mass, e.from_place as "fromPlace", e.from_id as "fromId", e.from_as as "fromAs",
         e.to_place as "toPlace", e.to_id as "toId", e.to_as as "toAs",
         e.reverses_entry_id is not null or exists (select from entry r
           where r.firm_id = e.firm_id and r.reverses_entry_id = e.id) as "isReversed"
       from entry e join firm f on f.id = e.firm_id
       left join site s on s.firm_id = e.firm_id and s.id = ${siteThen('e')}
       where ${OWN_ENTRY} and cardinality($4::uuid[]) >= 0 and e.sequence <= $7 order by e.sequence limit $8`,
    [...valuesOf(subject), upTo, limit],
  );
}

/** Seal and key records up to there, oldest first. */
export function readSealTexts(
  manager: EntityManager,
  upTo: number,
): Promise<{ type: 'seal' | 'sealKey'; content: string }[]> {
  return manager.query(
    `select type, content from journal_record where type in ('seal', 'sealKey') and sequence <= $1 order by sequence`,
    [upTo],
  );
}

export async function readFirm(manager: EntityManager) {
  const [firm] = await manager.query<{ id: string; name: string; timeZone: string; jurisdiction: string }[]>(
    'select id, name, time_zone as "timeZone", jurisdiction from firm',
  );
  return firm as { id: string; name: string; timeZone: string; jurisdiction: string };
}

export async function readPersonName(manager: EntityManager, personId: string): Promise<string> {
  const [person] = await manager.query<{ name: string }[]>('select name from person where id = $1', [personId]);
  return person?.name ?? '';
}
