import type { EntryRow } from '../../shared/entries/entry.schema.ts';
import type { Translate } from './messages.ts';

type PlaceView = EntryRow['from'];

/** A place in the words of the log: `cyl. 7741`, `unit 0412`, `atmosphere, inferred`. Needs the messages `log-screen`. */
export function placeWords(t: Translate, { place, as, label }: PlaceView): string {
  if (place === 'atmosphere') return t(`log.place.atmosphere.${as ?? 'measured'}`);
  return NAMED.has(place) && label !== '' ? t(`log.placeNamed.${place}`, { label }) : t(`log.place.${place}`);
}

const NAMED = new Set(['supplier', 'cylinder', 'unit', 'reclaimer', 'customer', 'otherContractor']);

/** Which end tells why the server wrote an entry, the most telling first. */
const TELLING = ['supplierShortFill', 'cylinderDifference', 'unitDifference', 'reclaimerDifference', 'atmosphere'];

/** Why an entry stands in the log: what the person did, or what the server found in what they stated. */
export function reasonWords(t: Translate, row: Pick<EntryRow, 'kind' | 'addedByServer' | 'from' | 'to'>): string {
  if (!row.addedByServer) return t(`log.kind.${row.kind}`);
  const telling = TELLING.find((place) => row.from.place === place || row.to.place === place);
  if (telling === 'atmosphere') {
    if (row.kind === 'recovery' && row.to.place === 'atmosphere') return t('log.found.notRecovered');
    const as = row.to.place === 'atmosphere' ? row.to.as : row.from.as;
    // From the atmosphere into a unit: an inferred loss that turned out not to have been one.
    return t(row.from.place === 'atmosphere' ? 'log.found.lossTakenBack' : `log.found.loss.${as ?? 'inferred'}`);
  }
  if (telling) return t(`log.found.${telling}`);
  return t(row.from.place === 'opening' || row.to.place === 'opening' ? 'log.found.opening' : `log.kind.${row.kind}`);
}

/** What has to be said of an entry besides what and why, in words; never by colour or form alone. */
export function entryMarks(
  t: Translate,
  row: Pick<EntryRow, 'atLeast' | 'late' | 'bookingMonth' | 'addedByServer'>,
  monthWords: (month: string) => string,
): string[] {
  return [
    ...(row.atLeast ? [t('log.mark.atLeast')] : []),
    ...(row.late ? [t('log.mark.late', { month: monthWords(row.bookingMonth) })] : []),
    ...(row.addedByServer ? [t('log.mark.byServer')] : []),
  ];
}
