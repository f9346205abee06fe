import { ForwardOnlyMigration } from './forward-only-migration.ts';

/**
 * The journal (chained texts), the columns derived from it, and the books kept in the same transaction.
 *
 * Each primary key is made after the table's other indexes: of two that seem equally good PostgreSQL 15 takes the newest,
 * and while a table is nearly empty every index that starts with the firm seems as good as the key.
 */
export class CreateLog1764547200003 extends ForwardOnlyMigration {
  readonly name = 'CreateLog1764547200003';
  readonly statements = [JOURNAL, GROUPS, ENTRIES, GROUP_PARTS, BOOKS];
}

const JOURNAL = `
  -- One row a firm: locking it is what makes sequence and chain gapless. Half full, so that its updates stay in place.
  create table firm_head (
    firm_id uuid not null,
    sequence bigint not null default 0,
    hash sha256_hash not null,
    first_open_month month_text,
    constraint firm_head_firm_fkey foreign key (firm_id) references firm (id),
    constraint firm_head_sequence_check check (sequence >= 0)
  ) with (fillfactor = 50);
  alter table firm_head add constraint firm_head_pkey primary key (firm_id);

  create table journal_record (
    firm_id uuid not null,
    sequence bigint not null,
    type text not null,
    record_id uuid not null,
    -- RFC 8785 text as the server wrote it; never jsonb, whose text is another.
    content text not null,
    content_hash sha256_hash not null,
    hash sha256_hash not null,
    -- Of a register record: which row of which register, and the version that the record makes.
    noun text,
    subject_id uuid,
    version integer,
    recorded_at timestamptz not null,
    recorded_by uuid not null,
    constraint journal_record_record_id_key unique (firm_id, record_id),
    constraint journal_record_firm_fkey foreign key (firm_id) references firm (id),
    constraint journal_record_type_check check (type in ('group', 'entry', 'register')),
    constraint journal_record_register_check check (
      (type = 'register') = (noun is not null and subject_id is not null and version is not null)),
    constraint journal_record_content_check check (octet_length(content) <= 1000000)
  );
  create unique index journal_record_subject_key on journal_record (firm_id, noun, subject_id, version)
    where noun is not null;
  alter table journal_record add constraint journal_record_pkey primary key (firm_id, sequence);

  -- Words that may name a person stand beside the chain; the record holds SHA-256 of salt and text.
  create table personal_text (
    firm_id uuid not null,
    id uuid not null,
    record_id uuid not null,
    field text not null,
    salt bytea not null,
    content text,
    hash sha256_hash not null,
    constraint personal_text_record_fkey foreign key (firm_id, record_id) references journal_record (firm_id, record_id),
    constraint personal_text_salt_check check (octet_length(salt) >= 16)
  );
  create index personal_text_record_idx on personal_text (firm_id, record_id);
  alter table personal_text add constraint personal_text_pkey primary key (firm_id, id);
`;

