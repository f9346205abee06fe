import { useInfiniteQuery, useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { EntryRow, GroupView } from '../../../shared/entries/entry.schema.ts';
import { cylinderQueries } from '../../api/cylinders.ts';
import { entryQueries } from '../../api/entries.ts';
import { rowsOf } from '../../api/page.ts';
import { unitQueries } from '../../api/units.ts';
import { placeWords } from '../../lib/entry-words.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Beam } from '../../ui/beam/beam.tsx';
import { useBeamUnit } from '../../ui/beam/use-beam-unit.ts';
import { type Standing, standingAround, standingBeam, standingByReadings } from './standing.ts';

/** More entries than this are not fetched for a drawing. */
const MOST = 200;

/** The beam of the cylinder and of the unit that an entry touches, before and after it. */
export function StandingBeams({ group, main }: { group: GroupView; main: EntryRow }) {
  const places = [main.to, main.from].filter(({ place }) => place === 'cylinder' || place === 'unit');
  return places.map((place) => <PlaceBeam key={place.id} place={place} group={group} />);
}

function PlaceBeam({ place, group }: { place: EntryRow['from']; group: GroupView }) {
  const t = useMessages();
  const format = useFormat();
  const unit = useBeamUnit();
  const isCylinder = place.place === 'cylinder';
  const id = place.id ?? '';
  const cylinder = useQuery({ ...cylinderQueries.one(id), enabled: isCylinder }).data;
  const machine = useQuery({ ...unitQueries.one(id), enabled: !isCylinder }).data;
  const book = useInfiniteQuery(
    entryQueries.list({ ...(isCylinder ? { cylinderId: id } : { unitId: id }), sort: 'occurredAt' }, MOST),
  );
  const standing = useMemo((): Standing | null => {
    if (!book.data || (isCylinder && !cylinder)) return null;
    const all = rowsOf(book.data);
    const own = group.entries.filter(({ from, to }) => from.id === id || to.id === id);
    // A unit whose book never began has only a sum, which may be anything.
    const known = isCylinder || all.some(({ from }) => from.place === 'opening' || from.place === 'factory');
    if (!book.hasNextPage) return known ? standingAround(id, own, all) : null;
    const readings = group.readings.filter(({ cylinderId }) => cylinderId === id);
    return cylinder ? standingByReadings(cylinder.tareG, readings) : null;
  }, [book.data, book.hasNextPage, cylinder, group, id, isCylinder]);
  const spec = useMemo(() => {
    if (!standing || standing.beforeG < 0 || standing.afterG < 0) return null;
    const limitG = isCylinder ? (cylinder?.limitG ?? null) : (machine?.fullCharge?.massG ?? null);
    const limitWords = isCylinder ? 'log.group.beam.limit' : 'log.group.beam.fullCharge';
    return standingBeam(
      standing,
      {
        before: t('log.group.beam.before', { mass: format.massAbout(standing.beforeG) }),
        after: t('log.group.beam.after', { mass: format.massAbout(standing.afterG) }),
        lost: t('log.group.beam.lost', { mass: format.massAbout(standing.lostG ?? 0) }),
        limit: limitG === null ? null : { massG: limitG, label: t(limitWords, { mass: format.massAbout(limitG) }) },
        limitKind: isCylinder ? 'stop' : 'target',
      },
      unit,
    );
  }, [standing, cylinder, machine, isCylinder, t, format, unit]);
  if (book.isPending) return <div className="h-24" />;
  if (!spec || !standing) return null;
  const words = placeWords(t, place);
  return (
    <div>
      <p className="type-label text-ink-soft">{words}</p>
      <Beam
        spec={spec}
        summary={t('log.group.beamOf', {
          place: words,
          before: format.massAbout(standing.beforeG),
          after: format.massAbout(standing.afterG),
        })}
      />
    </div>
  );
}
