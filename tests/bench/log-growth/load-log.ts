import type pg from 'pg';
import { groupWithEntries, place, textOf } from '../../database/record-texts.ts';
import { POST } from '../../database/test-firm.ts';

/** A firm as it was founded, whose log is to be filled. */
export interface LoadedFirm {
  firmId: string;
  personId: string;
  entryCount: number;
}

/** Each unit has a hundred entries in three years, each cylinder feeds two units: a firm ten times as large has ten times as many of both. */
export const ENTRIES_A_UNIT = 100;
const UNITS_A_CYLINDER = 2;
export const FIRST_DAY_MS = Date.UTC(2023, 11, 1);
const THREE_YEARS_MS = 1_095 * 24 * 60 * 60_000;
/** A group with its one entry each: 1,500 records, as many as a call takes best. */
const GROUPS_A_CALL = 750;
const OPENING_G = 9_500;
const MASS_G = 90;
const TARE_G = 7_700;

const DIGITS = {
  group: 1,
  entry: 2,
  before: 3,
  after: 4,
  unit: 5,
  cylinder: 6,
  customer: 7,
  site: 8,
  scale: 9,
} as const;

/** Ids by number, so that registers and log agree without being read back; version 7 in form. */
export const idOf = (kind: keyof typeof DIGITS, n: number, firm: string) => {
  const count = n.toString(16).padStart(12, '0');
  return `${count.slice(0, 8)}-${count.slice(8)}-7${DIGITS[kind]}${firm.slice(0, 2)}-8${firm.slice(2, 5)}-${firm.slice(24)}`;
};

export const unitsOf = ({ entryCount }: LoadedFirm) => Math.ceil(entryCount / ENTRIES_A_UNIT);
export const cylindersOf = (firm: LoadedFirm) => Math.ceil(unitsOf(firm) / UNITS_A_CYLINDER);

/**
 * Registers as a replica writes them, without records of their own: only the log is measured.
 * @param client a superuser's
 */
export async function loadRegisters(client: pg.Client, firm: LoadedFirm): Promise<void> {
  const { firmId } = firm;
  const [customer, site, scale] = (['customer', 'site', 'scale'] as const).map((kind) => `'${idOf(kind, 0, firmId)}'`);
  const ids = (kind: 'unit' | 'cylinder', count: number) =>
    Array.from({ length: count }, (_, index) => idOf(kind, index, firmId));
  const run = (sql: string, ...values: unknown[]) => client.query(sql, [firmId, ...values]);
  await client.query('set session_replication_role = replica');
  await run(`insert into customer (firm_id, id, name, version) values ($1::uuid, ${customer}, 'Wexcombe Mill', 1)`);
  await run(
    `insert into site (firm_id, id, customer_id, name, address_lines, time_zone, altitude_m, jurisdiction, version)
       values ($1::uuid, ${site}, ${customer}, 'Mill Lane', '{1 Mill Lane}', 'UTC', 12, 'US', 1)`,
  );
  await run(
    `insert into tool (firm_id, id, kind, name, resolution_g, repeatability_g, span_error_relative, offset_g)
       values ($1::uuid, ${scale}, 'scale', 'Scale 1', 5, 0, 0, 0)`,
  );
  await run(
    `insert into unit (firm_id, id, site_id, tag, name, appliance_kind, refrigerant, serials, nameplate_readable, version)
       select $1::uuid, u.id, ${site}::uuid, lpad(n::text, 5, '0'), 'back bedroom', 'comfortCooling', 'R-32', '[]', true, 1
       from unnest($2::uuid[]) with ordinality u(id, n)`,
    ids('unit', unitsOf(firm)),
  );
  await run(
    `insert into cylinder (firm_id, id, tag, kind, refrigerant, content_state, owner_kind, version)
       select $1::uuid, c.id, 'C' || lpad(n::text, 5, '0'), 'refillable', 'R-32', 'virgin', 'ours', 1
       from unnest($2::uuid[]) with ordinality c(id, n)`,
    ids('cylinder', cylindersOf(firm)),
  );
  await run(
    `insert into cylinder_tare (firm_id, id, cylinder_id, mass_micrograms, typed_value, typed_unit, valid_from)
       select $1::uuid, c.id, c.id, ${TARE_G}000000, '${TARE_G}', 'g', $3::timestamptz from unnest($2::uuid[]) c(id)`,
    ids('cylinder', cylindersOf(firm)),
    new Date(FIRST_DAY_MS),
  );
  await client.query('reset session_replication_role');
}

/** Stand-ins that the schema takes, and that are replaced in the text of each record. */
const MARK = {
  group: '00000000-0000-7000-8000-000000000001',
  entry: '00000000-0000-7000-8000-000000000002',
  before: '00000000-0000-7000-8000-000000000003',
  after: '00000000-0000-7000-8000-000000000004',
  unit: '00000000-0000-7000-8000-000000000005',
  cylinder: '00000000-0000-7000-8000-000000000006',
  at: '2001-01-01T01:01:01.001Z',
  day: '2001-01-01',
  month: '2001-01',
  grossBefore: '11111',
  grossAfter: '22222',
} as const;
type Values = Record<keyof typeof MARK, string>;