const GROUPS = `
  create table entry_group (
    firm_id uuid not null,
    id uuid not null,
    sequence bigint not null,
    kind group_kind not null,
    unit_id uuid,
    site_id uuid,
    job_id uuid,
    charge_sheet_id uuid,
    supervised_by uuid,
    occurred_at timestamptz not null,
    recorded_at timestamptz not null,
    recorded_by uuid not null,
    regulatory_day date not null,
    zone_data_version text not null,
    device_sent_at timestamptz,
    device_skew_seconds integer,
    open_weigh_in boolean not null,
    closes_group_id uuid,
    reverses_group_id uuid,
    replaces_group_id uuid,
    answers_group_id uuid,
    request_hash sha256_hash not null,
    reason text,
    constraint entry_group_unit_fkey foreign key (firm_id, unit_id) references unit (firm_id, id),
    constraint entry_group_site_fkey foreign key (firm_id, site_id) references site (firm_id, id),
    constraint entry_group_job_fkey foreign key (firm_id, job_id) references job (firm_id, id),
    constraint entry_group_charge_sheet_fkey foreign key (firm_id, charge_sheet_id) references charge_sheet (firm_id, id),
    constraint entry_group_supervised_by_fkey foreign key (firm_id, supervised_by) references membership (firm_id, person_id),
    constraint entry_group_recorded_by_fkey foreign key (firm_id, recorded_by) references membership (firm_id, person_id),
    constraint entry_group_reversal_reason_check check (reverses_group_id is null or length(trim(reason)) > 0)
  );
  -- A group is reversed once and replaced once. What closes a weigh-in may be reversed and posted again: see post_records.
  create unique index entry_group_reverses_key on entry_group (firm_id, reverses_group_id)
    where reverses_group_id is not null;
  create unique index entry_group_replaces_key on entry_group (firm_id, replaces_group_id)
    where replaces_group_id is not null;
  create index entry_group_closes_idx on entry_group (firm_id, closes_group_id) where closes_group_id is not null;
  create index entry_group_answers_idx on entry_group (firm_id, answers_group_id) where answers_group_id is not null;
  create index entry_group_open_idx on entry_group (firm_id, occurred_at) where open_weigh_in;
  create index entry_group_unit_idx on entry_group (firm_id, unit_id, occurred_at, sequence) where unit_id is not null;
  create index entry_group_job_idx on entry_group (firm_id, job_id) where job_id is not null;
  alter table entry_group add constraint entry_group_sequence_key unique (firm_id, sequence);
  alter table entry_group add constraint entry_group_pkey primary key (firm_id, id);
  alter table entry_group add constraint entry_group_closes_fkey foreign key (firm_id, closes_group_id) references entry_group (firm_id, id);
  alter table entry_group add constraint entry_group_reverses_fkey foreign key (firm_id, reverses_group_id) references entry_group (firm_id, id);
  alter table entry_group add constraint entry_group_replaces_fkey foreign key (firm_id, replaces_group_id) references entry_group (firm_id, id);
  alter table entry_group add constraint entry_group_answers_fkey foreign key (firm_id, answers_group_id) references entry_group (firm_id, id);
`;

/** Sorts and filters of the log, each with an index that ends in the sequence: pages are keyset pages. */
const ENTRIES = `
  create table entry (
    firm_id uuid not null,
    id uuid not null,
    sequence bigint not null,
    group_id uuid not null,
    kind group_kind not null,
    refrigerant refrigerant_name not null,
    mass_micrograms bigint not null,
    typed_value decimal_text,
    typed_unit mass_unit,
    from_place place_kind not null,
    from_id uuid,
    from_as atmosphere_kind,
    to_place place_kind not null,
    to_id uuid,
    to_as atmosphere_kind,
    how_known text,
    occurred_at timestamptz not null,
    recorded_at timestamptz not null,
    recorded_by uuid not null,
    booking_month month_text not null,
    late boolean not null,
    added_by_server boolean not null,
    at_least boolean not null,
    taken_back boolean not null,
    corrects_group_id uuid,
    reverses_entry_id uuid,
    unit_id uuid,
    site_id uuid,
    constraint entry_group_fkey foreign key (firm_id, group_id) references entry_group (firm_id, id),
    constraint entry_mass_check check (mass_micrograms > 0),
    constraint entry_typed_check check ((typed_value is null) = (typed_unit is null)),
    constraint entry_from_check check (
      (from_place in ('supplier', 'cylinder', 'unit', 'reclaimer', 'customer', 'otherContractor')) = (from_id is not null)
      and (from_place = 'atmosphere') = (from_as is not null)),
    constraint entry_to_check check (
      (to_place in ('supplier', 'cylinder', 'unit', 'reclaimer', 'customer', 'otherContractor')) = (to_id is not null)
      and (to_place = 'atmosphere') = (to_as is not null)),
    constraint entry_moves_check check (
      from_place <> to_place or from_id is distinct from to_id or from_as is distinct from to_as),
    constraint entry_how_known_check check (
      how_known in ('weighed', 'estimated', 'invoice', 'label', 'factory', 'certificate')
      and (how_known is not null or added_by_server or reverses_entry_id is not null))
  );
  create index entry_group_idx on entry (firm_id, group_id);
  create index entry_occurred_at_idx on entry (firm_id, occurred_at, sequence);
  create index entry_from_idx on entry (firm_id, from_id, occurred_at, sequence) where from_id is not null;
  create index entry_to_idx on entry (firm_id, to_id, occurred_at, sequence) where to_id is not null;
  create index entry_unit_idx on entry (firm_id, unit_id, occurred_at, sequence) where unit_id is not null;
  create index entry_refrigerant_idx on entry (firm_id, refrigerant, sequence);
  create index entry_month_idx on entry (firm_id, booking_month, sequence);
  create index entry_kind_idx on entry (firm_id, kind, sequence);
  create index entry_recorded_by_idx on entry (firm_id, recorded_by, sequence);
  create index entry_from_place_idx on entry (firm_id, from_place, sequence);
  create index entry_to_place_idx on entry (firm_id, to_place, sequence);
  create unique index entry_reverses_key on entry (firm_id, reverses_entry_id) where reverses_entry_id is not null;
  create index entry_corrects_idx on entry (firm_id, corrects_group_id) where corrects_group_id is not null;
  alter table entry add constraint entry_sequence_key unique (firm_id, sequence);
  alter table entry add constraint entry_pkey primary key (firm_id, id);
`;

