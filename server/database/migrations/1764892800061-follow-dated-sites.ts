import { ForwardOnlyMigration } from './forward-only-migration.ts';

/**
 * A unit may move, and it may be told late: what was posted in between names the site before, and keeps it. Who may see
 * it follows the site where the unit stood at that time.
 */
export class FollowDatedSites1764892800061 extends ForwardOnlyMigration {
  readonly name = 'FollowDatedSites1764892800061';
  readonly statements = [FUNCTIONS, ...['entry', 'entry_group'].map(policy)];
}

const FUNCTIONS = `
  -- The first site of a unit has the unit's id; one more means that it has moved.
  create index unit_site_moved_idx on unit_site (firm_id, unit_id) where id <> unit_id;

  -- A reader who is limited to some sites does not see where else a unit stood. The two functions below have to, to say
  -- that it was not there; their owner is no role that the server connects as.
  create policy unit_site_look_up on unit_site for select to current_user
    using (firm_id = (select current_firm_id()));
  create function moved_unit_ids() returns uuid[] language sql stable security definer parallel safe
    set search_path = pg_catalog, public, pg_temp
    as $$ select coalesce(array_agg(distinct s.unit_id), '{}') from unit_site s
      where s.firm_id = current_firm_id() and s.id <> s.unit_id $$;
  create function site_of_unit_at(p_unit_id uuid, p_at timestamptz, p_else uuid) returns uuid
    language sql stable security definer parallel safe
    set search_path = pg_catalog, public, pg_temp
    as $$ select coalesce(
      (select s.site_id from unit_site s where s.firm_id = current_firm_id() and s.unit_id = p_unit_id
        and s.valid_from <= p_at order by s.valid_from desc, s.id desc limit 1),
      (select s.site_id from unit_site s where s.firm_id = current_firm_id() and s.unit_id = p_unit_id
        order by s.valid_from, s.id limit 1),
      p_else) $$;
  revoke execute on function moved_unit_ids(), site_of_unit_at(uuid, timestamptz, uuid) from public;
  grant execute on function moved_unit_ids(), site_of_unit_at(uuid, timestamptz, uuid)
    to tarewright_app, tarewright_jobs, tarewright_backup;
`;

/** Of units that never moved the column says it; looked up are the others alone. */
function policy(table: string): string {
  const rule = `firm_id = (select current_firm_id()) and ((select reader_site_ids()) is null
    or case when unit_id = any ((select moved_unit_ids())::uuid[])
      then site_of_unit_at(unit_id, occurred_at, site_id) else site_id end = any ((select reader_site_ids())::uuid[]))`;
  return `drop policy ${table}_firm on ${table};
    create policy ${table}_firm on ${table} using (${rule}) with check (${rule});`;
}
