import type { EntryRow } from '../../../shared/entries/entry.schema.ts';
import { type BeamSpec, roundEnd } from '../../ui/beam/beam-spec.ts';
import type { BeamUnit, Labelled } from '../../ui/beam/presets.ts';

/** What a place held before and after the masses that a person entered, in grams. */
export interface Standing {
  beforeG: number;
  afterG: number;
  /** Part of what it lost that nobody weighed: the book held it, and it was not there when the unit was emptied. */
  lostG?: number;
}

type Moved = Pick<EntryRow, 'from' | 'to' | 'massG' | 'occurredAt' | 'sequence' | 'groupId' | 'addedByServer'>;

/**
 * The book of a place around a group, as of its own time: the sum of everything that had happened to it by then. What
 * the server posted of itself in the group (a gap that its reading showed) counts as before, unless it is a loss.
 * @param all every entry of the place; with some missing the sum would say nothing
 */
export function standingAround(place: string, group: readonly Moved[], all: readonly Moved[]): Standing | null {
  const first = group[0];
  if (!first) return null;
  const firstSequence = Math.min(...group.map(({ sequence }) => sequence));
  const time = Date.parse(first.occurredAt);
  const earlier = all.filter(
    (entry) =>
      entry.groupId !== first.groupId &&
      (Date.parse(entry.occurredAt) < time ||
        (Date.parse(entry.occurredAt) === time && entry.sequence < firstSequence)),
  );
  const own = group.filter(({ addedByServer }) => !addedByServer);
  const found = group.filter(({ addedByServer }) => addedByServer);
  const ownG = sumAt(place, own);
  const foundG = sumAt(place, found);
  const beforeG = sumAt(place, earlier);
  const afterG = grams(beforeG + foundG + ownG);
  // Emptied, and less came out than the book held: the rest left as well, unseen.
  const lostG =
    ownG < 0
      ? -sumAt(
          place,
          found.filter(({ to }) => to.place === 'atmosphere'),
        )
      : 0;
  if (lostG > 0) return { beforeG: grams(beforeG + foundG + lostG), afterG, lostG: grams(lostG) };
  return { beforeG: grams(beforeG + foundG), afterG };
}

/** From a cylinder's own gross readings, where the whole book is not at hand. */
export function standingByReadings(
  tareG: number,
  readings: readonly { moment: string; mode: string; massG: number }[],
): Standing | null {
  const gross = (moment: string) => readings.find((reading) => reading.moment === moment && reading.mode === 'gross');
  const [before, after] = [gross('before'), gross('after')];
  if (!before || !after) return null;
  return { beforeG: grams(before.massG - tareG), afterG: grams(after.massG - tareG) };
}

function sumAt(id: string, entries: readonly Moved[]): number {
  return entries.reduce(
    (sum, { from, to, massG }) => sum + (to.id === id ? massG : 0) - (from.id === id ? massG : 0),
    0,
  );
}

/** Grams to the microgram: a sum of doubles carries binary noise, and no noise may look like a mass. */
const grams = (sum: number) => Math.round(sum * 1e6) / 1e6;

/** What stays lies in verdigris, what came or went in copper, what left unseen hatched; the poise where it stands then. */
export function standingBeam(
  { beforeG, afterG, lostG = 0 }: Standing,
  labels: { before: string; after: string; lost: string; limit?: Labelled | null; limitKind: 'stop' | 'target' },
  { gramsPer, unit }: BeamUnit,
): BeamSpec {
  const [low, high] = [Math.min(beforeG, afterG), Math.max(beforeG, afterG)];
  const limitG = labels.limit?.massG ?? 0;
  const most = limitG <= high * 8 ? Math.max(high, limitG) : high;
  const [stays, moves] = afterG >= beforeG ? [labels.before, labels.after] : [labels.after, labels.before];
  const parts = [
    { from: 0, to: low, kind: 'rest' as const, label: stays },
    { from: low, to: high - lostG, kind: 'move' as const, label: moves },
    { from: high - lostG, to: high, kind: 'gone' as const, label: labels.lost },
  ];
  return {
    domain: [0, roundEnd((Math.max(most, 1) * 1.05) / gramsPer)],
    unit,
    segments: parts
      .filter(({ from, to }) => to > from)
      .map(({ from, to, ...part }) => ({ ...part, from: from / gramsPer, to: to / gramsPer })),
    poise: { at: afterG / gramsPer, label: '', kind: 'move' },
    marks: labels.limit ? [{ at: limitG / gramsPer, label: labels.limit.label, kind: labels.limitKind }] : [],
  };
}