const GROUP_PARTS = `
  create table reading (
    firm_id uuid not null,
    id uuid not null,
    group_id uuid not null,
    sequence bigint not null,
    cylinder_id uuid not null,
    tool_id uuid,
    read_at timestamptz not null,
    moment text not null,
    mode text not null,
    typed_value decimal_text not null,
    typed_unit mass_unit not null,
    mass_micrograms bigint not null,
    hose_full boolean,
    hose_value decimal_text,
    hose_unit mass_unit,
    hose_micrograms bigint,
    resolution_g double precision,
    repeatability_g double precision,
    span_error_relative double precision,
    offset_g double precision,
    constraint reading_group_fkey foreign key (firm_id, group_id) references entry_group (firm_id, id),
    constraint reading_cylinder_fkey foreign key (firm_id, cylinder_id) references cylinder (firm_id, id),
    constraint reading_tool_fkey foreign key (firm_id, tool_id) references tool (firm_id, id),
    constraint reading_moment_check check (moment in ('before', 'after', 'only')),
    constraint reading_mode_check check (mode in ('gross', 'zeroed')),
    constraint reading_mass_check check (mode = 'zeroed' or mass_micrograms >= 0),
    constraint reading_hose_check check (hose_micrograms >= 0)
  );
  create index reading_cylinder_idx on reading (firm_id, cylinder_id, read_at, sequence);
  create index reading_group_idx on reading (firm_id, group_id);
  alter table reading add constraint reading_pkey primary key (firm_id, id);

  -- What is said about a unit. A cylinder's statement is its gross reading.
  create table statement (
    firm_id uuid not null,
    group_id uuid not null,
    ordinal smallint not null,
    sequence bigint not null,
    unit_id uuid not null,
    condition text not null,
    shown_by text,
    occurred_at timestamptz not null,
    constraint statement_group_fkey foreign key (firm_id, group_id) references entry_group (firm_id, id),
    constraint statement_unit_fkey foreign key (firm_id, unit_id) references unit (firm_id, id),
    constraint statement_condition_check check (condition in ('empty', 'full', 'notFull', 'moreThanFull', 'notKnown')),
    constraint statement_shown_by_check check (
      shown_by is null or (condition = 'empty' and shown_by in ('recovery', 'vacuum', 'foundFlat', 'open')))
  );
  create index statement_unit_idx on statement (firm_id, unit_id, occurred_at, sequence);
  alter table statement add constraint statement_pkey primary key (firm_id, group_id, ordinal);

  create table group_document (
    firm_id uuid not null,
    group_id uuid not null,
    ordinal smallint not null,
    kind text not null,
    number text not null,
    dated date not null,
    refrigerant refrigerant_name,
    mass_micrograms bigint,
    typed_value decimal_text,
    typed_unit mass_unit,
    constraint group_document_group_fkey foreign key (firm_id, group_id) references entry_group (firm_id, id),
    constraint group_document_kind_check check (kind in ('invoice', 'certificate', 'deliveryNote', 'other'))
  );
  create index group_document_number_idx on group_document (firm_id, number);
  alter table group_document add constraint group_document_pkey primary key (firm_id, group_id, ordinal);
`;

