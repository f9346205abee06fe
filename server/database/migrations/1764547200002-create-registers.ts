import { ForwardOnlyMigration } from './forward-only-migration.ts';

/**
 * Customers, sites, units and what is known of them, cylinders, tools. Every key starts with the firm.
 *
 * Each primary key is made after the table's other indexes: of two that seem equally good PostgreSQL 15 takes the newest,
 * and while a table is nearly empty every index that starts with the firm seems as good as the key.
 */
export class CreateRegisters1764547200002 extends ForwardOnlyMigration {
  readonly name = 'CreateRegisters1764547200002';
  readonly statements = [PLACES, UNITS, UNIT_HISTORY, CHARGE, CYLINDERS];
}

const PLACES = `
  create table customer (
    firm_id uuid not null,
    id uuid not null,
    name text not null,
    email text,
    phone text,
    note text,
    version integer not null default 1,
    constraint customer_firm_fkey foreign key (firm_id) references firm (id)
  );
  create index customer_name_idx on customer (firm_id, name, id);
  alter table customer add constraint customer_pkey primary key (firm_id, id);

  create table site (
    firm_id uuid not null,
    id uuid not null,
    customer_id uuid not null,
    name text not null,
    address_lines text[] not null,
    time_zone text not null,
    altitude_m double precision not null,
    jurisdiction jurisdiction not null,
    version integer not null default 1,
    constraint site_customer_fkey foreign key (firm_id, customer_id) references customer (firm_id, id)
  );
  create index site_customer_idx on site (firm_id, customer_id);
  create index site_name_idx on site (firm_id, name, id);
  alter table site add constraint site_pkey primary key (firm_id, id);

  create table party (
    firm_id uuid not null,
    id uuid not null,
    kind text not null,
    name text not null,
    note text,
    version integer not null default 1,
    constraint party_firm_fkey foreign key (firm_id) references firm (id),
    constraint party_kind_check check (kind in ('supplier', 'reclaimer', 'otherContractor'))
  );
  create index party_name_idx on party (firm_id, name, id);
  alter table party add constraint party_pkey primary key (firm_id, id);

  create table tool (
    firm_id uuid not null,
    id uuid not null,
    kind text not null,
    name text not null,
    serial text,
    resolution_g double precision,
    repeatability_g double precision,
    span_error_relative double precision,
    offset_g double precision,
    made_on date,
    last_checked_on date,
    held_by uuid,
    version integer not null default 1,
    constraint tool_firm_fkey foreign key (firm_id) references firm (id),
    constraint tool_held_by_fkey foreign key (firm_id, held_by) references membership (firm_id, person_id),
    constraint tool_kind_check
      check (kind in ('scale', 'gauge', 'vacuumGauge', 'torqueWrench', 'detector', 'recoveryMachine')),
    constraint tool_scale_check check (kind <> 'scale' or resolution_g > 0)
  );
  create index tool_name_idx on tool (firm_id, name, id);
  alter table tool add constraint tool_pkey primary key (firm_id, id);
`;

