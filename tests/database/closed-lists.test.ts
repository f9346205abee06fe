import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { CONTENT_STATES, CYLINDER_KINDS } from '../../shared/cylinders/cylinder.schema.ts';
import { JOB_KINDS } from '../../shared/jobs/jobs.schema.ts';
import { journalRecord, REGISTER_NOUNS } from '../../shared/journal/record.schema.ts';
import {
  DOCUMENT_KINDS,
  EMPTY_BY,
  GROUP_KINDS,
  HOW_KNOWN,
  READING_MODES,
  READING_MOMENTS,
  UNIT_CONDITIONS,
} from '../../shared/ledger/entry-group.schema.ts';
import { ATMOSPHERE_KINDS, PLACE_KINDS, PLACE_KINDS_WITH_ID } from '../../shared/ledger/place.ts';
import { PARTY_KINDS } from '../../shared/parties/parties.schema.ts';
import { ROLES } from '../../shared/permissions/roles.ts';
import { JURISDICTIONS } from '../../shared/session/session.schema.ts';
import { TOOL_KINDS } from '../../shared/tools/tools.schema.ts';
import { APPLIANCE_KINDS, FULL_CHARGE_METHODS, SUBSECTORS } from '../../shared/unit-register/unit.schema.ts';
import { MASS_UNITS } from '../../shared/units/mass.ts';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';

let database: TestDatabase;
const definitions = new Map<string, string>();
beforeAll(async () => {
  database = await createTestDatabase();
  const rows = await database.query<{ name: string; definition: string }>(
    'owner',
    `select coalesce(t.typname, c.conname) as name, pg_get_constraintdef(c.oid) as definition
       from pg_constraint c left join pg_type t on t.oid = c.contypid where c.contype = 'c'`,
  );
  for (const { name, definition } of rows) definitions.set(name, definition);
});
afterAll(() => database.drop());

const listOf = (name: string) =>
  [...(definitions.get(name) ?? '').matchAll(/'([A-Za-z]+)'::text/g)].map(([, value]) => value).sort();

describe('A closed list', () => {
  it.each<[string, readonly string[]]>([
    ['place_kind', PLACE_KINDS],
    ['atmosphere_kind', ATMOSPHERE_KINDS],
    ['group_kind', GROUP_KINDS],
    ['mass_unit', MASS_UNITS],
    ['jurisdiction', JURISDICTIONS],
    ['person_roles', ROLES],
    ['party_kind_check', PARTY_KINDS],
    ['tool_kind_check', TOOL_KINDS],
    ['job_kind_check', JOB_KINDS],
    ['unit_appliance_kind_check', APPLIANCE_KINDS],
    ['unit_subsector_check', SUBSECTORS],
    ['unit_full_charge_method_check', FULL_CHARGE_METHODS],
    ['cylinder_kind_check', CYLINDER_KINDS],
    ['cylinder_content_state_check', CONTENT_STATES],
    ['entry_how_known_check', HOW_KNOWN],
    ['entry_from_check', [...PLACE_KINDS_WITH_ID, 'atmosphere']],
    ['entry_to_check', [...PLACE_KINDS_WITH_ID, 'atmosphere']],
    ['reading_moment_check', READING_MOMENTS],
    ['reading_mode_check', READING_MODES],
    ['statement_condition_check', UNIT_CONDITIONS],
    ['statement_shown_by_check', [...EMPTY_BY, 'empty']],
    ['group_document_kind_check', DOCUMENT_KINDS],
    ['journal_record_type_check', journalRecord.options.map(({ shape }) => shape.type.value)],
    ['journal_record_noun_check', REGISTER_NOUNS],
  ])('%s is the same in the database and in shared', (name, shared) => {
    expect(listOf(name)).toEqual([...shared].sort());
  });
});