/** Kept by post_records alone, in the transaction that posts. A fresh aggregate over the entries gives the same. */
const BOOKS = `
  -- Pages partly empty: these rows are updated in place.
  -- place_key as shared/ledger/place.ts writes it: cylinder:<id>, atmosphere:hose, missing.
  create table balance (
    firm_id uuid not null,
    place_key text not null,
    refrigerant refrigerant_name not null,
    place place_kind not null,
    place_id uuid,
    place_as atmosphere_kind,
    mass_micrograms bigint not null,
    constraint balance_place_key_check check (place_key = place || coalesce(':' || place_id::text, ':' || place_as, '')),
    constraint balance_cylinder_check check (place <> 'cylinder' or mass_micrograms >= 0)
  ) with (fillfactor = 70);
  create index balance_place_idx on balance (firm_id, place, place_id);
  alter table balance add constraint balance_pkey primary key (firm_id, place_key, refrigerant);

  create table month_sum (
    firm_id uuid not null,
    month month_text not null,
    refrigerant refrigerant_name not null,
    from_kind text not null,
    to_kind text not null,
    mass_micrograms bigint not null,
    entry_count bigint not null
  ) with (fillfactor = 70);
  alter table month_sum add constraint month_sum_pkey primary key (firm_id, month, refrigerant, from_kind, to_kind);

  -- What the judge (shared/ledger) made of a place: a snapshot to start from, and whether a unit's book is known.
  create table place_state (
    firm_id uuid not null,
    place text not null,
    place_id uuid not null,
    known boolean not null,
    state jsonb not null,
    last_occurred_at timestamptz,
    sequence bigint not null,
    constraint place_state_place_check check (place in ('cylinder', 'unit'))
  ) with (fillfactor = 70);
  alter table place_state add constraint place_state_pkey primary key (firm_id, place, place_id);

  create table flag (
    firm_id uuid not null,
    id uuid not null,
    code text not null,
    subject_kind text not null,
    subject_id uuid not null,
    group_id uuid not null,
    refrigerant refrigerant_name,
    mass_micrograms bigint,
    figures jsonb not null default '{}',
    -- True: says how the place stands now. False: belongs to its group for good.
    standing boolean not null,
    opened_at timestamptz not null,
    opened_by_group_id uuid not null,
    closed_at timestamptz,
    closed_by_group_id uuid,
    constraint flag_group_fkey foreign key (firm_id, group_id) references entry_group (firm_id, id),
    constraint flag_opened_by_fkey foreign key (firm_id, opened_by_group_id) references entry_group (firm_id, id),
    constraint flag_closed_by_fkey foreign key (firm_id, closed_by_group_id) references entry_group (firm_id, id),
    constraint flag_subject_kind_check check (subject_kind in ('unit', 'cylinder', 'reclaimer', 'group')),
    constraint flag_closed_check check ((closed_at is null) = (closed_by_group_id is null))
  );
  create index flag_open_idx on flag (firm_id, opened_at, id) where closed_at is null;
  create index flag_opened_at_idx on flag (firm_id, opened_at, id);
  create index flag_subject_idx on flag (firm_id, subject_id);
  create index flag_group_idx on flag (firm_id, group_id);
  alter table flag add constraint flag_pkey primary key (firm_id, id);
`;
