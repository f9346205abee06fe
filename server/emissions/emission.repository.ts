import type { EntityManager } from 'typeorm';
import type { AtmosphereKind } from '../../shared/ledger/place.ts';
import { siteThen } from '../units/dated-site.ts';

export interface EmissionRow {
  bookingMonth: string;
  refrigerant: string;
  as: AtmosphereKind;
  siteId: string | null;
  siteName: string | null;
  customerId: string | null;
  customerName: string | null;
  mass: string;
  atLeast: string;
}

/** A query over the log, not a second book: into the atmosphere less out of it, by booking month, how and where. */
const EMISSIONS = `select a.booking_month as "bookingMonth", a.refrigerant, a.as_kind as "as", a.site_id as "siteId",
    s.name as "siteName", k.id as "customerId", k.name as "customerName", a.mass::text, a.at_least::text as "atLeast"
  from (
    select firm_id, booking_month, refrigerant, as_kind, site_id, sum(mass) as mass,
        coalesce(sum(mass) filter (where at_least), 0) as at_least
      from (
        select firm_id, booking_month, refrigerant, at_least, ${siteThen('o')} as site_id, to_as as as_kind, mass_micrograms as mass
          from entry o where to_place = 'atmosphere'
        union all
        select firm_id, booking_month, refrigerant, at_least, ${siteThen('b')}, from_as, -mass_micrograms
          from entry b where from_place = 'atmosphere') e
      where ($1::text is null or booking_month >= $1) and ($2::text is null or booking_month <= $2)
      group by 1, 2, 3, 4, 5) a
  left join site s on s.firm_id = a.firm_id and s.id = a.site_id
  left join customer k on k.firm_id = s.firm_id and k.id = s.customer_id
  where a.mass <> 0 or a.at_least <> 0
  order by a.booking_month, a.refrigerant, a.as_kind, s.name, a.site_id`;

export function readEmissions(
  manager: EntityManager,
  { from, to }: { from?: string | undefined; to?: string | undefined },
): Promise<EmissionRow[]> {
  return manager.query(EMISSIONS, [from ?? null, to ?? null]);
}
