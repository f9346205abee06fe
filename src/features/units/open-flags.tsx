import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { useSession } from '../../api/session.ts';
import { unitQueries } from '../../api/units.ts';
import { useFlagSentence } from '../../lib/flag-sentence.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Part } from './part.tsx';

/** What stands before the manager about this unit; each leads to the entries that it rests on. */
export function OpenFlags({ unitId }: { unitId: string }) {
  const t = useMessages();
  const format = useFormat();
  const sayFlag = useFlagSentence();
  const zone = useSession()?.firm.timeZone;
  const flags = useQuery(unitQueries.openFlags(unitId));
  if (!flags.data || flags.data.length === 0) return null;
  return (
    <Part title={t('units.flags')}>
      <ul>
        {flags.data.map((flag) => (
          <li key={flag.id} className="border-b border-rule">
            <Link
              to={`/log/${flag.groupId}`}
              className="grid min-h-12 grid-cols-[minmax(0,1fr)_auto] items-baseline gap-x-4 py-2.5 text-ink no-underline hover:bg-well"
            >
              <span className="leading-snug underline decoration-edge decoration-1 underline-offset-[3px]">
                {sayFlag(flag)}
              </span>
              <span className="type-label text-ink-soft">{format.dateTime(flag.openedAt, zone)}</span>
            </Link>
          </li>
        ))}
      </ul>
    </Part>
  );
}
