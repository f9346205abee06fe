import { ForwardOnlyMigration } from './forward-only-migration.ts';

/**
 * Seals, signing keys and exports are records of the chain like any other, and stand nowhere else: there is no second
 * place that could say otherwise. What is kept beside is who is still to be mailed a sealed head.
 */
export class Seals1764633600001 extends ForwardOnlyMigration {
  readonly name = 'Seals1764633600001';
  readonly statements = [RECORD_TYPES, MAIL];
}

const RECORD_TYPES = `
  alter table journal_record drop constraint journal_record_type_check;
  alter table journal_record add constraint journal_record_type_check
    check (type in ('group', 'entry', 'register', 'seal', 'sealKey', 'export'));
  create index journal_record_seal_idx on journal_record (firm_id, type, sequence) where type in ('seal', 'sealKey');
`;

/** A row for each owner, made with the seal and worked off after the commit. Two servers do not mail the same twice. */
const MAIL = `
  create table seal_mail (
    firm_id uuid not null,
    sequence bigint not null,
    person_id uuid not null,
    due_since timestamptz not null,
    -- Whoever mails it has until then; after a crash another takes over.
    claimed_until timestamptz,
    sent_at timestamptz,
    constraint seal_mail_pkey primary key (firm_id, sequence, person_id),
    constraint seal_mail_record_fkey foreign key (firm_id, sequence) references journal_record (firm_id, sequence),
    constraint seal_mail_membership_fkey foreign key (firm_id, person_id) references membership (firm_id, person_id)
  );
  create index seal_mail_due_idx on seal_mail (firm_id, due_since) where sent_at is null;
  alter table seal_mail enable row level security, force row level security;
  create policy seal_mail_firm on seal_mail
    using (firm_id = (select current_firm_id()) and (select reader_site_ids()) is null)
    with check (firm_id = (select current_firm_id()) and (select reader_site_ids()) is null);
  grant select, insert, update on seal_mail to tarewright_app, tarewright_jobs;
`;
