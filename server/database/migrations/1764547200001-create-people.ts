import { ForwardOnlyMigration } from './forward-only-migration.ts';

/** Who is asking, and the tables of firms, people and how they sign in. */
export class CreatePeople1764547200001 extends ForwardOnlyMigration {
  readonly name = 'CreatePeople1764547200001';
  readonly statements = [SCOPE, DOMAINS, FIRMS_AND_PEOPLE, SIGN_IN];
}

/**
 * The three settings that a transaction carries (server/database/firm-scope.ts). A pooled connection reads a
 * setting of an earlier transaction as '' and not as null, hence nullif.
 *
 * `app.site_ids` is '' for all sites, else an array literal: '{}' is a reader who may see no site at all.
 */
const SCOPE = `
  alter default privileges revoke execute on functions from public;

  create function current_firm_id() returns uuid language sql stable parallel safe
    as $$ select nullif(pg_catalog.current_setting('app.firm_id', true), '')::uuid $$;
  create function current_person_id() returns uuid language sql stable parallel safe
    as $$ select nullif(pg_catalog.current_setting('app.person_id', true), '')::uuid $$;
  create function reader_site_ids() returns uuid[] language sql stable parallel safe
    as $$ select nullif(pg_catalog.current_setting('app.site_ids', true), '')::uuid[] $$;
`;

/** The closed lists stand in shared/ledger and shared/<noun>; a test compares them with these. */
const DOMAINS = `
  create domain month_text as text check (value ~ '^[0-9]{4}-(0[1-9]|1[0-2])$');
  create domain refrigerant_name as text check (value ~ '^R-[0-9A-Za-z()]{1,15}$');
  create domain decimal_text as text check (value ~ '^-?[0-9]{1,12}([.][0-9]{1,12})?$');
  create domain mass_unit as text check (value in ('g', 'kg', 't', 'oz', 'lb'));
  create domain sha256_hash as bytea check (octet_length(value) = 32);
  create domain jurisdiction as text check (value in ('US', 'EU'));
  create domain place_kind as text check (value in (
    'supplier', 'cylinder', 'unit', 'factory', 'opening', 'reclaimer', 'destroyed', 'customer', 'otherContractor',
    'atmosphere', 'cylinderDifference', 'unitDifference', 'supplierShortFill', 'reclaimerDifference', 'missing'));
  create domain atmosphere_kind as text check (value in ('measured', 'inferred', 'hose', 'beforeOurCare'));
  create domain group_kind as text check (value in (
    'purchase', 'opening', 'factoryCharge', 'extraCharge', 'fullRecharge', 'refill', 'adjust', 'putBack',
    'traceCharge', 'recovery', 'overchargeRemoved', 'heelRemoved', 'vacuum', 'transfer', 'weighing', 'return',
    'reclaim', 'destruction', 'certificate', 'otherContractor', 'warrantyReplacement', 'relocation', 'handOver',
    'loss', 'found', 'monthClose'));
  create domain person_roles as text[] check (
    cardinality(value) > 0 and value <@ array['technician', 'complianceManager', 'owner', 'reader']);
`;

const FIRMS_AND_PEOPLE = `
  create table firm (
    id uuid not null,
    name text not null,
    jurisdiction jurisdiction not null,
    time_zone text not null,
    locale text not null,
    gwp_set text not null,
    version integer not null default 1,
    constraint firm_pkey primary key (id)
  );

  create table person (
    id uuid not null,
    email text not null,
    name text not null,
    preferences jsonb not null default '{}',
    version integer not null default 1,
    constraint person_pkey primary key (id)
  );
  create unique index person_email_key on person (lower(email));

  create table person_secret (
    person_id uuid not null,
    password_hash text not null,
    changed_at timestamptz not null,
    constraint person_secret_pkey primary key (person_id),
    constraint person_secret_person_fkey foreign key (person_id) references person (id)
  );

  create table membership (
    firm_id uuid not null,
    person_id uuid not null,
    roles person_roles not null,
    site_ids uuid[],
    active boolean not null default true,
    van text,
    version integer not null default 1,
    constraint membership_pkey primary key (firm_id, person_id),
    constraint membership_firm_fkey foreign key (firm_id) references firm (id),
    constraint membership_person_fkey foreign key (person_id) references person (id)
  );
  create index membership_person_idx on membership (person_id);

  -- Apart from membership, because it changes without being a change that anyone has to answer for.
  create table last_sign_in (
    firm_id uuid not null,
    person_id uuid not null,
    signed_in_at timestamptz not null,
    constraint last_sign_in_pkey primary key (firm_id, person_id),
    constraint last_sign_in_membership_fkey foreign key (firm_id, person_id) references membership (firm_id, person_id)
  );
`;

