import { Conditions } from '../../lists/list-query.ts';
import { grams, orderOf, type TableOf, typed } from './table.ts';

const serials = `(select string_agg(concat_ws(' ', s ->> 'part', s ->> 'model', s ->> 'serial'), '; ')
  from jsonb_array_elements(u.serials::jsonb) s)`;

export const units: TableOf<'units'> = ({ sort, siteId, customerId, refrigerant, search }) => ({
  columns: [
    typed('tag', 'u.tag'),
    typed('name', 'u.name'),
    typed('site', 's.name'),
    typed('customer', 'c.name'),
    ['applianceKind', 'u.appliance_kind'],
    ['subsector', 'u.subsector'],
    ['refrigerant', 'u.refrigerant'],
    grams('fullChargeG', 'fc.mass_micrograms'),
    ['fullChargeValue', 'fc.typed_value'],
    ['fullChargeUnit', 'fc.typed_unit'],
    ['fullChargeMethod', 'fc.method'],
    grams('bookG', 'b.mass'),
    ['bookKnown', 'coalesce(ps.known, false)', 'boolean'],
    typed('serials', serials),
    ['nameplateReadable', 'u.nameplate_readable', 'boolean'],
    ['designPressureHighKPaGauge', 'u.design_pressure_high_kpa_gauge', 'number'],
    ['designPressureLowKPaGauge', 'u.design_pressure_low_kpa_gauge', 'number'],
    ['installedOn', 'u.installed_on', 'day'],
    ['unitId', 'u.id'],
    ['siteId', 'u.site_id'],
    ['customerId', 'c.id'],
  ],
  from: `unit u
    join site s on s.firm_id = u.firm_id and s.id = u.site_id
    join customer c on c.firm_id = s.firm_id and c.id = s.customer_id
    left join lateral (select * from unit_full_charge f where f.firm_id = u.firm_id and f.unit_id = u.id
      and f.refrigerant = u.refrigerant order by f.valid_from desc, f.id desc limit 1) fc on true
    left join lateral (select sum(mass_micrograms) as mass from balance where firm_id = u.firm_id
      and place = 'unit' and place_id = u.id) b on true
    left join place_state ps on ps.firm_id = u.firm_id and ps.place = 'unit' and ps.place_id = u.id`,
  countFrom: `unit u
    join site s on s.firm_id = u.firm_id and s.id = u.site_id
    join customer c on c.firm_id = s.firm_id and c.id = s.customer_id`,
  conditions: new Conditions()
    .andIf('u.site_id = $', siteId)
    .andIf('c.id = $', customerId)
    .andIf('u.refrigerant = $', refrigerant)
    .search(
      `concat_ws(' ', u.tag, u.name, u.serials::text, s.name, array_to_string(s.address_lines, ' '), c.name)`,
      search,
    ),
  order: orderOf(sort, [sort.endsWith('tag') ? 'u.tag' : 'u.name', 'u.id']),
});

export const cylinders: TableOf<'cylinders'> = ({ sort, heldBy, kind, refrigerant, search }) => ({
  columns: [
    typed('tag', 'c.tag'),
    ['kind', 'c.kind'],
    ['refrigerant', 'c.refrigerant'],
    ['contentState', 'c.content_state'],
    grams('bookG', 'coalesce(b.mass, 0)'),
    ['inIt', 'b.names'],
    grams('tareG', 't.mass_micrograms'),
    grams('waterCapacityG', 'c.water_capacity_micrograms'),
    grams('stampedLimitG', 'c.stamped_limit_micrograms'),
    grams('limitG', 'cylinder_limit(c)'),
    ['servicePressureKPaGauge', 'c.service_pressure_kpa_gauge', 'number'],
    ['retestDue', 'c.retest_due', 'day'],
    typed('heldBy', 'h.name'),
    ['ownerKind', 'c.owner_kind'],
    typed('owner', 'coalesce(y.name, m.name)'),
    typed('batch', 'c.batch'),
    ['cylinderId', 'c.id'],
  ],
  from: `cylinder c
    left join person h on h.id = c.held_by
    left join party y on y.firm_id = c.firm_id and y.id = c.owner_party_id
    left join customer m on m.firm_id = c.firm_id and m.id = c.owner_customer_id
    left join lateral (select * from cylinder_tare ct where ct.firm_id = c.firm_id and ct.cylinder_id = c.id
      order by ct.valid_from desc, ct.id desc limit 1) t on true
    left join lateral (select sum(mass_micrograms) as mass, string_agg(refrigerant, '; ' order by refrigerant) as names
      from balance where firm_id = c.firm_id and place = 'cylinder' and place_id = c.id and mass_micrograms <> 0) b on true`,
  countFrom: 'cylinder c',
  conditions: new Conditions()
    .andIf('c.held_by = $', heldBy)
    .andIf('c.kind = $', kind)
    .andIf('c.refrigerant = $', refrigerant)
    .search(`concat_ws(' ', c.tag, c.batch)`, search),
  order: orderOf(sort, ['c.tag', 'c.id']),
});

export const tools: TableOf<'tools'> = ({ sort, kind, heldBy, search }) => ({
  columns: [
    ['kind', 't.kind'],
    typed('name', 't.name'),
    typed('serial', 't.serial'),
    ['resolutionG', 't.resolution_g', 'number'],
    ['repeatabilityG', 't.repeatability_g', 'number'],
    ['spanErrorRelative', 't.span_error_relative', 'number'],
    ['offsetG', 't.offset_g', 'number'],
    ['madeOn', 't.made_on', 'day'],
    ['lastCheckedOn', 't.last_checked_on', 'day'],
    typed('heldBy', 'h.name'),
    ['toolId', 't.id'],
  ],
  from: 'tool t left join person h on h.id = t.held_by',
  conditions: new Conditions()
    .andIf('t.kind = $', kind)
    .andIf('t.held_by = $', heldBy)
    .search(`concat_ws(' ', t.name, t.serial)`, search),
  order: orderOf(sort, ['t.name', 't.id']),
});
