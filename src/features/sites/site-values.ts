import type { z } from 'zod';
import type { createCustomerRequest } from '../../../shared/customers/customers.schema.ts';
import type { Preferences, Session } from '../../../shared/session/session.schema.ts';
import type { createSiteRequest, Site } from '../../../shared/sites/sites.schema.ts';
import { emptyQuantity, type QuantityDraft, quantityOf, readQuantity } from '../../ui/quantity-draft.ts';

/** A customer who is not on record yet is made together with the site. */
export const NEW_CUSTOMER = 'new';

export interface SiteValues {
  id: string;
  newCustomerId: string;
  customerId: string;
  customerName: string;
  customerEmail: string;
  customerPhone: string;
  name: string;
  address: string;
  timeZone: string;
  altitude: QuantityDraft<'length'>;
  jurisdiction: string;
}

type Reads = Pick<Preferences, 'locale' | 'length'>;

export function emptySite(
  preferences: Reads,
  {
    newId,
    firm,
    customerId,
  }: { newId: () => string; firm: Pick<Session['firm'], 'timeZone' | 'jurisdiction'>; customerId: string },
): SiteValues {
  return {
    id: newId(),
    newCustomerId: newId(),
    customerId,
    customerName: '',
    customerEmail: '',
    customerPhone: '',
    name: '',
    address: '',
    timeZone: firm.timeZone,
    altitude: emptyQuantity(preferences.length),
    jurisdiction: firm.jurisdiction,
  };
}

export function siteValues(site: Site, { locale, length }: Reads): SiteValues {
  return {
    id: site.id,
    newCustomerId: '',
    customerId: site.customerId,
    customerName: '',
    customerEmail: '',
    customerPhone: '',
    name: site.name,
    address: site.addressLines.join('\n'),
    timeZone: site.timeZone,
    altitude: quantityOf('length', site.altitudeM, length, locale),
    jurisdiction: site.jurisdiction,
  };
}

/** An empty field is missing: the schema then says that, and not which form it should have. */
const given = (text: string): string => (text.trim() === '' ? (undefined as unknown as string) : text);

function addressLines(address: string): string[] {
  const lines = address
    .split('\n')
    .map((line) => line.trim())
    .filter(Boolean);
  return lines.length > 0 ? lines : (undefined as unknown as string[]);
}

/** The customer that has to be made first, or null. */
export function customerRequest(values: SiteValues): z.input<typeof createCustomerRequest> | null {
  if (values.customerId !== NEW_CUSTOMER) return null;
  return {
    id: values.newCustomerId,
    name: given(values.customerName),
    email: values.customerEmail.trim() || null,
    phone: values.customerPhone.trim() || null,
  };
}

export function siteRequest(
  values: SiteValues,
  locale: string,
): { request: z.input<typeof createSiteRequest>; unreadable: string[] } {
  const altitude = readQuantity('length', values.altitude, { locale, allowNegative: true });
  return {
    request: {
      id: values.id,
      customerId: values.customerId === NEW_CUSTOMER ? values.newCustomerId : given(values.customerId),
      name: given(values.name),
      addressLines: addressLines(values.address),
      timeZone: values.timeZone,
      altitudeM: altitude.is === 'read' ? Number(altitude.base.toPrecision(10)) : (undefined as unknown as number),
      jurisdiction: values.jurisdiction as Session['firm']['jurisdiction'],
    },
    unreadable: altitude.is === 'refused' || altitude.is === 'ambiguous' ? ['altitude'] : [],
  };
}

export const SITE_PLACES = [
  ['/customer/name', 'customerName'],
  ['/customer/email', 'customerEmail'],
  ['/customer/phone', 'customerPhone'],
  ['/customerId', 'customerId'],
  ['/name', 'name'],
  ['/addressLines', 'address'],
  ['/timeZone', 'timeZone'],
  ['/altitudeM', 'altitude'],
  ['/jurisdiction', 'jurisdiction'],
] as const;
