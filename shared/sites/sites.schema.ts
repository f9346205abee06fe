import { z } from 'zod';
import { id, pageOf, pageQuery, searchText, shortText } from '../lists/list.schema.ts';
import { jurisdiction } from '../session/session.schema.ts';

/** An IANA time zone that this runtime knows. */
export const timeZone = z
  .string()
  .max(60)
  .refine((name) => {
    try {
      new Intl.DateTimeFormat('en', { timeZone: name });
      return true;
    } catch {
      return false;
    }
  }, 'unknownTimeZone');

export const createSiteRequest = z.strictObject({
  id,
  customerId: id,
  name: shortText(160),
  addressLines: z.array(shortText(120)).min(1).max(5),
  timeZone,
  /** Above sea level; sets the local atmospheric pressure. */
  altitudeM: z.number().min(-430).max(5000),
  jurisdiction,
});
export const updateSiteRequest = createSiteRequest.omit({ id: true, customerId: true }).partial();
export const site = z.strictObject({
  id,
  customerId: id,
  customerName: z.string(),
  name: z.string(),
  addressLines: z.array(z.string()),
  timeZone: z.string(),
  altitudeM: z.number(),
  jurisdiction,
  unitCount: z.int(),
  version: z.int(),
});
export type Site = z.output<typeof site>;

export const SITE_SORTS = ['name', '-name'] as const;
export const siteListQuery = pageQuery.extend({
  sort: z.enum(SITE_SORTS).default('name'),
  customerId: id.optional(),
  /** Over name, address and the customer's name. */
  search: searchText.optional(),
});
export type SiteListQuery = z.output<typeof siteListQuery>;
export const sitePage = pageOf(site);
