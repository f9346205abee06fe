import { ForwardOnlyMigration } from './forward-only-migration.ts';

/**
 * What was asked to be taken out, and how far it is. That it was taken out is a record of the chain: a row is not done
 * without it. The queue itself is pg-boss's, in a schema of its own (`server/exports/export-queue.ts`).
 */
export class KeepExports1764806400020 extends ForwardOnlyMigration {
  readonly name = 'KeepExports1764806400020';
  readonly statements = [EXPORT, TEND];
}

const EXPORT = `
  create table export (
    firm_id uuid not null,
    id uuid not null,
    what text not null,
    format text not null,
    filters jsonb not null,
    locale text not null,
    requested_by uuid not null,
    requested_at timestamptz not null,
    state text not null default 'queued',
    attempts integer not null default 0,
    rows_done bigint not null default 0,
    rows_total bigint,
    -- Who works on it says so every second; a row that nobody has touched for long is taken over.
    touched_at timestamptz not null,
    finished_at timestamptz,
    expires_at timestamptz,
    file_name text,
    size_bytes bigint,
    sha256 bytea,
    record_sequence bigint,
    problem text,
    constraint export_pkey primary key (firm_id, id),
    constraint export_requested_by_fkey foreign key (firm_id, requested_by) references membership (firm_id, person_id),
    constraint export_record_fkey foreign key (firm_id, record_sequence) references journal_record (firm_id, sequence),
    constraint export_format_check check (format in ('csv', 'xlsx', 'pdf')),
    constraint export_state_check check (state in ('queued', 'running', 'done', 'cancelled', 'failed')),
    constraint export_done_check check ((state = 'done') = (record_sequence is not null)),
    constraint export_file_check check (state <> 'done'
      or (file_name is not null and size_bytes >= 0 and length(sha256) = 32 and expires_at is not null)),
    constraint export_failed_check check ((state = 'failed') = (problem is not null))
  );
  create index export_requested_at_idx on export (firm_id, requested_at, id);
  create index export_unfinished_idx on export (touched_at) where state in ('queued', 'running');
  create index export_expires_at_idx on export (expires_at) where state = 'done';
  alter table export enable row level security, force row level security;
  create policy export_firm on export
    using (firm_id = (select current_firm_id())
      and ((select reader_site_ids()) is null or requested_by = (select current_person_id())))
    with check (firm_id = (select current_firm_id())
      and ((select reader_site_ids()) is null or requested_by = (select current_person_id())));
  create policy export_look_up on export for select to current_user using (true);
  grant select, insert, update on export to tarewright_app, tarewright_jobs;
`;

/** Before a firm is known, for the jobs alone, ids only: what nobody works on any more, and whose file is to go. */
const TEND = `
  create function exports_to_tend(p_untouched_since timestamptz, p_now timestamptz)
    returns table (firm_id uuid, id uuid, what_to_do text) language sql stable security definer
    set search_path = pg_catalog, public, pg_temp as $$
      select e.firm_id, e.id, 'takeOver' from export e
        where e.state in ('queued', 'running') and e.touched_at < p_untouched_since
      union all
      select e.firm_id, e.id, 'removeFile' from export e
        where e.state = 'done' and e.expires_at <= p_now and e.expires_at > p_now - interval '7 days' $$;
  revoke execute on function exports_to_tend(timestamptz, timestamptz) from public;
  grant execute on function exports_to_tend(timestamptz, timestamptz) to tarewright_jobs;
`;
