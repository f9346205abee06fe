import { ForwardOnlyMigration } from './forward-only-migration.ts';

/**
 * A proof package is made as the other exports are, and its file is a zip. Which files of a folder are still wanted is
 * asked of the rows by each server for its own folder (`server/exports/export-worker.ts`), so that none is forgotten.
 */
export class ExportProofPackages1764892800090 extends ForwardOnlyMigration {
  readonly name = 'ExportProofPackages1764892800090';
  readonly statements = [FORMATS, TEND];
}

const FORMATS = `
  alter table export drop constraint export_format_check;
  alter table export add constraint export_format_check check (format in ('csv', 'xlsx', 'pdf', 'zip'));
`;

const TEND = `
  create or replace function exports_to_tend(p_untouched_since timestamptz, p_now timestamptz)
    returns table (firm_id uuid, id uuid, what_to_do text) language sql stable security definer
    set search_path = pg_catalog, public, pg_temp as $$
      select e.firm_id, e.id, 'takeOver' from export e
        where e.state in ('queued', 'running') and e.touched_at < p_untouched_since $$;
`;