/** The schema and the canonical form once, then text by pieces: a record takes microseconds. */
function filled(text: string): (values: Values) => string {
  const keys = Object.keys(MARK) as (keyof Values)[];
  const pieces = text.split(new RegExp(`(${keys.map((key) => MARK[key]).join('|')})`));
  const parts = pieces.map((piece) => keys.find((key) => MARK[key] === piece) ?? { literal: piece });
  return (values) => {
    let result = '';
    for (const part of parts) result += typeof part === 'string' ? values[part] : part.literal;
    return result;
  };
}

function recordsOf(firm: LoadedFirm, kind: 'extraCharge' | 'overchargeRemoved' | 'opening') {
  const [cylinder, unit] = [place('cylinder', MARK.cylinder), place('unit', MARK.unit)];
  const ends = {
    extraCharge: { from: cylinder, to: unit },
    overchargeRemoved: { from: unit, to: cylinder },
    opening: { from: place('opening'), to: cylinder },
  }[kind];
  const reading = (moment: 'before' | 'after', value: string) => ({
    id: MARK[moment],
    cylinderId: MARK.cylinder,
    toolId: idOf('scale', 0, firm.firmId),
    at: null,
    moment,
    mode: 'gross' as const,
    value,
    unit: 'g' as const,
    massMicrograms: `${value}000000`,
    hoseFull: null,
    hose: null,
    hoseMicrograms: null,
    scale: { resolutionG: '5', repeatabilityG: '0', spanErrorRelative: '0', offsetG: '0' },
  });
  const massG = kind === 'opening' ? OPENING_G : MASS_G;
  const records = groupWithEntries(firm.personId, {
    id: MARK.group,
    kind,
    unitId: kind === 'opening' ? null : MARK.unit,
    occurredAt: MARK.at,
    recordedAt: MARK.at,
    readings: kind === 'opening' ? [] : [reading('before', MARK.grossBefore), reading('after', MARK.grossAfter)],
    entries: [
      {
        id: MARK.entry,
        ...ends,
        massMicrograms: `${massG}000000`,
        typed: { value: String(massG), unit: 'g' },
        howKnown: kind === 'opening' ? 'estimated' : 'weighed',
      },
    ],
  });
  return records.map((record) => filled(textOf(record)));
}

/**
 * Fills a firm's log through the posting function: cylinders opened, then round after round 90 g into every unit and out
 * of it again, each with both readings.
 * @param client the application's
 */
export async function loadLog(client: pg.Client, firm: LoadedFirm): Promise<void> {
  const units = unitsOf(firm);
  const cylinders = cylindersOf(firm);
  const templates = {
    opening: recordsOf(firm, 'opening'),
    in: recordsOf(firm, 'extraCharge'),
    out: recordsOf(firm, 'overchargeRemoved'),
  };
  const charges = firm.entryCount - cylinders;
  const textsOf = (n: number): string[] => {
    const isOpening = n < cylinders;
    const number = isOpening ? n * UNITS_A_CYLINDER : n - cylinders;
    const [unit, isIn] = [number % units, Math.floor(number / units) % 2 === 0];
    const at = new Date(FIRST_DAY_MS + (isOpening ? 0 : Math.floor(((number + 1) * THREE_YEARS_MS) / (charges + 2))));
    // All of a cylinder's units are filled in one round and emptied in the next, in the same order.
    const before = OPENING_G + TARE_G - MASS_G * (isIn ? unit % 2 : UNITS_A_CYLINDER - (unit % 2));
    const instant = at.toISOString();
    const values: Values = {
      group: idOf('group', n, firm.firmId),
      entry: idOf('entry', n, firm.firmId),
      before: idOf('before', n, firm.firmId),
      after: idOf('after', n, firm.firmId),
      unit: idOf('unit', unit, firm.firmId),
      cylinder: idOf('cylinder', Math.floor(unit / UNITS_A_CYLINDER), firm.firmId),
      at: instant,
      day: instant.slice(0, 10),
      month: instant.slice(0, 7),
      grossBefore: String(before),
      grossAfter: String(before + (isIn ? -MASS_G : MASS_G)),
    };
    const template = templates[isOpening ? 'opening' : isIn ? 'in' : 'out'];
    return template.map((fill) => fill(values));
  };
  for (let first = 0; first < firm.entryCount; first += GROUPS_A_CALL) {
    const count = Math.min(GROUPS_A_CALL, firm.entryCount - first);
    const texts = Array.from({ length: count }, (_, index) => textsOf(first + index)).flat();
    await client.query('begin');
    await client.query(`select set_config('app.firm_id', $1, true), set_config('app.person_id', $2, true)`, [
      firm.firmId,
      firm.personId,
    ]);
    // Only how many came is of interest: a million rows need not come back.
    await client.query(POST.replace('*', 'count(*)'), [texts, null]);
    await client.query('commit');
  }
}
