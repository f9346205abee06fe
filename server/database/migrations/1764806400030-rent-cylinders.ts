import { ForwardOnlyMigration } from './forward-only-migration.ts';

/** Deposit and daily rate of rented cylinders, dated; the days follow from them. */
export class RentCylinders1764806400030 extends ForwardOnlyMigration {
  readonly name = 'RentCylinders1764806400030';
  readonly statements = [NOUN, TERMS, PROTECTED];
}

/** Adds to the closed list as it stands, whichever migration has widened it before. */
const NOUN = `
  do $$
  declare
    v_nouns text[] := array(
      select distinct (regexp_matches(pg_get_constraintdef(c.oid), '''([A-Za-z]+)''::text', 'g'))[1]
        from pg_constraint c where c.conname = 'journal_record_noun_check'
      union select 'rentalTerms');
  begin
    alter table journal_record drop constraint journal_record_noun_check;
    execute format('alter table journal_record add constraint journal_record_noun_check check (noun in (%s))',
      (select string_agg(quote_literal(n), ', ' order by n) from unnest(v_nouns) n));
  end $$;
`;

const TERMS = `
  -- From a day on. Without a currency it was given back on that day.
  create table rental_terms (
    firm_id uuid not null,
    id uuid not null,
    cylinder_id uuid not null,
    since date not null,
    deposit text,
    daily_rate text,
    currency text,
    constraint rental_terms_cylinder_fkey foreign key (firm_id, cylinder_id) references cylinder (firm_id, id),
    constraint rental_terms_amounts_check check (
      deposit ~ '^[0-9]{1,9}([.][0-9]{1,4})?$' and daily_rate ~ '^[0-9]{1,9}([.][0-9]{1,4})?$'),
    constraint rental_terms_currency_check check (currency ~ '^[A-Z]{3}$'),
    constraint rental_terms_given_back_check check (currency is not null or (deposit is null and daily_rate is null))
  );
  create index rental_terms_cylinder_idx on rental_terms (firm_id, cylinder_id, since);
  alter table rental_terms add constraint rental_terms_pkey primary key (firm_id, id);
`;

const PROTECTED = `
  alter table rental_terms enable row level security, force row level security;
  create policy rental_terms_firm on rental_terms
    using (firm_id = (select current_firm_id()) and (select reader_site_ids()) is null)
    with check (firm_id = (select current_firm_id()) and (select reader_site_ids()) is null);
  create trigger rental_terms_append_only before update or delete or truncate on rental_terms
    for each statement execute function refuse_change();
  create constraint trigger rental_terms_recorded after insert on rental_terms deferrable initially deferred
    for each row execute function demand_register_record('rentalTerms', 'id');
  grant select, insert on rental_terms to tarewright_app, tarewright_jobs;
`;
