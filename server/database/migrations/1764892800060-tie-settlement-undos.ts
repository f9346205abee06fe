import { ForwardOnlyMigration } from './forward-only-migration.ts';

/**
 * What was taken back of a settlement is what the log says was: entries of the group that is named, against the settled
 * entry, and never more than was settled.
 */
export class TieSettlementUndos1764892800060 extends ForwardOnlyMigration {
  readonly name = 'TieSettlementUndos1764892800060';
  readonly statements = [CHECK];
}

const CHECK = `
  -- Entries of the judge against a settled one run from where it was settled to back into its difference, and correct
  -- the group whose difference that was. Several settlements of one difference share them: together no more than they are.
  create function demand_settlement_undo() returns trigger language plpgsql security definer
    set search_path = pg_catalog, public, pg_temp set enable_seqscan = off as $$
  declare
    v_settled settlement;
    v_undone numeric;
    v_here numeric;
    v_entered numeric;
  begin
    select s.* into v_settled from settlement s where s.firm_id = new.firm_id and s.id = new.settlement_id;
    if not found then
      perform refuse('TW024', 'settlement_undo_of_entry',
        jsonb_build_object('settlementId', new.settlement_id, 'groupId', new.group_id));
    end if;

    select coalesce(sum(u.mass_micrograms), 0) into v_undone from settlement_undo u
      where u.firm_id = new.firm_id and u.settlement_id = new.settlement_id;
    if sign(new.mass_micrograms) <> sign(v_settled.mass_micrograms) or abs(v_undone) > abs(v_settled.mass_micrograms) then
      perform refuse('TW023', 'settlement_undo_within', jsonb_build_object('settlementId', new.settlement_id,
        'groupId', new.group_id, 'settledMicrograms', v_settled.mass_micrograms::text,
        'undoneMicrograms', v_undone::text));
    end if;

    select coalesce(sum(abs(u.mass_micrograms)), 0) into v_here
      from settlement_undo u
      join settlement s on s.firm_id = u.firm_id and s.id = u.settlement_id
      where u.firm_id = new.firm_id and u.group_id = new.group_id
        and s.judged_group_id = v_settled.judged_group_id and s.difference = v_settled.difference
        and s.settled_to = v_settled.settled_to and s.settled_to_id is not distinct from v_settled.settled_to_id
        and s.settled_to_as is not distinct from v_settled.settled_to_as and s.refrigerant = v_settled.refrigerant
        and sign(s.mass_micrograms) = sign(v_settled.mass_micrograms);
    select coalesce(sum(e.mass_micrograms), 0) into v_entered
      from entry e
      where e.firm_id = new.firm_id and e.group_id = new.group_id and e.added_by_server
        and e.corrects_group_id = v_settled.judged_group_id and e.refrigerant = v_settled.refrigerant
        and case when v_settled.mass_micrograms > 0
          then e.from_place = v_settled.settled_to and e.from_id is not distinct from v_settled.settled_to_id
            and e.from_as is not distinct from v_settled.settled_to_as and e.to_place = v_settled.difference
          else e.to_place = v_settled.settled_to and e.to_id is not distinct from v_settled.settled_to_id
            and e.to_as is not distinct from v_settled.settled_to_as and e.from_place = v_settled.difference
        end;
    if v_here > v_entered then
      perform refuse('TW024', 'settlement_undo_of_entry', jsonb_build_object('settlementId', new.settlement_id,
        'groupId', new.group_id, 'undoneMicrograms', v_here::text, 'enteredMicrograms', v_entered::text));
    end if;
    return null;
  end $$;
  create constraint trigger settlement_undo_of_entry after insert on settlement_undo deferrable initially deferred
    for each row execute function demand_settlement_undo();
`;
