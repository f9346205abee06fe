import { ForwardOnlyMigration } from './forward-only-migration.ts';

/**
 * Month close: closed months, what became of each difference, what is carried by name; who held a cylinder when; prices
 * of what was bought. The month up to which the books are closed changes through `close_month` alone.
 */
export class KeepPeriods1764720000010 extends ForwardOnlyMigration {
  readonly name = 'KeepPeriods1764720000010';
  readonly statements = [NOUNS, PERIODS, HOLDERS, PRICES, CLOSE, ...PROTECTED, HOLDERS_SO_FAR];
}

const NEW_NOUNS = ['period', 'settlement', 'carriedItem', 'purchasePrice'];

/** Adds to the closed list as it stands, whichever migration has widened it before. */
const NOUNS = `
  do $$
  declare
    v_nouns text[] := array(
      select distinct (regexp_matches(pg_get_constraintdef(c.oid), '''([A-Za-z]+)''::text', 'g'))[1]
        from pg_constraint c where c.conname = 'journal_record_noun_check'
      union select unnest(array[${NEW_NOUNS.map((noun) => `'${noun}'`).join(', ')}]));
  begin
    alter table journal_record drop constraint journal_record_noun_check;
    execute format('alter table journal_record add constraint journal_record_noun_check check (noun in (%s))',
      (select string_agg(quote_literal(n), ', ' order by n) from unnest(v_nouns) n));
  end $$;
`;

const PERIODS = `
  -- A closed booking month. What was signed off stands in its record: the sums, what was carried and by whom.
  create table period (
    firm_id uuid not null,
    id uuid not null,
    month month_text not null,
    closed_at timestamptz not null,
    closed_by uuid not null,
    record_sequence bigint not null,
    constraint period_month_key unique (firm_id, month),
    constraint period_closed_by_fkey foreign key (firm_id, closed_by) references membership (firm_id, person_id)
  );
  alter table period add constraint period_pkey primary key (firm_id, id);

  -- What month close made of a difference: an entry of a monthClose group, and the statement whose difference it settles.
  -- mass_micrograms above zero: out of the difference; below zero: into it.
  create table settlement (
    firm_id uuid not null,
    id uuid not null,
    entry_id uuid not null,
    month month_text not null,
    judged_group_id uuid not null,
    judged_place text not null,
    judged_place_id uuid not null,
    difference place_kind not null,
    settled_to place_kind not null,
    settled_to_id uuid,
    settled_to_as atmosphere_kind,
    refrigerant refrigerant_name not null,
    mass_micrograms bigint not null,
    constraint settlement_entry_fkey foreign key (firm_id, entry_id) references entry (firm_id, id),
    constraint settlement_judged_group_fkey foreign key (firm_id, judged_group_id) references entry_group (firm_id, id),
    constraint settlement_judged_place_check check (judged_place in ('cylinder', 'unit', 'reclaimer')),
    constraint settlement_difference_check check (
      difference in ('cylinderDifference', 'unitDifference', 'supplierShortFill', 'reclaimerDifference')),
    constraint settlement_settled_to_check check (settled_to in ('atmosphere', 'supplier', 'missing')),
    constraint settlement_mass_check check (mass_micrograms <> 0)
  );
  create unique index settlement_entry_key on settlement (firm_id, entry_id);
  create index settlement_judged_place_idx on settlement (firm_id, judged_place_id);
  create index settlement_judged_group_idx on settlement (firm_id, judged_group_id);
  alter table settlement add constraint settlement_pkey primary key (firm_id, id);

  -- How much of a settlement was reversed with its difference, when that was explained. Of the sign of the settlement.
  create table settlement_undo (
    firm_id uuid not null,
    settlement_id uuid not null,
    group_id uuid not null,
    mass_micrograms bigint not null,
    constraint settlement_undo_settlement_fkey foreign key (firm_id, settlement_id) references settlement (firm_id, id),
    constraint settlement_undo_group_fkey foreign key (firm_id, group_id) references entry_group (firm_id, id)
      deferrable initially deferred,
    constraint settlement_undo_mass_check check (mass_micrograms <> 0)
  );
  alter table settlement_undo add constraint settlement_undo_pkey primary key (firm_id, settlement_id, group_id);

  -- What a month is closed with although it is open: carried by somebody, for a reason.
  create table carried_item (
    firm_id uuid not null,
    id uuid not null,
    month month_text not null,
    item_key text not null,
    carried_by uuid not null,
    reason text not null,
    decided_at timestamptz not null,
    constraint carried_item_carried_by_fkey foreign key (firm_id, carried_by) references membership (firm_id, person_id),
    constraint carried_item_reason_check check (length(trim(reason)) > 0)
  );
  create index carried_item_month_idx on carried_item (firm_id, month, item_key);
  alter table carried_item add constraint carried_item_pkey primary key (firm_id, id);
`;

