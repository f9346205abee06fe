import { type ReactNode, useId } from 'react';
import { useMessages } from '../../lib/messages.ts';

/** A part of the books with its ruled head; the same table as a file at the right. */
export function Section({
  title,
  lead,
  csv,
  children,
}: {
  title: ReactNode;
  lead?: ReactNode;
  /** Address of the table as CSV. */
  csv?: string;
  children: ReactNode;
}) {
  const t = useMessages();
  const id = useId();
  return (
    <section aria-labelledby={id} className="min-w-0">
      <div className="flex items-end justify-between gap-4 border-b-2 border-ink">
        <h2 id={id} className="type-narrow pb-1.5 text-[1.1875rem] font-[650]">
          {title}
        </h2>
        {csv ? (
          <a
            href={csv}
            download
            className="type-label inline-flex min-h-12 items-end pb-1.5 whitespace-nowrap desk:min-h-9"
          >
            {t('books.csv')}
          </a>
        ) : null}
      </div>
      {lead ? <p className="max-w-prose pt-2 text-[0.9375rem] text-ink-soft">{lead}</p> : null}
      {children}
    </section>
  );
}
