import type { ReactNode } from 'react';

/** How much a word weighs: an empty, a half or a full square, and the weight of its letters. */
export type Weight = 'empty' | 'half' | 'full';

const LETTERS: Record<Weight, string> = { empty: '', half: 'font-[600]', full: 'font-[700]' };

/** A verdict's words with their own form beside them, so that no colour has to tell them apart. */
export function Weighed({
  weight,
  className = '',
  children,
}: {
  weight: Weight;
  className?: string;
  children: ReactNode;
}) {
  return (
    <span className={`inline-flex items-center gap-2 whitespace-nowrap ${LETTERS[weight]} ${className}`}>
      <svg aria-hidden="true" viewBox="0 0 10 10" className="size-2.5 shrink-0 fill-none stroke-current">
        <path d="M.75 .75h8.5v8.5H.75z" strokeWidth="1.5" />
        {weight === 'empty' ? null : (
          <path d={weight === 'half' ? 'M.75 9.25h8.5V.75z' : 'M.75 .75h8.5v8.5H.75z'} className="fill-current" />
        )}
      </svg>
      {children}
    </span>
  );
}
