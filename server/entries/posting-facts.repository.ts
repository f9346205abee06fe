import type { EntityManager } from 'typeorm';
import type { FillJurisdiction } from '../../shared/cylinder-fill/filling-table.ts';
import { retestOverdueFrom } from '../../shared/cylinders/retest.ts';
import { emptyCylinderState } from '../../shared/ledger/cylinder-state.ts';
import type { LedgerFlag } from '../../shared/ledger/flag.ts';
import type { MassByRefrigerant } from '../../shared/ledger/mass-by-refrigerant.ts';
import type { Place } from '../../shared/ledger/place.ts';
import type { Scale } from '../../shared/ledger/scale.ts';
import { cylinderFromSnapshot, type Snapshot, unitFromSnapshot } from '../../shared/ledger/snapshot.ts';
import { emptyUnitState } from '../../shared/ledger/unit-state.ts';
import { startOfDay } from '../../shared/periods/month.ts';
import { plannedQuery } from '../journal/planned-query.ts';
import type { CylinderFacts, PostingFacts, StoredFlag, UnitFacts } from './posting-facts.ts';

/** The ids that a posting names. What does not exist is missing in the answer. */
export interface NamedIds {
  /** Of the groups that are to be posted. */
  groupIds: readonly string[];
  cylinderIds: readonly string[];
  unitIds: readonly string[];
  toolIds: readonly string[];
  partyIds: readonly string[];
  jobIds: readonly string[];
  chargeSheetIds: readonly string[];
  personIds: readonly string[];
}

interface FactRows {
  firm: { timeZone: string; jurisdiction: FillJurisdiction; sequence: string; firstOpenMonth: string | null };
  earlier: string[];
  cylinders: {
    id: string;
    tag: string;
    kind: string;
    refrigerant: string;
    stampedLimit: string | null;
    waterCapacity: string | null;
    servicePressure: number | null;
    retestDue: string | null;
    tares: { from: string; mass: string }[];
    book: Record<string, string> | null;
    state: Snapshot | null;
  }[];
  units: {
    id: string;
    tag: string;
    refrigerants: { refrigerant: string; from: string }[];
    fullCharges: { refrigerant: string; mass: string; from: string; jobId: string | null }[];
    sites: { siteId: string; timeZone: string; from: string }[];
    book: Record<string, string> | null;
    state: Snapshot | null;
  }[];
  tools: (Scale & { id: string })[];
  parties: { kind: string; id: string; name: string }[];
  jobs: { id: string; unitId: string }[];
  chargeSheets: { id: string; unitId: string }[];
  people: string[];
  flags: FlagRow[];
}

export interface FlagRow {
  id: string;
  code: LedgerFlag['code'];
  subjectKind: 'unit' | 'cylinder' | 'reclaimer' | 'group';
  subjectId: string;
  groupId: string;
  refrigerant: string | null;
  mass: string | null;
  figures: Record<string, string>;
  standing: boolean;
  openedAt: string;
  openedBy: string;
  openedSequence: number;
}

const BOOK = (kind: string, id: string) =>
  `(select json_object_agg(b.refrigerant, b.mass_micrograms::text) from balance b
     where b.place = '${kind}' and b.place_id = ${id} and b.mass_micrograms <> 0)`;
const STATE = (kind: string, id: string) =>
  `(select s.state from place_state s where s.place = '${kind}' and s.place_id = ${id})`;

export const FLAG_FIELDS = `json_build_object('id', f.id, 'code', f.code, 'subjectKind', f.subject_kind,
  'subjectId', f.subject_id, 'groupId', f.group_id, 'refrigerant', f.refrigerant, 'mass', f.mass_micrograms::text,
  'figures', f.figures, 'standing', f.standing, 'openedAt', f.opened_at, 'openedBy', f.opened_by_group_id,
  'openedSequence', (select o.sequence from entry_group o
    where o.firm_id = f.firm_id and o.id = f.opened_by_group_id))`;

