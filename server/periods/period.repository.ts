import type { EntityManager } from 'typeorm';
import { CarriedItemEntity } from './carried-item.entity.ts';
import type { PeriodEntity } from './period.entity.ts';

export type ClosedPeriod = Pick<PeriodEntity, 'id' | 'month' | 'closedAt' | 'recordSequence'> & {
  closedByName: string;
};
export type CarriedItemRow = CarriedItemEntity;

/** What was chained of a period when it was signed off. */
export interface SignedOff {
  sumsHash: string;
  /** Beside the chain, which holds its hash. */
  note: string | null;
  carried: { key: string; label: string; carriedBy: string; carriedItemId: string }[];
}

export interface SettledSumRow {
  id: string;
  groupId: string;
  judgedGroupId: string;
  label: string;
  refrigerant: string;
  left: string;
  toPlace: string;
  toAs: string | null;
  toLabel: string | null;
  byName: string;
  at: Date;
  reason: string | null;
}

const SELECT = `select p.id, p.month, p.closed_at as "closedAt", p.record_sequence::integer as "recordSequence",
    coalesce(n.name, '') as "closedByName"
  from period p left join person n on n.id = p.closed_by`;

export function periodRepository(manager: EntityManager) {
  return {
    list: (): Promise<ClosedPeriod[]> => manager.query(`${SELECT} order by p.month desc`),
    async find(month: string): Promise<ClosedPeriod | null> {
      const [row] = await manager.query<ClosedPeriod[]>(`${SELECT} where p.month = $1`, [month]);
      return row ?? null;
    },
    async findById(id: string): Promise<ClosedPeriod | null> {
      const [row] = await manager.query<ClosedPeriod[]>(`${SELECT} where p.id = $1`, [id]);
      return row ?? null;
    },
    /** What the record of a closed period says. */
    async readSignedOff(periodId: string): Promise<SignedOff | null> {
      const [row] = await manager.query<{ content: string; note: string | null }[]>(
        `select j.content, (select t.content from personal_text t
            where t.firm_id = j.firm_id and t.record_id = j.record_id and t.field = 'note') as note
          from journal_record j where j.noun = 'period' and j.subject_id = $1 and j.version = 1`,
        [periodId],
      );
      if (!row) return null;
      const { after } = JSON.parse(row.content) as { after: Pick<SignedOff, 'carried' | 'sumsHash'> };
      return { note: row.note, carried: after.carried, sumsHash: after.sumsHash };
    },
    async reasonsOf(carriedItemIds: readonly string[]): Promise<Map<string, string>> {
      const rows = await manager.query<{ id: string; reason: string }[]>(
        'select id, reason from carried_item where id = any ($1::uuid[])',
        [carriedItemIds],
      );
      return new Map(rows.map(({ id, reason }) => [id, reason]));
    },
    async close(recordId: string): Promise<string> {
      const [row] = await manager.query<{ next: string }[]>('select close_month($1) as next', [recordId]);
      return String(row?.next);
    },
    entryCounts: (): Promise<{ month: string; entries: number }[]> =>
      manager.query(
        'select month, sum(entry_count)::integer as entries from month_sum group by month order by month desc',
      ),
    /** The sums of a month as text, in one order: what the sign-off speaks of. */
    async readSums(
      month: string,
    ): Promise<{ refrigerant: string; from: string; to: string; massMicrograms: string }[]> {
      return manager.query(
        `select refrigerant, from_kind as "from", to_kind as "to", mass_micrograms::text as "massMicrograms"
          from month_sum where month = $1 order by refrigerant, from_kind, to_kind`,
        [month],
      );
    },
    async insertCarried(row: CarriedItemRow): Promise<void> {
      await manager.getRepository(CarriedItemEntity).insert(row);
    },
    async nameOf(personIds: readonly string[]): Promise<Map<string, string>> {
      const rows = await manager.query<{ id: string; name: string }[]>(
        `select m.person_id as id, p.name from membership m join person p on p.id = m.person_id
          where m.person_id = any ($1::uuid[])`,
        [personIds],
      );
      return new Map(rows.map(({ id, name }) => [id, name]));
    },
    async isActiveMember(personId: string): Promise<boolean> {
      const rows = await manager.query<unknown[]>('select from membership where person_id = $1 and active', [personId]);
      return rows.length > 0;
    },
    async isSupplier(partyId: string): Promise<boolean> {
      const rows = await manager.query<unknown[]>(`select from party where id = $1 and kind = 'supplier'`, [partyId]);
      return rows.length > 0;
    },
    /** What month close made of differences in a month, and stands. */
    settledIn: (month: string): Promise<SettledSumRow[]> =>
      manager.query(
        `select s.id, e.group_id as "groupId", s.judged_group_id as "judgedGroupId",
            coalesce(c.tag, u.tag, y.name, '') as label, s.refrigerant,
            (s.mass_micrograms - coalesce((select sum(x.mass_micrograms) from settlement_undo x
              where x.firm_id = s.firm_id and x.settlement_id = s.id), 0))::text as left,
            s.settled_to as "toPlace", s.settled_to_as as "toAs", z.name as "toLabel", coalesce(p.name, '') as "byName",
            e.recorded_at as at, g.reason
          from settlement s
          join entry e on e.firm_id = s.firm_id and e.id = s.entry_id
          join entry_group g on g.firm_id = e.firm_id and g.id = e.group_id
          left join person p on p.id = e.recorded_by
          left join cylinder c on c.firm_id = s.firm_id and c.id = s.judged_place_id
          left join unit u on u.firm_id = s.firm_id and u.id = s.judged_place_id
          left join party y on y.firm_id = s.firm_id and y.id = s.judged_place_id
          left join party z on z.firm_id = s.firm_id and z.id = s.settled_to_id
          where e.booking_month = $1
            and not exists (select from entry_group r where r.firm_id = g.firm_id and r.reverses_group_id = g.id)
          order by e.sequence`,
        [month],
      ),
  };
}
