import type { ReactNode } from 'react';
import { useMessages } from '../../lib/messages.ts';

/** One row of a list in the form: what it is, the way to take it out, and its fields at full width. */
export function ListRow({
  title,
  what,
  onRemove,
  children,
}: {
  title: ReactNode;
  /** Completes "Remove …". */
  what: string;
  /** Absent where it is the only row and has to stay. */
  onRemove?: (() => void) | undefined;
  children: ReactNode;
}) {
  const t = useMessages();
  return (
    <li className="border-b border-rule-faint pb-2">
      <div className="flex min-h-12 items-center justify-between gap-3">
        <span className="type-narrow min-w-0 truncate font-[600]">{title}</span>
        {onRemove ? (
          <button
            type="button"
            aria-label={t('chargeScreen.remove', { what })}
            onClick={onRemove}
            className="-mr-4 grid size-12 shrink-0 place-items-center text-ink-soft hover:text-ink"
          >
            <svg aria-hidden="true" viewBox="0 0 16 16" className="size-3.5 stroke-current stroke-2">
              <path d="M2 2l12 12M14 2L2 14" />
            </svg>
          </button>
        ) : null}
      </div>
      {children}
    </li>
  );
}
