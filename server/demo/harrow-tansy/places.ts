import type { CustomerPlan, PartyPlan, SitePlan } from '../firm-plan.ts';

/** The invented town of Wexcombe: who is served, and where. Metres above sea level. */
export const CUSTOMERS: readonly CustomerPlan[] = [
  { key: 'lanternRow', name: 'Lantern Row Homes', email: 'office@lantern-row.example', phone: '555-0141' },
  { key: 'town', name: 'Town of Wexcombe', email: 'facilities@town-of-wexcombe.example', phone: '555-0110' },
  { key: 'grocer', name: 'Copperkettle Grocers', email: 'stores@copperkettle.example', phone: '555-0162' },
  { key: 'bakery', name: 'Oatcake Lane Bakery', email: 'hello@oatcake-lane.example', phone: '555-0117' },
  { key: 'dental', name: 'Pewter Lane Dental', email: 'desk@pewter-lane.example', phone: '555-0175' },
  { key: 'school', name: 'Bellwether Hill School', email: 'plant@bellwether-hill.example', phone: '555-0133' },
  { key: 'inn', name: 'The Inn at Ashgrove Fold', email: 'keeper@ashgrove-fold.example', phone: '555-0188' },
  { key: 'quillon', name: 'Quillon household', email: null, phone: '555-0124' },
  { key: 'tarrow', name: 'Tarrow household', email: null, phone: '555-0129' },
];

export const SITES: readonly SitePlan[] = [
  { key: 'lanternA', customer: 'lanternRow', name: 'Lantern Row, building A', street: '2 Lantern Row', altitudeM: 61 },
  { key: 'lanternB', customer: 'lanternRow', name: 'Lantern Row, building B', street: '4 Lantern Row', altitudeM: 61 },
  { key: 'lanternC', customer: 'lanternRow', name: 'Lantern Row, building C', street: '6 Lantern Row', altitudeM: 63 },
  { key: 'townHall', customer: 'town', name: 'Town hall', street: '1 Market Cross', altitudeM: 54 },
  { key: 'library', customer: 'town', name: 'Public library', street: '12 Market Cross', altitudeM: 54 },
  { key: 'fireHouse', customer: 'town', name: 'Fire house', street: '40 Tannery Lane', altitudeM: 49 },
  { key: 'grocerNorth', customer: 'grocer', name: 'North store', street: '300 Millrace Road', altitudeM: 47 },
  { key: 'grocerSouth', customer: 'grocer', name: 'South store', street: '18 Weir Street', altitudeM: 45 },
  { key: 'bakery', customer: 'bakery', name: 'Bakery and shop', street: '7 Oatcake Lane', altitudeM: 52 },
  { key: 'dental', customer: 'dental', name: 'Practice', street: '22 Pewter Lane', altitudeM: 55 },
  { key: 'school', customer: 'school', name: 'School house', street: '1 Bellwether Hill', altitudeM: 118 },
  { key: 'inn', customer: 'inn', name: 'Inn', street: '90 Ashgrove Fold', altitudeM: 74 },
  { key: 'quillon', customer: 'quillon', name: 'House', street: '9 Heron Street', altitudeM: 58 },
  { key: 'tarrow', customer: 'tarrow', name: 'House', street: '31 Cinder Path', altitudeM: 66 },
];

export const PARTIES: readonly PartyPlan[] = [
  { key: 'pellgrove', kind: 'supplier', name: 'Pellgrove Supply House', note: 'Counter opens at 6:30.' },
  {
    key: 'marlpit',
    kind: 'supplier',
    name: 'Marlpit Gas & Cylinder',
    note: 'Large cylinders, delivered on Thursdays.',
  },
  { key: 'gantry', kind: 'reclaimer', name: 'Gantry Hollow Reclaim', note: null },
  { key: 'dunmarrow', kind: 'otherContractor', name: 'Dunmarrow Mechanical', note: 'Night calls at the library.' },
];