const UNITS = `
  create table unit (
    firm_id uuid not null,
    id uuid not null,
    site_id uuid not null,
    tag text not null,
    name text not null,
    appliance_kind text not null,
    subsector text,
    refrigerant refrigerant_name not null,
    serials jsonb not null default '[]',
    nameplate_readable boolean not null default true,
    design_pressure_high_kpa_gauge double precision,
    design_pressure_low_kpa_gauge double precision,
    installed_on date,
    version integer not null default 1,
    constraint unit_site_fkey foreign key (firm_id, site_id) references site (firm_id, id),
    constraint unit_appliance_kind_check check (appliance_kind in (
      'comfortCooling', 'commercialRefrigeration', 'industrialProcessRefrigeration', 'other')),
    constraint unit_subsector_check check (subsector in (
      'residentialLightCommercial', 'variableRefrigerantFlow', 'refrigeratedTransport', 'other'))
  );
  create index unit_site_idx on unit (firm_id, site_id);
  create index unit_tag_idx on unit (firm_id, tag, id);
  create index unit_name_idx on unit (firm_id, name, id);
  alter table unit add constraint unit_pkey primary key (firm_id, id);

  create table job (
    firm_id uuid not null,
    id uuid not null,
    unit_id uuid not null,
    kind text not null,
    title text,
    opened_at timestamptz not null,
    closed_at timestamptz,
    version integer not null default 1,
    constraint job_unit_fkey foreign key (firm_id, unit_id) references unit (firm_id, id),
    constraint job_kind_check check (kind in (
      'install', 'serviceWithLeak', 'recovery', 'decommission', 'relocation', 'retrofit'))
  );
  create index job_unit_idx on job (firm_id, unit_id);
  create index job_opened_at_idx on job (firm_id, opened_at, id);
  alter table job add constraint job_pkey primary key (firm_id, id);
`;

/** What holds from a day on is added, never changed: the page shows what was known when. */
const UNIT_HISTORY = `
  create table unit_refrigerant (
    firm_id uuid not null,
    id uuid not null,
    unit_id uuid not null,
    refrigerant refrigerant_name not null,
    valid_from timestamptz not null,
    job_id uuid,
    constraint unit_refrigerant_unit_fkey foreign key (firm_id, unit_id) references unit (firm_id, id),
    constraint unit_refrigerant_job_fkey foreign key (firm_id, job_id) references job (firm_id, id)
  );
  create index unit_refrigerant_unit_idx on unit_refrigerant (firm_id, unit_id, valid_from);
  alter table unit_refrigerant add constraint unit_refrigerant_pkey primary key (firm_id, id);

  create table unit_full_charge (
    firm_id uuid not null,
    id uuid not null,
    unit_id uuid not null,
    refrigerant refrigerant_name not null,
    mass_micrograms bigint not null,
    typed_value decimal_text not null,
    typed_unit mass_unit not null,
    method text not null,
    valid_from timestamptz not null,
    job_id uuid,
    reason text,
    constraint unit_full_charge_unit_fkey foreign key (firm_id, unit_id) references unit (firm_id, id),
    constraint unit_full_charge_job_fkey foreign key (firm_id, job_id) references job (firm_id, id),
    constraint unit_full_charge_mass_check check (mass_micrograms >= 0),
    constraint unit_full_charge_method_check
      check (method in ('manufacturer', 'calculation', 'measured', 'establishedRange'))
  );
  create index unit_full_charge_unit_idx on unit_full_charge (firm_id, unit_id, valid_from);
  alter table unit_full_charge add constraint unit_full_charge_pkey primary key (firm_id, id);

  create table unit_site (
    firm_id uuid not null,
    id uuid not null,
    unit_id uuid not null,
    site_id uuid not null,
    valid_from timestamptz not null,
    constraint unit_site_unit_fkey foreign key (firm_id, unit_id) references unit (firm_id, id),
    constraint unit_site_site_fkey foreign key (firm_id, site_id) references site (firm_id, id)
  );
  create index unit_site_unit_idx on unit_site (firm_id, unit_id, valid_from);
  alter table unit_site add constraint unit_site_pkey primary key (firm_id, id);
`;

