import type { EntryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import { placesJudged } from '../../shared/ledger/judged-group.ts';
import type { NamedIds } from './posting-facts.repository.ts';
import type { StoredGroup } from './posting-facts.ts';

/** Every id that the groups of a posting name. */
export function namedIds(
  bodies: readonly EntryGroupRequest[],
  stored: readonly StoredGroup[] = [],
  more: { cylinderIds?: string[]; unitIds?: string[]; groupIds?: string[] } = {},
): NamedIds {
  const places = bodies.flatMap(({ entries }) => entries ?? []).flatMap(({ from, to }) => [from, to]);
  const readings = bodies.flatMap((body) => body.readings ?? []);
  const placeIds = (kinds: (kind: string) => boolean) =>
    places.flatMap(({ place, id }) => (id && kinds(place) ? [id] : []));
  const judged = stored.map(placesJudged);
  return {
    groupIds: [...bodies.map(({ groupId }) => groupId), ...(more.groupIds ?? [])],
    cylinderIds: distinct([
      ...placeIds((kind) => kind === 'cylinder'),
      ...readings.map(({ cylinderId }) => cylinderId),
      ...judged.flatMap(({ cylinderIds }) => cylinderIds),
      ...(more.cylinderIds ?? []),
    ]),
    unitIds: distinct([
      ...placeIds((kind) => kind === 'unit'),
      ...bodies.flatMap(({ statements }) => (statements ?? []).map(({ id }) => id)),
      ...bodies.map(({ unitId }) => unitId),
      ...judged.flatMap(({ unitIds }) => unitIds),
      ...stored.map(({ unitId }) => unitId),
      ...(more.unitIds ?? []),
    ]),
    toolIds: distinct(readings.map(({ toolId }) => toolId)),
    partyIds: distinct(placeIds((kind) => kind !== 'cylinder' && kind !== 'unit')),
    jobIds: distinct(bodies.map(({ jobId }) => jobId)),
    chargeSheetIds: distinct(bodies.map(({ chargeSheetId }) => chargeSheetId)),
    personIds: distinct(bodies.map(({ supervisedBy }) => supervisedBy)),
  };
}

const distinct = (ids: readonly (string | null | undefined)[]): string[] => [
  ...new Set(ids.filter((id): id is string => Boolean(id))),
];
