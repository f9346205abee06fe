import type { ReactNode } from 'react';
import { Chevron } from './field.tsx';

/** More of a form behind one clear line. `summary` says what is inside and, once set, to what. Native: it works unscripted. */
export function Disclosure({
  title,
  summary,
  open,
  onToggle,
  children,
}: {
  title: ReactNode;
  summary?: ReactNode;
  open?: boolean;
  onToggle?: (open: boolean) => void;
  children: ReactNode;
}) {
  return (
    <details
      className="group border-b border-rule"
      open={open}
      onToggle={onToggle ? (event) => onToggle(event.currentTarget.open) : undefined}
    >
      <summary className="relative flex min-h-14 items-center justify-between gap-4 pr-6 hover:bg-well">
        <span className="font-[600]">{title}</span>
        {summary ? <span className="type-label line-clamp-2 min-w-0 text-right text-ink-soft">{summary}</span> : null}
        <span className="transition-transform group-open:rotate-180 [&>svg]:static [&>svg]:translate-y-0 absolute right-1">
          <Chevron className="" />
        </span>
      </summary>
      <div className="pb-4">{children}</div>
    </details>
  );
}