/** Tokens are stored as SHA-256 of a random secret, so a global unique index on them gives nothing away. */
const SIGN_IN = `
  -- The shape that connect-pg-simple writes. It has no firm: a session starts before one is chosen.
  create table session (
    sid varchar not null,
    sess json not null,
    expire timestamp(6) not null,
    person_id uuid,
    constraint session_pkey primary key (sid)
  );
  create index session_expire_idx on session (expire);
  create index session_person_idx on session (person_id);

  -- Whose session it is, so that all of a person's can be ended. It stands in what passport keeps: the person's id itself
  -- or { personId }. A trigger, because TypeORM wants a table of its own for a generated column.
  create function name_session_person() returns trigger language plpgsql
    set search_path = pg_catalog, public, pg_temp as $$
  begin
    new.person_id := substring(
      coalesce(new.sess #>> '{passport,user,personId}', new.sess #>> '{passport,user}', new.sess #>> '{personId}')
      from '^[0-9a-fA-F]{8}-[0-9a-fA-F]{4}-[0-9a-fA-F]{4}-[0-9a-fA-F]{4}-[0-9a-fA-F]{12}$')::uuid;
    return new;
  end $$;
  create trigger session_person before insert or update on session
    for each row execute function name_session_person();

  -- One row for each refused sign-in; throttle_key is a hash of the address or of the account asked for.
  create table sign_in_failure (
    id bigint not null generated always as identity,
    throttle_key text not null,
    failed_at timestamptz not null,
    constraint sign_in_failure_pkey primary key (id)
  );
  create index sign_in_failure_key_idx on sign_in_failure (throttle_key, failed_at);

  create table invitation (
    firm_id uuid not null,
    id uuid not null,
    email text not null,
    name text not null,
    roles person_roles not null,
    site_ids uuid[],
    locale text,
    token_hash sha256_hash not null,
    invited_by uuid not null,
    invited_at timestamptz not null,
    expires_at timestamptz not null,
    accepted_at timestamptz,
    accepted_by uuid,
    constraint invitation_pkey primary key (firm_id, id),
    constraint invitation_token_hash_key unique (token_hash),
    constraint invitation_invited_by_fkey foreign key (firm_id, invited_by) references membership (firm_id, person_id),
    constraint invitation_accepted_by_fkey foreign key (accepted_by) references person (id)
  );

  create table password_reset (
    id uuid not null,
    person_id uuid not null,
    token_hash sha256_hash not null,
    requested_at timestamptz not null,
    expires_at timestamptz not null,
    used_at timestamptz,
    constraint password_reset_pkey primary key (id),
    constraint password_reset_token_hash_key unique (token_hash),
    constraint password_reset_person_fkey foreign key (person_id) references person (id)
  );

  create table personal_token (
    firm_id uuid not null,
    id uuid not null,
    person_id uuid not null,
    name text not null,
    scopes text[] not null,
    token_hash sha256_hash not null,
    created_at timestamptz not null,
    expires_on date not null,
    last_used_at timestamptz,
    revoked_at timestamptz,
    constraint personal_token_pkey primary key (firm_id, id),
    constraint personal_token_token_hash_key unique (token_hash),
    constraint personal_token_membership_fkey foreign key (firm_id, person_id)
      references membership (firm_id, person_id)
  );
  create index personal_token_person_idx on personal_token (firm_id, person_id);
`;
