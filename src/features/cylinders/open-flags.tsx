import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { cylinderQueries } from '../../api/cylinders.ts';
import { useSession } from '../../api/session.ts';
import { useFlagSentence } from '../../lib/flag-sentence.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';

/** What contradicts about this cylinder, over its figures; each leads to the entries that it rests on. */
export function OpenFlags({ cylinderId }: { cylinderId: string }) {
  const t = useMessages();
  const format = useFormat();
  const sayFlag = useFlagSentence();
  const zone = useSession()?.firm.timeZone;
  const flags = useQuery(cylinderQueries.openFlags(cylinderId));
  if (!flags.data || flags.data.length === 0) return null;
  return (
    <section aria-labelledby="cylinder-flags">
      <h2 id="cylinder-flags" className="type-title border-b-2 border-ink pb-1.5 text-[1.25rem]">
        {t('cylinders.flags')}
      </h2>
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
    </section>
  );
}
