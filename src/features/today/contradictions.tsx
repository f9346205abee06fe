import { Link } from 'react-router-dom';
import type { FlagRow } from '../../../shared/entries/entry.schema.ts';
import { useSession } from '../../api/session.ts';
import { useFlagSentence } from '../../lib/flag-sentence.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { SignalWord } from '../../ui/caution.tsx';
import { Nothing, Section } from './section.tsx';

const ORDER: Record<FlagRow['level'], number> = { danger: 0, look: 1, note: 2 };

/** What books and words contradict, in plain words with the mass; each opens what it is about. */
export function Contradictions({ flags }: { flags: readonly FlagRow[] }) {
  const t = useMessages();
  const format = useFormat();
  const sayFlag = useFlagSentence();
  const zone = useSession()?.firm.timeZone;
  const shown = [...flags].sort((a, b) => ORDER[a.level] - ORDER[b.level]);
  return (
    <Section title={t('today.contradicts')} count={flags.length > 0 ? format.number(flags.length) : undefined}>
      {flags.length === 0 ? <Nothing>{t('today.contradicts.none')}</Nothing> : null}
      <ul>
        {shown.map((flag) => (
          <li key={flag.id} className="border-b border-rule">
            <Link
              to={placeOf(flag)}
              className="grid min-h-14 grid-cols-[minmax(0,1fr)_auto] items-baseline gap-x-5 py-2.5 text-ink no-underline hover:bg-well"
            >
              <span className="leading-snug">
                {flag.level === 'danger' ? (
                  <span className="mr-2.5 inline-block w-24 align-middle">
                    <SignalWord signal="danger" />
                  </span>
                ) : null}
                <span className="underline decoration-edge decoration-1 underline-offset-[3px]">{sayFlag(flag)}</span>
              </span>
              <span className="type-label text-right text-ink-soft">{format.dateTime(flag.openedAt, zone)}</span>
            </Link>
          </li>
        ))}
      </ul>
    </Section>
  );
}

/** The page of its subject; of a reclaimer or a group the entries that it rests on. */
function placeOf(flag: FlagRow): string {
  switch (flag.subject.kind) {
    case 'unit':
      return `/units/${flag.subject.id}`;
    case 'cylinder':
      return `/cylinders/${flag.subject.id}`;
    default:
      return `/log/${flag.groupId}`;
  }
}
