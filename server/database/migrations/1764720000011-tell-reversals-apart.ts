import { ForwardOnlyMigration } from './forward-only-migration.ts';

/**
 * A reversed purchase is no return to the supplier, and a reversed charge is no recovery: the books by month say how
 * much of each sum is reversals, so that what was taken back can be taken off the other way.
 */
export class TellReversalsApart1764720000011 extends ForwardOnlyMigration {
  readonly name = 'TellReversalsApart1764720000011';
  readonly statements = [COLUMN, ADD_TO_BOOKS, SO_FAR];
}

const COLUMN = `
  alter table month_sum add column reversal_micrograms bigint not null default 0;
  alter table month_sum add constraint month_sum_reversal_check
    check (reversal_micrograms between 0 and mass_micrograms);
`;

const ADD_TO_BOOKS = `
  create or replace function add_to_books(p_head firm_head, p_changes balance_change[]) returns void language plpgsql as $$
  begin
    -- The new balance and not the change, which the check on cylinders would refuse before it is added. The head is locked.
    insert into balance (firm_id, place_key, refrigerant, place, place_id, place_as, mass_micrograms)
      select p_head.firm_id, c.place_key, c.refrigerant, c.place, c.place_id, c.place_as,
        c.before_micrograms + c.change_micrograms
      from unnest(p_changes) c
      on conflict (firm_id, place_key, refrigerant)
        do update set mass_micrograms = excluded.mass_micrograms;

    insert into month_sum as m (firm_id, month, refrigerant, from_kind, to_kind, mass_micrograms, entry_count,
        reversal_micrograms)
      select p_head.firm_id, e.booking_month, e.refrigerant, e.from_place || coalesce(':' || e.from_as, ''),
        e.to_place || coalesce(':' || e.to_as, ''), sum(e.mass_micrograms)::bigint, count(*),
        coalesce(sum(e.mass_micrograms) filter (where e.reverses_entry_id is not null), 0)::bigint
      from entry e where e.firm_id = p_head.firm_id and e.sequence > p_head.sequence
      group by 2, 3, 4, 5 order by 2, 3, 4, 5
      on conflict (firm_id, month, refrigerant, from_kind, to_kind)
        do update set mass_micrograms = m.mass_micrograms + excluded.mass_micrograms,
          entry_count = m.entry_count + excluded.entry_count,
          reversal_micrograms = m.reversal_micrograms + excluded.reversal_micrograms;
  end $$;
`;

/** Firm by firm: the row-level security of the log holds for the owner of the database too. */
const SO_FAR = `
  do $$
  declare
    v_firm uuid;
  begin
    for v_firm in select f.id from firm f order by f.id loop
      perform set_config('app.firm_id', v_firm::text, true);
      update month_sum m set reversal_micrograms = r.mass
        from (select e.booking_month, e.refrigerant, e.from_place || coalesce(':' || e.from_as, '') as from_kind,
            e.to_place || coalesce(':' || e.to_as, '') as to_kind, sum(e.mass_micrograms)::bigint as mass
          from entry e where e.firm_id = v_firm and e.reverses_entry_id is not null group by 1, 2, 3, 4) r
        where m.firm_id = v_firm and m.month = r.booking_month and m.refrigerant = r.refrigerant
          and m.from_kind = r.from_kind and m.to_kind = r.to_kind;
    end loop;
    perform set_config('app.firm_id', '', true);
  end $$;
`;
