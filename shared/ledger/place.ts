/** Every kind of place that an entry can move refrigerant from or to. Closed: `api.md` and the database list the same. */
export const PLACE_KINDS = [
  'supplier',
  'cylinder',
  'unit',
  'factory',
  'opening',
  'reclaimer',
  'destroyed',
  'customer',
  'otherContractor',
  'atmosphere',
  'cylinderDifference',
  'unitDifference',
  'supplierShortFill',
  'reclaimerDifference',
  'missing',
] as const;
export type PlaceKind = (typeof PLACE_KINDS)[number];

/** How refrigerant got into the atmosphere; `beforeOurCare` also stands for "not known when". */
export const ATMOSPHERE_KINDS = ['measured', 'inferred', 'hose', 'beforeOurCare'] as const;
export type AtmosphereKind = (typeof ATMOSPHERE_KINDS)[number];

/** The kinds that stand for many places, so that `id` says which one. */
export const PLACE_KINDS_WITH_ID = [
  'supplier',
  'cylinder',
  'unit',
  'reclaimer',
  'customer',
  'otherContractor',
] as const satisfies readonly PlaceKind[];
export type PlaceKindWithId = (typeof PLACE_KINDS_WITH_ID)[number];
export type SinglePlaceKind = Exclude<PlaceKind, PlaceKindWithId | 'atmosphere'>;

export type Place =
  | { readonly place: PlaceKindWithId; readonly id: string }
  | { readonly place: 'atmosphere'; readonly as: AtmosphereKind }
  | { readonly place: SinglePlaceKind };

/** A place as a request or a database row writes it: what does not apply is absent or null. */
export interface PlaceFields {
  place: PlaceKind;
  id?: string | null | undefined;
  as?: AtmosphereKind | null | undefined;
}

export const cylinderPlace = (id: string): Place => ({ place: 'cylinder', id });
export const unitPlace = (id: string): Place => ({ place: 'unit', id });
export const atmosphere = (as: AtmosphereKind): Place => ({ place: 'atmosphere', as });
export const singlePlace = (place: SinglePlaceKind): Place => ({ place });

export const kindNeedsId = (kind: PlaceKind): kind is PlaceKindWithId =>
  (PLACE_KINDS_WITH_ID as readonly PlaceKind[]).includes(kind);

/** @throws RangeError when `id` or `as` is missing; requests are checked by `placeSchema` before. */
export function toPlace({ place, id, as }: PlaceFields): Place {
  if (kindNeedsId(place)) {
    if (!id) throw new RangeError(`A ${place} needs its id`);
    return { place, id };
  }
  if (place === 'atmosphere') {
    if (!as) throw new RangeError('The atmosphere needs to be told how');
    return { place, as };
  }
  return { place };
}

/** Text that is the same for the same place, for maps and for sorting: `cylinder:<id>`, `atmosphere:hose`, `missing`. */
export function placeKey(place: Place): string {
  if ('id' in place) return `${place.place}:${place.id}`;
  if ('as' in place) return `${place.place}:${place.as}`;
  return place.place;
}

export const samePlace = (one: Place, other: Place): boolean => placeKey(one) === placeKey(other);
