import type { EntityManager } from 'typeorm';
import type { Settlement } from '../../shared/ledger/month-close.ts';
import { type AtmosphereKind, type PlaceKind, toPlace } from '../../shared/ledger/place.ts';
import { SettlementEntity } from './settlement.entity.ts';

export type SettlementRow = SettlementEntity;

/** A settlement as the pure function reads it, with its own id. */
export interface StandingSettlement extends Settlement {
  readonly id: string;
}

interface Row {
  id: string;
  judgedGroupId: string;
  judgedPlace: 'cylinder' | 'unit' | 'reclaimer';
  judgedPlaceId: string;
  difference: PlaceKind;
  settledTo: PlaceKind;
  settledToId: string | null;
  settledToAs: AtmosphereKind | null;
  refrigerant: string;
  mass: string;
}

const FIELDS = `s.id, s.judged_group_id as "judgedGroupId", s.judged_place as "judgedPlace",
    s.judged_place_id as "judgedPlaceId", s.difference, s.settled_to as "settledTo", s.settled_to_id as "settledToId",
    s.settled_to_as as "settledToAs", s.refrigerant`;

/** What was settled and not undone or reversed since, in the order in which it was settled. */
const STANDING = `select ${FIELDS}, (s.mass_micrograms - coalesce((select sum(u.mass_micrograms) from settlement_undo u
      where u.firm_id = s.firm_id and u.settlement_id = s.id), 0))::text as mass
  from settlement s
  join entry e on e.firm_id = s.firm_id and e.id = s.entry_id
  where not exists (select from entry_group r where r.firm_id = e.firm_id and r.reverses_group_id = e.group_id)`;

export function settlementRepository(manager: EntityManager) {
  return {
    async insert(row: SettlementRow): Promise<void> {
      await manager.getRepository(SettlementEntity).insert(row);
    },
    async massOf(id: string): Promise<bigint> {
      return (await manager.getRepository(SettlementEntity).findOneByOrFail({ id })).massMicrograms;
    },
    /**
     * Of differences that were judged in these cylinders and units, or in a reclaimer for the group that is being
     * reversed. Not those that the reversed group made itself: they go back whole with it.
     */
    async standingIn(placeIds: readonly string[], reversedGroupId: string | null): Promise<StandingSettlement[]> {
      const rows = await manager.query<Row[]>(
        `${STANDING} and e.group_id is distinct from $2
          and ((s.judged_place <> 'reclaimer' and s.judged_place_id = any ($1::uuid[]))
            or (s.judged_place = 'reclaimer' and s.judged_group_id = $2)) order by e.sequence`,
        [placeIds, reversedGroupId],
      );
      return rows.map(settlementOf).filter(({ massMicrograms }) => massMicrograms !== 0n);
    },
    /** Settlements that a group made, each with the mass of it that was taken back before. */
    async undoneOf(groupId: string): Promise<StandingSettlement[]> {
      const rows = await manager.query<Row[]>(
        `select ${FIELDS}, coalesce((select sum(u.mass_micrograms) from settlement_undo u
              where u.firm_id = s.firm_id and u.settlement_id = s.id), 0)::text as mass
          from settlement s
          join entry e on e.firm_id = s.firm_id and e.id = s.entry_id
          where e.group_id = $1 order by e.sequence`,
        [groupId],
      );
      return rows.map(settlementOf).filter(({ massMicrograms }) => massMicrograms !== 0n);
    },
    /** The group is being posted in the same transaction: the reference to it is checked at commit. */
    async undo(settlementId: string, groupId: string, massMicrograms: bigint): Promise<void> {
      await manager.query(
        `insert into settlement_undo (firm_id, settlement_id, group_id, mass_micrograms)
          values (current_firm_id(), $1, $2, $3)`,
        [settlementId, groupId, massMicrograms.toString()],
      );
    },
  };
}

function settlementOf(row: Row): StandingSettlement {
  return {
    id: row.id,
    groupId: row.judgedGroupId,
    judgedPlace: toPlace({ place: row.judgedPlace, id: row.judgedPlaceId }),
    difference: toPlace({ place: row.difference }),
    settledTo: toPlace({ place: row.settledTo, id: row.settledToId, as: row.settledToAs }),
    refrigerant: row.refrigerant,
    massMicrograms: BigInt(row.mass),
  };
}
