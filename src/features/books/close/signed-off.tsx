import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { Checklist, CloseResponse } from '../../../../shared/periods/periods.schema.ts';
import { periodQueries } from '../../../api/periods.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { Fact, Facts } from '../../../ui/facts.tsx';
import { Done } from '../../../ui/notice.tsx';
import { longMonth } from '../book-words.ts';
import { Section } from '../section.tsx';

/** Who signed the month off and when, what was carried out of it, and the seal that covers it. */
export function SignedOff({ checklist, closed }: { checklist: Checklist; closed: CloseResponse | null }) {
  const t = useMessages();
  const format = useFormat();
  const next = useQuery(periodQueries.list()).data?.next;
  const { signedOff, month, timeZone } = checklist;
  if (!signedOff) return null;
  return (
    <div className="flex flex-col gap-6">
      {closed ? <Done>{t('books.closed.done', { month: longMonth(format.locale, month) })}</Done> : null}
      <Section title={t('books.closed')}>
        <Facts>
          <Fact name={t('books.closed.by')}>{signedOff.byName}</Fact>
          <Fact name={t('books.closed.at')}>{format.longDateTime(signedOff.at, timeZone)}</Fact>
          {signedOff.note ? <Fact name={t('books.closed.note')}>{signedOff.note}</Fact> : null}
          {closed ? (
            <Fact name={t('books.closed.record')}>
              {t('books.closed.recordNumber', { number: format.number(closed.recordSequence) })}
            </Fact>
          ) : null}
          {closed ? (
            <Fact name={t('books.closed.seal')}>
              {closed.seal ? (
                <span className="font-mono text-[0.875rem] break-all">{closed.seal.hash}</span>
              ) : (
                t('books.closed.sealLater')
              )}
            </Fact>
          ) : null}
          <Fact name={t('books.closed.sums')}>
            <span className="font-mono text-[0.875rem] break-all">{checklist.sumsHash}</span>
          </Fact>
        </Facts>
        {next ? (
          <p className="pt-3">
            <Link to={`/books/close/${next}`} className="inline-flex min-h-6 items-center">
              {t('books.toClose', { month: longMonth(format.locale, next) })}
            </Link>
          </p>
        ) : null}
      </Section>
      {signedOff.carried.length > 0 ? (
        <Section title={t('books.closed.carried', { count: signedOff.carried.length })}>
          <ul>
            {signedOff.carried.map((item) => (
              <li key={item.key} className="border-b border-rule py-2.5 leading-snug">
                <span className="font-[600]">{item.label}</span>
                <span className="block text-[0.9375rem] text-ink-soft">
                  {t('books.close.carriedBy', { who: item.name, reason: item.reason })}
                </span>
              </li>
            ))}
          </ul>
        </Section>
      ) : null}
    </div>
  );
}
