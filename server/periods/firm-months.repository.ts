import type { EntityManager } from 'typeorm';
import type { Jurisdiction } from '../../shared/periods/currency.ts';
import type { GwpSet } from '../../shared/reference/gwp.ts';

export interface FirmMonths {
  name: string;
  timeZone: string;
  jurisdiction: Jurisdiction;
  gwpSet: GwpSet;
  /** Earlier ones are closed; null: none is. */
  firstOpenMonth: string | null;
  /** With an entry; null: there is none. */
  firstMonth: string | null;
  sequence: number;
}

/** The firm's clock and how far its books go. Without a head (a reader of some sites) no month is known. */
export async function readFirmMonths(manager: EntityManager): Promise<FirmMonths> {
  const [row] = await manager.query<(Omit<FirmMonths, 'sequence'> & { sequence: string | null })[]>(
    `select f.name, f.time_zone as "timeZone", f.jurisdiction, f.gwp_set as "gwpSet",
        h.first_open_month as "firstOpenMonth", h.sequence::text,
        (select min(m.month) from month_sum m where m.firm_id = f.id) as "firstMonth"
      from firm f left join firm_head h on h.firm_id = f.id where f.id = current_firm_id()`,
  );
  if (!row) throw new Error('a firm is in scope');
  return { ...row, sequence: Number(row.sequence ?? 0) };
}