/** One statement, because a posting waits for it with the head locked. Masses come as text: JSON numbers are doubles. */
const FACTS = `select json_build_object(
  'firm', (select json_build_object('timeZone', f.time_zone, 'jurisdiction', f.jurisdiction, 'sequence', h.sequence::text,
      'firstOpenMonth', h.first_open_month)
    from firm f join firm_head h on h.firm_id = f.id where f.id = current_firm_id()),
  'earlier', (select coalesce(json_agg(g.id), '[]') from entry_group g where g.id = any ($8::uuid[])),
  'cylinders', (select coalesce(json_agg(json_build_object('id', c.id, 'tag', c.tag, 'kind', c.kind,
      'refrigerant', c.refrigerant, 'stampedLimit', c.stamped_limit_micrograms::text,
      'waterCapacity', c.water_capacity_micrograms::text, 'servicePressure', c.service_pressure_kpa_gauge,
      'retestDue', c.retest_due,
      'tares', (select json_agg(json_build_object('from', t.valid_from, 'mass', t.mass_micrograms::text))
        from cylinder_tare t where t.cylinder_id = c.id),
      'book', ${BOOK('cylinder', 'c.id')}, 'state', ${STATE('cylinder', 'c.id')})), '[]')
    from cylinder c where c.id = any ($1::uuid[])),
  'units', (select coalesce(json_agg(json_build_object('id', u.id, 'tag', u.tag,
      'refrigerants', (select json_agg(json_build_object('refrigerant', r.refrigerant, 'from', r.valid_from))
        from unit_refrigerant r where r.unit_id = u.id),
      'fullCharges', (select coalesce(json_agg(json_build_object('refrigerant', r.refrigerant,
          'mass', r.mass_micrograms::text, 'from', r.valid_from, 'jobId', r.job_id)), '[]')
        from unit_full_charge r where r.unit_id = u.id),
      'sites', (select json_agg(json_build_object('siteId', p.site_id, 'timeZone', s.time_zone, 'from', p.valid_from)
          order by p.valid_from, p.id)
        from unit_site p join site s on s.id = p.site_id where p.unit_id = u.id),
      'book', ${BOOK('unit', 'u.id')}, 'state', ${STATE('unit', 'u.id')})), '[]')
    from unit u where u.id = any ($2::uuid[])),
  'tools', (select coalesce(json_agg(json_build_object('id', t.id, 'resolutionG', t.resolution_g,
      'repeatabilityG', t.repeatability_g, 'spanErrorRelative', t.span_error_relative, 'offsetG', t.offset_g)), '[]')
    from tool t where t.id = any ($3::uuid[]) and t.kind = 'scale'),
  'parties', (select coalesce(json_agg(json_build_object('kind', p.kind, 'id', p.id, 'name', p.name)), '[]') from (
      select kind, id, name from party where id = any ($4::uuid[])
      union all select 'customer', id, name from customer where id = any ($4::uuid[])) p),
  'jobs', (select coalesce(json_agg(json_build_object('id', j.id, 'unitId', j.unit_id)), '[]')
    from job j where j.id = any ($5::uuid[])),
  'chargeSheets', (select coalesce(json_agg(json_build_object('id', s.id, 'unitId', s.unit_id)), '[]')
    from charge_sheet s where s.id = any ($6::uuid[])),
  'people', (select coalesce(json_agg(m.person_id), '[]') from membership m where m.person_id = any ($7::uuid[])),
  'flags', (select coalesce(json_agg(${FLAG_FIELDS}), '[]') from flag f
    where f.subject_id = any ($1::uuid[] || $2::uuid[]) and f.closed_at is null and f.standing)
) as facts`;

