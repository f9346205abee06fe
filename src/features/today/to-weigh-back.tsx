import { Link } from 'react-router-dom';
import type { OpenWeighIn } from '../../../shared/today/today.schema.ts';
import { useFormat } from '../../lib/format.ts';
import { type Translate, useMessages } from '../../lib/messages.ts';
import { Nothing, Section } from './section.tsx';

interface Props {
  weighIns: readonly OpenWeighIn[];
  /** When the list was read, in milliseconds: ages count up to then. */
  at: number;
  ofEverybody?: boolean;
}

/** Weigh-ins with a start and no end. Each is one press away from its end reading. */
export function ToWeighBack({ weighIns, at, ofEverybody = false }: Props) {
  const t = useMessages();
  const format = useFormat();
  return (
    <Section title={t('today.toWeighBack')} count={weighIns.length > 0 ? format.number(weighIns.length) : undefined}>
      {weighIns.length === 0 ? <Nothing>{t('today.toWeighBack.none')}</Nothing> : null}
      <ul>
        {weighIns.map((open) => (
          <li key={open.groupId} className="border-b border-rule">
            <Link
              to={`/weigh-back/${open.groupId}`}
              className="flex min-h-16 items-center justify-between gap-4 py-2.5 text-ink no-underline hover:bg-well"
            >
              <span className="min-w-0 leading-snug">
                <span className="block font-[650]">
                  {t('today.openWeighIn', { cylinder: open.cylinderTag, unit: open.unitLabel ?? '' })}
                </span>
                <span className="block text-[0.9375rem] text-ink-soft">
                  {t('today.openWeighIn.start', {
                    mass: format.mass(open.startGrossG),
                    date: format.dateTime(open.startedAt, open.timeZone),
                  })}
                  {ofEverybody ? `, ${open.startedByName}` : ''}
                </span>
              </span>
              <span className="shrink-0 text-right leading-tight">
                <strong className="block text-[1.25rem] font-[680]">{ageOf(open.startedAt, at, t)}</strong>
                <span className="type-label text-[0.9375rem] text-rest underline underline-offset-[3px]">
                  {t('today.weighBack')}
                </span>
              </span>
            </Link>
          </li>
        ))}
      </ul>
    </Section>
  );
}

const HOUR_MS = 3_600_000;

/** How long it has been open: minutes, hours, then days. */
function ageOf(startedAt: string, at: number, t: Translate): string {
  const open = Math.max(0, at - Date.parse(startedAt));
  if (open < HOUR_MS) return t('today.age.minutes', { count: Math.floor(open / 60_000) });
  if (open < 48 * HOUR_MS) return t('today.age.hours', { count: Math.floor(open / HOUR_MS) });
  return t('today.age.days', { count: Math.floor(open / (24 * HOUR_MS)) });
}
