import { type ReactNode, useEffect, useRef } from 'react';
import type { EntryGroupResponse } from '../../../shared/ledger/entry-group-response.schema.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Figure } from '../../ui/figure.tsx';
import { Notice } from '../../ui/notice.tsx';
import { PostedEntries } from './entry-lines.tsx';

/** Said where the eye is: the number of the entry, what was posted, and what it made the server say. */
export function Posted({
  answers,
  title,
  text,
}: {
  answers: readonly EntryGroupResponse[];
  /** Instead of the entry's number. */
  title?: string;
  text?: ReactNode;
}) {
  const t = useMessages();
  const format = useFormat();
  const heading = useRef<HTMLHeadingElement>(null);
  useEffect(() => {
    heading.current?.focus({ preventScroll: true });
    window.scrollTo({ top: 0 });
  }, []);
  const entries = answers.flatMap((answer) => answer.entries);
  const flags = answers.flatMap((answer) => answer.flags).filter((flag) => flag.closedBy === null);
  const warnings = answers.flatMap((answer) => answer.warnings);
  const own = entries.filter((entry) => !entry.addedByServer);
  const intoUnitG = own.filter((entry) => entry.to.place === 'unit').reduce((sum, entry) => sum + entry.massG, 0);
  const [first] = own;
  const numbered = first
    ? t('weighIn.done.posted', { number: format.number(first.sequence) })
    : t('weighIn.done.readings');
  return (
    <div className="page-gutter flex w-full max-w-2xl flex-col gap-5 pt-6">
      <div role="status" className="border-l-4 border-rest pl-4">
        <h2 ref={heading} tabIndex={-1} className="type-title text-[1.5rem] outline-none">
          {title ?? numbered}
        </h2>
        {intoUnitG > 0 ? (
          <p className="type-figure pt-2 text-[clamp(2.5rem,14vw,4.25rem)]">
            <Figure pieces={format.massAboutPieces(intoUnitG)} />
          </p>
        ) : null}
        {text ? <p className="pt-1 text-ink-soft">{text}</p> : null}
      </div>
      {entries.length > 0 ? <PostedEntries entries={entries} /> : null}
      {[...flags, ...warnings].map((said) => (
        <Notice key={said.code + said.message} title={said.message} />
      ))}
    </div>
  );
}