/** The register says who holds a cylinder now; this says since when, and who before. Fed where the register changes. */
const HOLDERS = `
  create table cylinder_holder (
    firm_id uuid not null,
    cylinder_id uuid not null,
    version integer not null,
    held_by uuid,
    valid_from timestamptz not null,
    constraint cylinder_holder_cylinder_fkey foreign key (firm_id, cylinder_id) references cylinder (firm_id, id),
    constraint cylinder_holder_held_by_fkey foreign key (firm_id, held_by) references membership (firm_id, person_id)
  );
  create index cylinder_holder_valid_from_idx on cylinder_holder (firm_id, cylinder_id, valid_from);
  create index cylinder_holder_held_by_idx on cylinder_holder (firm_id, held_by) where held_by is not null;
  alter table cylinder_holder add constraint cylinder_holder_pkey primary key (firm_id, cylinder_id, version);

  -- At commit, when the record of this version is there: it knows the time. Without one, cylinder_recorded refuses.
  create function keep_cylinder_holder() returns trigger language plpgsql security definer
    set search_path = pg_catalog, public, pg_temp set enable_seqscan = off as $$
  begin
    insert into cylinder_holder (firm_id, cylinder_id, version, held_by, valid_from)
      select new.firm_id, new.id, new.version, new.held_by, j.recorded_at
        from journal_record j
        where j.firm_id = new.firm_id and j.noun = 'cylinder' and j.subject_id = new.id and j.version = new.version
      on conflict do nothing;
    return null;
  end $$;
  create constraint trigger cylinder_holder_made after insert on cylinder deferrable initially deferred
    for each row execute function keep_cylinder_holder();
  create constraint trigger cylinder_holder_changed after update on cylinder deferrable initially deferred
    for each row when (old.held_by is distinct from new.held_by) execute function keep_cylinder_holder();
`;

const PRICES = `
  -- Price of what a group bought, per kilogram or pound as typed. The last one given for a group and refrigerant counts.
  create table purchase_price (
    firm_id uuid not null,
    id uuid not null,
    group_id uuid not null,
    refrigerant refrigerant_name not null,
    typed_value decimal_text not null,
    typed_unit mass_unit not null,
    currency text not null,
    micros_per_kg bigint not null,
    given_at timestamptz not null,
    constraint purchase_price_group_fkey foreign key (firm_id, group_id) references entry_group (firm_id, id),
    constraint purchase_price_unit_check check (typed_unit in ('kg', 'lb')),
    constraint purchase_price_currency_check check (currency ~ '^[A-Z]{3}$'),
    constraint purchase_price_micros_check check (micros_per_kg >= 0)
  );
  create index purchase_price_group_idx on purchase_price (firm_id, group_id, refrigerant, given_at);
  alter table purchase_price add constraint purchase_price_pkey primary key (firm_id, id);
`;

