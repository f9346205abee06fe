import { useQueries } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { EntryRow, GroupView } from '../../../shared/entries/entry.schema.ts';
import { entryQueries } from '../../api/entries.ts';
import { entryMarks, placeWords, reasonWords } from '../../lib/entry-words.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Mark } from './log-columns.tsx';

/** All entries of the group, and the groups that are tied to it: what reverses it, what is right instead. */
export function GroupEntries({ group, main }: { group: GroupView; main: EntryRow | undefined }) {
  const t = useMessages();
  const ties = [
    { word: t('log.group.tied.reverses'), id: group.reversesGroupId },
    { word: t('log.group.tied.reversedBy'), id: group.reversedByGroupId },
    { word: t('log.group.tied.replacedBy'), id: group.replacedByGroupId },
    { word: t('log.group.tied.closes'), id: group.closesGroupId },
  ].filter((tie): tie is { word: string; id: string } => tie.id !== null);
  const tied = useQueries({ queries: ties.map(({ id }) => entryQueries.group(id)) });
  return (
    <>
      {group.entries.length > 1 ? (
        <section aria-label={t('log.group.wholeGroup')}>
          <h3 className="type-label pb-1 text-ink-soft">{t('log.group.wholeGroup')}</h3>
          <Lines entries={group.entries} current={main?.id} struck={group.reversedByGroupId !== null} />
        </section>
      ) : null}
      {ties.map(({ word, id }, index) => {
        const other = tied[index]?.data;
        return (
          <section key={id} aria-label={word} className="border-l-4 border-rest pl-3">
            <h3 className="type-label flex items-baseline justify-between gap-3 pb-1 text-ink-soft">
              {word}
              <Link to={`/log/${id}`} className="inline-flex min-h-6 items-center">
                {t('log.group.open')}
              </Link>
            </h3>
            {other ? (
              <>
                <p className="pb-1 text-[0.9375rem]">
                  {[other.recordedByName, other.reason].filter(Boolean).join(': ')}
                </p>
                <Lines entries={other.entries} current={undefined} struck={other.reversedByGroupId !== null} />
              </>
            ) : (
              <div className="h-16 animate-pulse bg-well" />
            )}
          </section>
        );
      })}
    </>
  );
}

function Lines({
  entries,
  current,
  struck,
}: {
  entries: readonly EntryRow[];
  current: string | undefined;
  struck: boolean;
}) {
  const t = useMessages();
  const format = useFormat();
  return (
    <ul className="border-t border-rule">
      {entries.map((entry) => (
        <li
          key={entry.id}
          aria-current={entry.id === current || undefined}
          className={`grid grid-cols-[3rem_minmax(0,1fr)_auto] gap-x-2 border-b border-rule-faint py-1.5 text-[0.9375rem] leading-snug ${entry.id === current ? 'bg-rest-wash' : ''} ${struck ? 'text-ink-soft' : ''}`}
        >
          <span className="text-ink-soft">{format.number(entry.sequence)}</span>
          <span className={struck ? 'line-through decoration-1' : ''}>
            {placeWords(t, entry.from)} <span aria-hidden="true">{'\u2192'}</span>
            <span className="sr-only">{t('log.arrow')}</span> {placeWords(t, entry.to)}
          </span>
          <span className={`text-right font-[600] whitespace-nowrap ${struck ? 'line-through decoration-1' : ''}`}>
            {format.mass(entry.massG)}
          </span>
          {entry.addedByServer || entry.late ? (
            <span className="type-label col-start-2 col-end-4 flex flex-wrap items-center gap-x-2 text-[0.875rem] text-ink-soft">
              {reasonWords(t, entry)}
              {entryMarks(t, entry, format.month).map((mark) => (
                <Mark key={mark}>{mark}</Mark>
              ))}
            </span>
          ) : null}
        </li>
      ))}
    </ul>
  );
}
