import type { z } from 'zod';
import type { createCylinderRequest } from '../../shared/cylinders/cylinder.schema.ts';
import type { EntryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import type { createUnitRequest } from '../../shared/unit-register/unit.schema.ts';
import { indexOf, type Names } from './import.repository.ts';
import type { RowReader } from './row-reader.ts';

/** Where a refusal of the request stands in the table; the longest beginning counts. */
export type FieldPaths = readonly (readonly [path: string, field: string])[];

export const UNIT_PATHS: FieldPaths = [
  ['/siteId', 'site'],
  ['/refrigerantFrom', 'installedOn'],
  ['/serials/0/model', 'model'],
  ['/serials', 'serial'],
  ['/fullCharge', 'fullCharge'],
  ['/initialCharge/at', 'contentOn'],
  ['/initialCharge', 'content'],
];

export function unitRows(names: Names) {
  const sites = indexOf(names.sites, ({ name }) => name);
  const sitesOf = indexOf(names.sites, ({ name, customer }) => `${customer} / ${name}`);
  const held = new Map(names.units.map(({ id, tag, siteId }) => [`${siteId} ${tag.toLowerCase()}`, id]));
  return (row: RowReader): z.input<typeof createUnitRequest> => {
    const id = row.id('unit');
    const tag = row.required('tag');
    const customer = row.text('customer');
    row.required('site');
    const one = customer === null ? null : sitesOf.find(`${customer} / ${row.text('site')}`);
    const site = one?.is === 'one' ? one.value : row.named('site', sites);
    const zone = site?.timeZone ?? names.timeZone;
    const installedOn = row.day('installedOn');
    const fullCharge = row.mass('fullCharge');
    const content = row.mass('content');
    const serial = row.text('serial');
    refuseSecond(row, held, `${site?.id} ${tag.toLowerCase()}`, id);
    return {
      id,
      siteId: site?.id ?? '',
      tag,
      name: row.text('name') ?? tag,
      applianceKind: row.word('applianceKind', 'comfortCooling') as 'other',
      refrigerant: row.required('refrigerant').toUpperCase(),
      refrigerantFrom: installedOn ?? row.since,
      serials: serial === null ? [] : [{ part: 'outdoor', serial, model: row.text('model') }],
      installedOn,
      fullCharge: fullCharge && {
        id: row.id('fullCharge'),
        mass: fullCharge,
        method: row.word('fullChargeMethod', 'manufacturer') as 'measured',
        validFrom: row.instant('installedOn', zone, 0),
      },
      initialCharge: content
        ? {
            state: 'opening',
            mass: content,
            at: row.instant('contentOn', zone, 12),
            entryId: row.id('entry'),
            groupId: row.id('group'),
          }
        : { state: 'notKnown' },
    };
  };
}

export const CYLINDER_PATHS: FieldPaths = [
  ['/tare/validFrom', 'tareFrom'],
  ['/tare', 'tare'],
  ['/owner', 'owner'],
  ['/occurredAt', 'contentOn'],
  ['/entries', 'content'],
];

export interface CylinderRow {
  request: z.input<typeof createCylinderRequest>;
  /** What was in it when the register begins. */
  opening: EntryGroupRequest | null;
}

export function cylinderRows(names: Names) {
  const owners = indexOf(
    [
      ...names.parties.map(({ id, name }) => ({ name, owner: { kind: 'party' as const, id } })),
      ...names.customers.map(({ id, name }) => ({ name, owner: { kind: 'customer' as const, id } })),
    ],
    ({ name }) => name,
  );
  const people = indexOf(
    names.people,
    ({ name }) => name,
    ({ email }) => email,
    ({ van }) => van,
  );
  const held = new Map(names.cylinders.map(({ id, tag }) => [tag.toLowerCase(), id]));
  return (row: RowReader): CylinderRow => {
    const id = row.id('cylinder');
    const tag = row.required('tag');
    row.required('tare');
    const refrigerant = row.required('refrigerant').toUpperCase();
    const content = row.mass('content');
    refuseSecond(row, held, tag.toLowerCase(), id);
    return {
      request: {
        id,
        tag,
        kind: row.word('kind', null) as 'recovery',
        refrigerant,
        contentState: row.word('contentState', 'virgin') as 'virgin',
        owner: row.named('owner', owners)?.owner ?? { kind: 'ours' },
        tare: {
          id: row.id('tare'),
          mass: row.mass('tare') ?? { value: '1', unit: 'g' },
          validFrom: row.instant('tareFrom', names.timeZone, 0),
        },
        waterCapacity: row.mass('waterCapacity'),
        stampedLimit: row.mass('stampedLimit'),
        retestDue: row.day('retestDue'),
        heldBy: row.named('heldBy', people)?.id ?? null,
        batch: row.text('batch'),
      },
      opening: content && {
        groupId: row.id('group'),
        schema: 1,
        kind: 'opening',
        occurredAt: row.instant('contentOn', names.timeZone, 12),
        entries: [
          {
            id: row.id('entry'),
            refrigerant,
            mass: content,
            from: { place: 'opening' },
            to: { place: 'cylinder', id },
            howKnown: 'estimated',
          },
        ],
      },
    };
  };
}

/** A second thing of one number would be mistaken for the first. The same row again is the same thing. */
function refuseSecond(row: RowReader, held: Map<string, string>, key: string, id: string): void {
  const known = held.get(key);
  if (known !== undefined && known !== id) row.fault('tag', 'importTagTaken');
  held.set(key, id);
}
