import type { ReactNode } from 'react';

/** Answers of one question as ruled lines, each as wide as the screen and at least 56 px high; a press answers and goes on. */
export function ChoiceList({ children, label }: { children: ReactNode; label?: string }) {
  return (
    <ul aria-label={label} className="border-t border-rule">
      {children}
    </ul>
  );
}

export function ChoiceRow({
  title,
  detail,
  aside,
  children,
  onChoose,
  chosen = false,
}: {
  title: ReactNode;
  detail?: ReactNode;
  /** At the right edge: a mass, a date. */
  aside?: ReactNode;
  /** Under the words, across the whole row: a beam. */
  children?: ReactNode;
  onChoose: () => void;
  /** What was chosen before, on the way back or the last time. */
  chosen?: boolean;
}) {
  return (
    <li className="border-b border-rule">
      <button
        type="button"
        onClick={onChoose}
        className={`flex min-h-14 w-full flex-col gap-1 py-2.5 text-left hover:bg-well ${chosen ? 'shadow-[inset_4px_0_0_var(--color-rest)] pl-3' : ''}`}
      >
        <span className="flex w-full items-baseline justify-between gap-4">
          <span className="font-[600]">{title}</span>
          <span className="flex shrink-0 items-baseline gap-3 text-ink-soft">
            {aside}
            <svg aria-hidden="true" viewBox="0 0 6 10" className="h-2.5 w-1.5 fill-none stroke-rest stroke-[1.8]">
              <path d="M1 1l4 4-4 4" />
            </svg>
          </span>
        </span>
        {detail ? <span className="text-[0.9375rem] leading-snug text-ink-soft">{detail}</span> : null}
        {children}
      </button>
    </li>
  );
}