export async function loadPostingFacts(manager: EntityManager, named: NamedIds): Promise<PostingFacts> {
  const [row] = await plannedQuery<{ facts: FactRows }>(manager, 'posting_facts', FACTS, [
    named.cylinderIds,
    named.unitIds,
    named.toolIds,
    named.partyIds,
    named.jobIds,
    named.chargeSheetIds,
    named.personIds,
    named.groupIds,
  ]);
  if (!row) throw new Error('the facts of a posting are one row');
  const { firm, earlier, cylinders, units, tools, parties, jobs, chargeSheets, people, flags } = row.facts;
  return {
    firm: { ...firm, sequence: Number(firm.sequence) },
    earlierGroupIds: new Set(earlier),
    cylinders: new Map(cylinders.map((cylinder) => [cylinder.id, cylinderFacts(cylinder, firm)])),
    units: new Map(units.map((unit) => [unit.id, unitFacts(unit)])),
    scales: new Map(tools.map(({ id, ...scale }) => [id, scale])),
    standingFlags: flags.map(storedFlag),
    parties: new Map(parties.map((party) => [`${party.kind}:${party.id}`, party])),
    jobs: new Map(jobs.map((job) => [job.id, job])),
    chargeSheets: new Map(chargeSheets.map((sheet) => [sheet.id, sheet])),
    people: new Set(people),
  };
}

function cylinderFacts(row: FactRows['cylinders'][number], firm: FactRows['firm']): CylinderFacts {
  const bigintOf = (text: string | null) => (text === null ? null : BigInt(text));
  return {
    register: {
      cylinderId: row.id,
      refrigerant: row.refrigerant,
      nonRefillable: row.kind === 'nonRefillable',
      collar: {
        stampedLimitMicrograms: bigintOf(row.stampedLimit),
        waterCapacityMicrograms: bigintOf(row.waterCapacity),
        servicePressureKPaGauge: row.servicePressure,
        jurisdiction: firm.jurisdiction,
        retestOverdueFrom: row.retestDue === null ? null : startOfOverdue(row.retestDue, firm.timeZone),
      },
      tares: row.tares.map(({ from, mass }) => ({ validFrom: Date.parse(from), tareMicrograms: BigInt(mass) })),
    },
    tag: row.tag,
    book: bookOf(row.book),
    state: row.state === null ? emptyCylinderState : cylinderFromSnapshot(row.state),
  };
}

/** Each is searched once: a posting waits for its facts with the head locked. */
const overdueFrom = new Map<string, number>();
function startOfOverdue(retestDue: string, timeZone: string): number {
  const day = retestOverdueFrom(retestDue);
  const at = overdueFrom.get(`${day} ${timeZone}`) ?? startOfDay(day, timeZone);
  overdueFrom.set(`${day} ${timeZone}`, at);
  return at;
}

function unitFacts(row: FactRows['units'][number]): UnitFacts {
  return {
    register: {
      unitId: row.id,
      refrigerants: row.refrigerants.map(({ refrigerant, from }) => ({ refrigerant, validFrom: Date.parse(from) })),
      fullCharges: row.fullCharges.map(({ refrigerant, mass, from, jobId }) => ({
        refrigerant,
        massMicrograms: BigInt(mass),
        validFrom: Date.parse(from),
        jobId,
      })),
    },
    tag: row.tag,
    book: bookOf(row.book),
    state: row.state === null ? emptyUnitState : unitFromSnapshot(row.state),
    sites: row.sites.map(({ siteId, timeZone, from }) => ({ siteId, timeZone, validFrom: Date.parse(from) })),
  };
}

const bookOf = (rows: Record<string, string> | null): MassByRefrigerant =>
  Object.fromEntries(Object.entries(rows ?? {}).map(([refrigerant, mass]) => [refrigerant, BigInt(mass)]));

export function storedFlag(row: FlagRow): StoredFlag {
  const place = row.subjectKind === 'group' ? null : ({ place: row.subjectKind, id: row.subjectId } satisfies Place);
  if (!place) throw new Error(`flag ${row.id} is about a group, which the judge does not know`);
  return {
    id: row.id,
    code: row.code,
    place,
    groupId: row.groupId,
    refrigerant: row.refrigerant,
    massMicrograms: row.mass === null ? null : BigInt(row.mass),
    standing: row.standing,
    figures: Object.fromEntries(Object.entries(row.figures).map(([name, mass]) => [name, BigInt(mass)])),
    openedAt: row.openedAt,
    openedBy: row.openedBy,
    openedSequence: row.openedSequence,
  };
}
