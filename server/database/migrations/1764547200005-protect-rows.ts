import { ForwardOnlyMigration } from './forward-only-migration.ts';

/** Row-level security, refusals of change, journalled registers, look-ups before a firm is known, and grants. */
export class ProtectRows1764547200005 extends ForwardOnlyMigration {
  readonly name = 'ProtectRows1764547200005';
  readonly statements = [...policies(), PEOPLE_POLICIES, APPEND_ONLY, JOURNALLED, LOOK_UPS, ...grants()];
}

const HIDDEN = '(select reader_site_ids()) is null';
const bySite = (column: string) => `(${HIDDEN} or ${column} = any ((select reader_site_ids())::uuid[]))`;
const byUnit = (table: string, column = 'unit_id') =>
  `(${HIDDEN} or exists (select from unit u where u.firm_id = ${table}.firm_id and u.id = ${table}.${column}))`;
const byGroup = (table: string, column = 'group_id') =>
  `(${HIDDEN} or exists (select from entry_group g where g.firm_id = ${table}.firm_id and g.id = ${table}.${column}))`;

/** What a reader who is limited to some sites sees of each table; null: as everybody in the firm. */
const READER_SEES: Record<string, string | null> = {
  membership: null,
  last_sign_in: HIDDEN,
  invitation: HIDDEN,
  customer: `(${HIDDEN} or exists (select from site s where s.firm_id = customer.firm_id and s.customer_id = customer.id))`,
  site: bySite('id'),
  party: HIDDEN,
  tool: HIDDEN,
  unit: bySite('site_id'),
  job: byUnit('job'),
  unit_refrigerant: byUnit('unit_refrigerant'),
  unit_full_charge: byUnit('unit_full_charge'),
  unit_site: bySite('site_id'),
  charge_basis: byUnit('charge_basis'),
  line_set: byUnit('line_set'),
  charge_sheet: byUnit('charge_sheet'),
  cylinder: HIDDEN,
  cylinder_tare: HIDDEN,
  firm_head: HIDDEN,
  journal_record: HIDDEN,
  personal_text: byGroup('personal_text', 'record_id'),
  entry_group: bySite('site_id'),
  entry: bySite('site_id'),
  reading: byGroup('reading'),
  statement: byGroup('statement'),
  group_document: byGroup('group_document'),
  balance: `(${HIDDEN} or (place = 'unit' and exists (
    select from unit u where u.firm_id = balance.firm_id and u.id = balance.place_id)))`,
  month_sum: HIDDEN,
  place_state: `(${HIDDEN} or (place = 'unit' and exists (
    select from unit u where u.firm_id = place_state.firm_id and u.id = place_state.place_id)))`,
  flag: byUnit('flag', 'subject_id'),
};

function policies(): string[] {
  return Object.entries(READER_SEES).map(([table, reader]) => {
    const rule = `firm_id = (select current_firm_id())${reader === null ? '' : ` and ${reader}`}`;
    return `alter table ${table} enable row level security, force row level security;
      create policy ${table}_firm on ${table} using (${rule}) with check (${rule});`;
  });
}

/**
 * People and their secrets belong to no firm. The owner role may read the five tables that a look-up needs before a firm
 * is known; it is no role that the server connects as, and everywhere else its own rows are closed to it too.
 */
const PEOPLE_POLICIES = `
  alter table firm enable row level security, force row level security;
  create policy firm_firm on firm
    using (id = (select current_firm_id())) with check (id = (select current_firm_id()));
  create policy firm_look_up on firm for select to current_user using (true);

  create policy membership_own on membership for select
    using ((select current_firm_id()) is null and person_id = (select current_person_id()));
  create policy membership_look_up on membership for select to current_user using (true);

  alter table person enable row level security, force row level security;
  create policy person_seen on person for select using (
    id = (select current_person_id())
    or exists (select from membership m where m.firm_id = (select current_firm_id()) and m.person_id = person.id));
  create policy person_own on person
    using (id = (select current_person_id())) with check (id = (select current_person_id()));
  create policy person_look_up on person for select to current_user using (true);

  alter table person_secret enable row level security, force row level security;
  create policy person_secret_own on person_secret
    using (person_id = (select current_person_id())) with check (person_id = (select current_person_id()));

  alter table password_reset enable row level security, force row level security;
  create policy password_reset_own on password_reset
    using (person_id = (select current_person_id())) with check (person_id = (select current_person_id()));
  create policy password_reset_look_up on password_reset for select to current_user using (true);

  alter table personal_token enable row level security, force row level security;
  create policy personal_token_own on personal_token
    using (firm_id = (select current_firm_id()) and person_id = (select current_person_id()))
    with check (firm_id = (select current_firm_id()) and person_id = (select current_person_id()));
  create policy personal_token_look_up on personal_token for select to current_user using (true);

  create policy invitation_look_up on invitation for select to current_user using (true);
`;