const CHARGE = `
  create table charge_basis (
    firm_id uuid not null,
    id uuid not null,
    unit_id uuid not null,
    valid_from timestamptz not null,
    basis jsonb not null,
    document text not null,
    page text,
    note text,
    constraint charge_basis_unit_fkey foreign key (firm_id, unit_id) references unit (firm_id, id)
  );
  create index charge_basis_unit_idx on charge_basis (firm_id, unit_id, valid_from);
  alter table charge_basis add constraint charge_basis_pkey primary key (firm_id, id);

  create table line_set (
    firm_id uuid not null,
    id uuid not null,
    unit_id uuid not null,
    valid_from timestamptz not null,
    branches jsonb not null,
    note text,
    constraint line_set_unit_fkey foreign key (firm_id, unit_id) references unit (firm_id, id)
  );
  create index line_set_unit_idx on line_set (firm_id, unit_id, valid_from);
  alter table line_set add constraint line_set_pkey primary key (firm_id, id);

  create table charge_sheet (
    firm_id uuid not null,
    id uuid not null,
    unit_id uuid not null,
    job_id uuid,
    made_at timestamptz not null,
    made_by uuid not null,
    request jsonb not null,
    result jsonb not null,
    manual_document text,
    manual_page text,
    room jsonb,
    constraint charge_sheet_unit_fkey foreign key (firm_id, unit_id) references unit (firm_id, id),
    constraint charge_sheet_job_fkey foreign key (firm_id, job_id) references job (firm_id, id),
    constraint charge_sheet_made_by_fkey foreign key (firm_id, made_by) references membership (firm_id, person_id)
  );
  create index charge_sheet_unit_idx on charge_sheet (firm_id, unit_id, made_at);
  alter table charge_sheet add constraint charge_sheet_pkey primary key (firm_id, id);
`;

const CYLINDERS = `
  create table cylinder (
    firm_id uuid not null,
    id uuid not null,
    tag text not null,
    kind text not null,
    refrigerant refrigerant_name not null,
    content_state text not null,
    owner_kind text not null,
    owner_party_id uuid,
    owner_customer_id uuid,
    water_capacity_micrograms bigint,
    water_capacity_value decimal_text,
    water_capacity_unit mass_unit,
    stamped_limit_micrograms bigint,
    stamped_limit_value decimal_text,
    stamped_limit_unit mass_unit,
    -- What post_records holds the contents against: the stamped limit, else the published rule; null: none or not known.
    limit_micrograms bigint,
    service_pressure_kpa_gauge double precision,
    retest_due date,
    held_by uuid,
    batch text,
    version integer not null default 1,
    constraint cylinder_firm_fkey foreign key (firm_id) references firm (id),
    constraint cylinder_owner_party_fkey foreign key (firm_id, owner_party_id) references party (firm_id, id),
    constraint cylinder_owner_customer_fkey foreign key (firm_id, owner_customer_id) references customer (firm_id, id),
    constraint cylinder_held_by_fkey foreign key (firm_id, held_by) references membership (firm_id, person_id),
    constraint cylinder_kind_check check (kind in ('refillable', 'nonRefillable', 'recovery')),
    constraint cylinder_content_state_check check (content_state in ('virgin', 'recovered', 'recycled', 'reclaimed')),
    constraint cylinder_owner_check check (
      owner_kind in ('ours', 'party', 'customer')
      and (owner_kind = 'party') = (owner_party_id is not null)
      and (owner_kind = 'customer') = (owner_customer_id is not null)),
    constraint cylinder_limit_check check (limit_micrograms > 0)
  );
  create index cylinder_tag_idx on cylinder (firm_id, tag, id);
  create index cylinder_held_by_idx on cylinder (firm_id, held_by);
  alter table cylinder add constraint cylinder_pkey primary key (firm_id, id);

  create table cylinder_tare (
    firm_id uuid not null,
    id uuid not null,
    cylinder_id uuid not null,
    mass_micrograms bigint not null,
    typed_value decimal_text not null,
    typed_unit mass_unit not null,
    valid_from timestamptz not null,
    reason text,
    constraint cylinder_tare_cylinder_fkey foreign key (firm_id, cylinder_id) references cylinder (firm_id, id),
    constraint cylinder_tare_mass_check check (mass_micrograms > 0)
  );
  create index cylinder_tare_cylinder_idx on cylinder_tare (firm_id, cylinder_id, valid_from);
  alter table cylinder_tare add constraint cylinder_tare_pkey primary key (firm_id, id);
`;
