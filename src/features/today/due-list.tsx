import { Link } from 'react-router-dom';
import type { Today } from '../../../shared/today/today.schema.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Nothing, Section } from './section.tsx';

/** What falls due in the next days, and what is past its day. */
export function DueList({ due }: { due: Today['due'] }) {
  const t = useMessages();
  const format = useFormat();
  return (
    <Section title={t('today.due')} count={due.length > 0 ? format.number(due.length) : undefined}>
      {due.length === 0 ? <Nothing>{t('today.due.none')}</Nothing> : null}
      <ul>
        {due.map((item) => (
          <li key={`${item.kind} ${item.id}`} className="border-b border-rule">
            <Link
              to={placeOf(item)}
              className="flex min-h-12 items-center justify-between gap-5 py-2 text-ink no-underline hover:bg-well"
            >
              <span className="leading-snug">
                <span className="underline decoration-edge decoration-1 underline-offset-[3px]">
                  {t(`today.due.${item.kind}`, { label: item.label })}
                </span>
              </span>
              <span className={`shrink-0 text-right leading-tight ${item.overdue ? 'font-[650]' : 'text-ink-soft'}`}>
                {item.kind === 'retest' ? format.month(item.on.slice(0, 7)) : format.day(item.on)}
                {item.overdue ? (
                  <span className="type-label block text-[0.875rem]">{t('today.due.overdue')}</span>
                ) : null}
              </span>
            </Link>
          </li>
        ))}
      </ul>
    </Section>
  );
}

function placeOf({ kind, id }: Today['due'][number]): string {
  switch (kind) {
    case 'retest':
      return `/cylinders/${id}`;
    case 'toolCheck':
      return '/tools';
    case 'invitationExpires':
      return '/people';
  }
}