/** For everybody, the owner too: a statement that would change a posted row fails, whether it finds one or not. */
const APPEND_ONLY = `
  create function refuse_change() returns trigger language plpgsql set search_path = pg_catalog, public, pg_temp as $$
  begin
    perform refuse('TW014', 'append_only', jsonb_build_object('table', tg_table_name, 'operation', tg_op));
    return null;
  end $$;
  ${[
    'journal_record',
    'entry_group',
    'entry',
    'reading',
    'statement',
    'group_document',
    'charge_sheet',
    'charge_basis',
    'line_set',
    'unit_refrigerant',
    'unit_full_charge',
    'unit_site',
    'cylinder_tare',
  ]
    .map(
      (table) => `create trigger ${table}_append_only before update or delete or truncate on ${table}
        for each statement execute function refuse_change();`,
    )
    .join('\n')}
`;

/** Registers that change, with the column that a register record calls its subject. */
const CHANGEABLE: Record<string, string> = {
  firm: 'id',
  membership: 'person_id',
  customer: 'id',
  site: 'id',
  party: 'id',
  tool: 'id',
  unit: 'id',
  job: 'id',
  cylinder: 'id',
};
const ADDED_TO: Record<string, string> = {
  unit_refrigerant: 'unitRefrigerant',
  unit_full_charge: 'unitFullCharge',
  unit_site: 'unitSite',
  charge_basis: 'chargeBasis',
  line_set: 'lineSet',
  charge_sheet: 'chargeSheet',
  cylinder_tare: 'cylinderTare',
};

/**
 * A forgotten audit fails at commit: each version of each register row needs its record in the chain. Versions are
 * counted here, so that a change without a new version cannot hide behind the record of an earlier one.
 */
const JOURNALLED = `
  create function keep_version() returns trigger language plpgsql set search_path = pg_catalog, public, pg_temp as $$
  begin
    if tg_op = 'INSERT' then
      new.version := 1;
    else
      if to_jsonb(new) -> tg_argv[0] is distinct from to_jsonb(old) -> tg_argv[0] then
        perform refuse('TW014', 'append_only', jsonb_build_object('table', tg_table_name, 'operation', 'change of id'));
      end if;
      new.version := old.version + 1;
    end if;
    return new;
  end $$;

  create function demand_register_record() returns trigger language plpgsql security definer
    set search_path = pg_catalog, public, pg_temp set enable_seqscan = off set plan_cache_mode = force_generic_plan as $$
  declare
    v_row jsonb := to_jsonb(new);
    v_subject uuid := (v_row ->> tg_argv[1])::uuid;
    v_version integer := coalesce((v_row ->> 'version')::integer, 1);
  begin
    if not exists (select from journal_record j
        where j.firm_id = coalesce(v_row ->> 'firm_id', v_row ->> 'id')::uuid and j.noun = tg_argv[0]
          and j.subject_id = v_subject and j.version = v_version) then
      perform refuse('TW015', 'register_change_recorded',
        jsonb_build_object('noun', tg_argv[0], 'subjectId', v_subject, 'version', v_version));
    end if;
    return null;
  end $$;

  ${Object.entries(CHANGEABLE)
    .map(
      ([table, subject]) => `
      create trigger ${table}_version before insert or update on ${table}
        for each row execute function keep_version('${subject}');
      create constraint trigger ${table}_recorded after insert or update on ${table} deferrable initially deferred
        for each row execute function demand_register_record('${table}', '${subject}');`,
    )
    .join('\n')}
  ${Object.entries(ADDED_TO)
    .map(
      ([table, noun]) => `
      create constraint trigger ${table}_recorded after insert on ${table} deferrable initially deferred
        for each row execute function demand_register_record('${noun}', 'id');`,
    )
    .join('\n')}
  alter table journal_record add constraint journal_record_noun_check check (noun in (
    ${[...Object.keys(CHANGEABLE), ...Object.values(ADDED_TO)].map((noun) => `'${noun}'`).join(', ')}));
`;