const CLOSE = `
  -- The one way to close a month. It takes the record of noun 'period' that its owner has just chained.
  create function close_month(p_record_id uuid) returns text language plpgsql security definer
    set search_path = pg_catalog, public, pg_temp set timezone = 'UTC' as $$
  declare
    v_head firm_head := lock_head();
    v_record journal_record;
    v_month text;
    v_expected text;
    v_next text;
    v_zone text := (select f.time_zone from firm f where f.id = v_head.firm_id);
  begin
    select j.* into v_record from journal_record j
      where j.firm_id = v_head.firm_id and j.record_id = p_record_id and j.noun = 'period'
        and j.recorded_by = current_person_id();
    if not found then perform refuse('TW018', 'period_recorded', jsonb_build_object('recordId', p_record_id)); end if;
    if not exists (select from membership m
        where m.firm_id = v_head.firm_id and m.person_id = current_person_id() and m.active and 'owner' = any (m.roles)) then
      perform refuse('TW019', 'closed_by_owner', jsonb_build_object('personId', current_person_id()));
    end if;

    v_month := (v_record.content::jsonb #>> '{after,month}')::month_text;
    v_expected := coalesce(v_head.first_open_month,
      (select min(m.month) from month_sum m where m.firm_id = v_head.firm_id), v_month);
    if v_month is distinct from v_expected then
      perform refuse('TW020', 'months_in_order', jsonb_build_object('month', v_month, 'expected', v_expected));
    end if;
    v_next := to_char(to_date(v_month, 'YYYY-MM') + interval '1 month', 'YYYY-MM');
    if to_char(v_record.recorded_at at time zone v_zone, 'YYYY-MM') < v_next then
      perform refuse('TW021', 'month_over', jsonb_build_object('month', v_month, 'recordedAt', v_record.recorded_at));
    end if;

    insert into period (firm_id, id, month, closed_at, closed_by, record_sequence)
      values (v_head.firm_id, v_record.subject_id, v_month, v_record.recorded_at, v_record.recorded_by, v_record.sequence);
    update firm_head h set first_open_month = v_next where h.firm_id = v_head.firm_id;
    return v_next;
  end $$;

  -- A settlement says of an entry what it is: of month close, between this difference and this place, of this mass.
  create function demand_settled_entry() returns trigger language plpgsql security definer
    set search_path = pg_catalog, public, pg_temp set enable_seqscan = off as $$
  begin
    if not exists (select from entry e
        where e.firm_id = new.firm_id and e.id = new.entry_id and e.kind = 'monthClose' and not e.added_by_server
          and e.refrigerant = new.refrigerant and e.mass_micrograms = abs(new.mass_micrograms)
          and case when new.mass_micrograms > 0
            then e.from_place = new.difference and e.to_place = new.settled_to
              and e.to_id is not distinct from new.settled_to_id and e.to_as is not distinct from new.settled_to_as
            else e.to_place = new.difference and e.from_place = new.settled_to
              and e.from_id is not distinct from new.settled_to_id and e.from_as is not distinct from new.settled_to_as
          end) then
      perform refuse('TW022', 'settlement_of_entry', jsonb_build_object('id', new.id, 'entryId', new.entry_id));
    end if;
    return null;
  end $$;
  create constraint trigger settlement_of_entry after insert on settlement deferrable initially deferred
    for each row execute function demand_settled_entry();
`;

const TABLES = ['period', 'settlement', 'settlement_undo', 'carried_item', 'cylinder_holder', 'purchase_price'];
/** Registers that are only added to, with the noun of their record. */
const ADDED_TO: Record<string, string> = {
  period: 'period',
  settlement: 'settlement',
  carried_item: 'carriedItem',
  purchase_price: 'purchasePrice',
};
const SERVER = 'tarewright_app, tarewright_jobs';

const PROTECTED = [
  ...TABLES.map(
    (table) => `
    alter table ${table} enable row level security, force row level security;
    create policy ${table}_firm on ${table}
      using (firm_id = (select current_firm_id()) and (select reader_site_ids()) is null)
      with check (firm_id = (select current_firm_id()) and (select reader_site_ids()) is null);
    create trigger ${table}_append_only before update or delete or truncate on ${table}
      for each statement execute function refuse_change();`,
  ),
  ...Object.entries(ADDED_TO).map(
    ([table, noun]) => `
    create constraint trigger ${table}_recorded after insert on ${table} deferrable initially deferred
      for each row execute function demand_register_record('${noun}', 'id');`,
  ),
  `grant select on period, cylinder_holder to ${SERVER}`,
  `grant select, insert on settlement, settlement_undo, carried_item, purchase_price to ${SERVER}`,
  `grant execute on function close_month(uuid) to ${SERVER}`,
];

/** From the chain, firm by firm: the row-level security of these tables holds for the owner of the database too. */
const HOLDERS_SO_FAR = `
  do $$
  declare
    v_firm uuid;
  begin
    for v_firm in select f.id from firm f order by f.id loop
      perform set_config('app.firm_id', v_firm::text, true);
      insert into cylinder_holder (firm_id, cylinder_id, version, held_by, valid_from)
        select v_firm, h.subject_id, h.version, h.held_by, h.recorded_at
          from (select j.subject_id, j.version, j.recorded_at, (j.content::jsonb #>> '{after,heldBy}')::uuid as held_by,
              lag((j.content::jsonb #>> '{after,heldBy}')::uuid) over before as held_before
            from journal_record j where j.firm_id = v_firm and j.noun = 'cylinder'
            window before as (partition by j.subject_id order by j.version)) h
          where h.version = 1 or h.held_by is distinct from h.held_before;
    end loop;
    perform set_config('app.firm_id', '', true);
  end $$;
`;
