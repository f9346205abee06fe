import { Conditions } from '../../lists/list-query.ts';
import { instant, orderOf, type TableOf, typed } from './table.ts';

export const people: TableOf<'people'> = ({ role, active }) => {
  const conditions = new Conditions().andIf('$ = any (m.roles)', role);
  if (active !== undefined) conditions.and(active === 'true' ? 'm.active' : 'not m.active');
  return {
    columns: [
      typed('name', 'p.name'),
      typed('email', 'p.email'),
      ['roles', `array_to_string(m.roles, '; ')`],
      ['siteIds', `array_to_string(m.site_ids, '; ')`],
      ['active', 'm.active', 'boolean'],
      typed('van', 'm.van'),
      instant('lastSignInAt', 's.signed_in_at'),
      ['personId', 'm.person_id'],
    ],
    from: `membership m join person p on p.id = m.person_id
      left join last_sign_in s on s.firm_id = m.firm_id and s.person_id = m.person_id`,
    conditions,
    order: 'p.name, m.person_id',
  };
};

export const parties: TableOf<'parties'> = ({ sort, kind, search }) => ({
  columns: [['kind', 'p.kind'], typed('name', 'p.name'), typed('note', 'p.note'), ['partyId', 'p.id']],
  from: 'party p',
  conditions: new Conditions().andIf('p.kind = $', kind).search('p.name', search),
  order: orderOf(sort, ['p.name', 'p.id']),
});

export const customers: TableOf<'customers'> = ({ sort, search }) => ({
  columns: [
    typed('name', 'c.name'),
    typed('email', 'c.email'),
    typed('phone', 'c.phone'),
    typed('note', 'c.note'),
    ['sites', '(select count(*) from site s where s.firm_id = c.firm_id and s.customer_id = c.id)', 'number'],
    ['customerId', 'c.id'],
  ],
  from: 'customer c',
  conditions: new Conditions().search('c.name', search),
  order: orderOf(sort, ['c.name', 'c.id']),
});

export const sites: TableOf<'sites'> = ({ sort, customerId, search }) => ({
  columns: [
    typed('name', 's.name'),
    typed('customer', 'c.name'),
    typed('address', `array_to_string(s.address_lines, ', ')`),
    ['timeZone', 's.time_zone'],
    ['altitudeM', 's.altitude_m', 'number'],
    ['jurisdiction', 's.jurisdiction'],
    ['units', '(select count(*) from unit u where u.firm_id = s.firm_id and u.site_id = s.id)', 'number'],
    ['siteId', 's.id'],
    ['customerId', 's.customer_id'],
  ],
  from: 'site s join customer c on c.firm_id = s.firm_id and c.id = s.customer_id',
  conditions: new Conditions()
    .andIf('s.customer_id = $', customerId)
    .search(`concat_ws(' ', s.name, array_to_string(s.address_lines, ' '), c.name)`, search),
  order: orderOf(sort, ['s.name', 's.id']),
});