/** Ids only: nothing that a person wrote leaves through these, and nobody but the server may call them. */
const LOOK_UPS = `
  create function sign_in_candidate(p_email text) returns uuid language sql stable security definer
    set search_path = pg_catalog, public, pg_temp
    as $$ select p.id from person p where lower(p.email) = lower(p_email) $$;
  create function firm_ids_of_person(p_person_id uuid) returns setof uuid language sql stable security definer
    set search_path = pg_catalog, public, pg_temp
    as $$ select m.firm_id from membership m where m.person_id = p_person_id and m.active order by m.firm_id $$;
  create function invitation_by_token_hash(p_token_hash bytea) returns table (firm_id uuid, id uuid)
    language sql stable security definer set search_path = pg_catalog, public, pg_temp
    as $$ select i.firm_id, i.id from invitation i where i.token_hash = p_token_hash $$;
  create function password_reset_by_token_hash(p_token_hash bytea) returns table (person_id uuid, id uuid)
    language sql stable security definer set search_path = pg_catalog, public, pg_temp
    as $$ select r.person_id, r.id from password_reset r where r.token_hash = p_token_hash $$;
  create function token_by_hash(p_token_hash bytea) returns table (firm_id uuid, person_id uuid, id uuid)
    language sql stable security definer set search_path = pg_catalog, public, pg_temp
    as $$ select t.firm_id, t.person_id, t.id from personal_token t where t.token_hash = p_token_hash $$;
  create function list_firm_ids() returns setof uuid language sql stable security definer
    set search_path = pg_catalog, public, pg_temp
    as $$ select f.id from firm f order by f.id $$;

  -- A firm starts with its head: 32 zero bytes stand before the first record. The scope has to name the new firm.
  create function create_firm(p_id uuid, p_name text, p_jurisdiction text, p_time_zone text, p_locale text, p_gwp_set text)
    returns void language plpgsql security definer set search_path = pg_catalog, public, pg_temp as $$
  begin
    insert into firm (id, name, jurisdiction, time_zone, locale, gwp_set)
      values (p_id, p_name, p_jurisdiction, p_time_zone, p_locale, p_gwp_set);
    insert into firm_head (firm_id, hash) values (p_id, decode(repeat('00', 32), 'hex'));
  end $$;
`;

function grants(): string[] {
  const server = 'tarewright_app, tarewright_jobs';
  const readOnly = 'journal_record, personal_text, entry_group, entry, reading, statement, group_document';
  const books = 'firm_head, balance, month_sum, place_state, flag';
  const changed = Object.keys(CHANGEABLE).filter((table) => table !== 'firm');
  const added = Object.keys(ADDED_TO);
  return [
    `grant usage on schema public to tarewright_app, tarewright_jobs, tarewright_backup`,
    `grant select on ${readOnly}, ${books} to ${server}`,
    `grant select, update on firm to ${server}`,
    `grant select, insert, update on ${changed.join(', ')}, person, last_sign_in, invitation to ${server}`,
    `grant select, insert on ${added.join(', ')} to ${server}`,
    `grant select, insert, update on person_secret, password_reset, personal_token to tarewright_app`,
    `grant select, insert, update, delete on session to tarewright_app`,
    `grant select, insert, delete on sign_in_failure to tarewright_app`,
    `grant execute on function current_firm_id(), current_person_id(), reader_site_ids(), lock_head(),
      post_records(text[], jsonb), create_firm(uuid, text, text, text, text, text) to ${server}`,
    // keep_version and refuse_change run as whoever writes, so that it may call what they call.
    `grant execute on function refuse(text, text, jsonb) to ${server}`,
    `grant execute on function sign_in_candidate(text), firm_ids_of_person(uuid), invitation_by_token_hash(bytea),
      password_reset_by_token_hash(bytea), token_by_hash(bytea) to tarewright_app`,
    `grant execute on function list_firm_ids() to tarewright_jobs`,
    `grant select on all tables in schema public to tarewright_backup`,
    `grant select on all sequences in schema public to tarewright_backup`,
    `alter default privileges in schema public grant select on tables to tarewright_backup`,
    `alter default privileges in schema public grant select on sequences to tarewright_backup`,
  ];
}
