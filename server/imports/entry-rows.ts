import type { z } from 'zod';
import type { enteredMassSchema, entryGroupRequest, GroupKind } from '../../shared/ledger/entry-group.schema.ts';
import { indexOf, type Names } from './import.repository.ts';
import type { FieldPaths } from './register-rows.ts';
import type { RowReader } from './row-reader.ts';

type End = z.input<typeof enteredMassSchema>['from'];

export const ENTRY_PATHS: FieldPaths = [
  ['/reason', 'note'],
  ['/readings', 'mass'],
  ['/entries/0/mass', 'mass'],
  ['/entries/0/refrigerant', 'refrigerant'],
  ['/entries/0/from', 'cylinder'],
  ['/entries/0/to', 'cylinder'],
  ['/unitId', 'unit'],
];

type Side = 'cylinder' | 'toCylinder' | 'unit' | 'supplier' | 'reclaimer' | 'opening' | 'destroyed' | 'missing';
/** From and to of each kind that a table may hold. */
const SIDES: Readonly<Record<string, readonly [Side, Side]>> = {
  purchase: ['supplier', 'cylinder'],
  opening: ['opening', 'cylinder'],
  extraCharge: ['cylinder', 'unit'],
  fullRecharge: ['cylinder', 'unit'],
  refill: ['cylinder', 'unit'],
  recovery: ['unit', 'toCylinder'],
  overchargeRemoved: ['unit', 'toCylinder'],
  heelRemoved: ['cylinder', 'toCylinder'],
  transfer: ['cylinder', 'toCylinder'],
  return: ['cylinder', 'supplier'],
  reclaim: ['cylinder', 'reclaimer'],
  destruction: ['cylinder', 'destroyed'],
  loss: ['cylinder', 'missing'],
};

/** Past entries, one row one group. A day without a time counts as noon at the site. */
export function entryRows(names: Names) {
  const zones = new Map(names.sites.map(({ id, timeZone }) => [id, timeZone]));
  const units = indexOf(names.units, ({ tag }) => tag);
  const unitsOf = indexOf(names.units, ({ tag, site }) => `${site} / ${tag}`);
  const cylinders = indexOf(names.cylinders, ({ tag }) => tag);
  const parties = indexOf(names.parties, ({ name }) => name);
  return (row: RowReader): z.input<typeof entryGroupRequest> => {
    const kind = row.word('what', null) as GroupKind;
    const site = row.text('site');
    const atSite = site === null || row.text('unit') === null ? null : unitsOf.find(`${site} / ${row.text('unit')}`);
    const unit = atSite?.is === 'one' ? atSite.value : row.named('unit', units);
    const cylinder = row.named('cylinder', cylinders);
    const toCylinder = row.named('toCylinder', cylinders);
    const party = row.named('party', parties);
    row.required('occurredAt');
    row.required('mass');
    const zone = (unit && zones.get(unit.siteId)) ?? names.timeZone;
    const mass = row.mass('mass') ?? { value: '1', unit: 'g' as const };
    const note = row.text('note');
    const group = {
      groupId: row.id('group'),
      schema: 1 as const,
      kind,
      unitId: unit?.id ?? null,
      occurredAt: row.instant('occurredAt', zone, 12),
      reason: note,
      note,
    };
    if (kind === 'weighing') {
      if (!cylinder) need(row, 'cylinder');
      const reading = { id: row.id('reading'), cylinderId: cylinder?.id ?? row.id('none'), value: mass.value };
      return { ...group, unitId: null, readings: [{ ...reading, moment: 'only', mode: 'gross', unit: mass.unit }] };
    }
    const [from, to] = SIDES[kind] ?? (['cylinder', 'unit'] as const);
    const refrigerant = row.text('refrigerant')?.toUpperCase() ?? (cylinder ?? unit ?? toCylinder)?.refrigerant ?? null;
    if (refrigerant === null) need(row, 'refrigerant');
    const concernsUnit = from === 'unit' || to === 'unit';
    return {
      ...group,
      unitId: concernsUnit ? group.unitId : null,
      entries: [
        {
          id: row.id('entry'),
          refrigerant,
          mass,
          from: endOf(from),
          to: endOf(to),
          howKnown: row.word('howKnown', 'estimated') as 'weighed',
        },
      ],
    };

    function endOf(side: Side): End {
      switch (side) {
        case 'cylinder':
          return { place: 'cylinder', id: (cylinder ?? need(row, 'cylinder'))?.id ?? row.id('none') };
        case 'toCylinder':
          // A recovery names one cylinder; whichever column it stands in.
          return { place: 'cylinder', id: intoCylinder()?.id ?? row.id('none') };
        case 'unit':
          return { place: 'unit', id: (unit ?? need(row, 'unit'))?.id ?? row.id('none') };
        case 'supplier':
        case 'reclaimer':
          if (party && party.kind !== side) row.fault('party', 'importOtherParty');
          return { place: side, id: (party ?? need(row, 'party'))?.id ?? row.id('none') };
        default:
          return { place: side };
      }
    }

    function intoCylinder() {
      if (toCylinder) return toCylinder;
      return from === 'unit' && cylinder ? cylinder : need(row, 'toCylinder');
    }
  };
}

/** Missing for this kind; what was named and not found has been said already. */
function need(row: RowReader, field: string): null {
  return row.text(field) === null ? row.fault(field, 'required') : null;
}
