import type { ReactNode } from 'react';

/** Facts about one thing, ruled: the name condensed at the left, what it is at the right of it. */
export function Facts({ children, className = '' }: { children: ReactNode; className?: string }) {
  return <dl className={`border-t border-rule ${className}`}>{children}</dl>;
}

export function Fact({ name, children }: { name: ReactNode; children: ReactNode }) {
  return (
    <div className="grid grid-cols-[6.5rem_minmax(0,1fr)] gap-x-3 border-b border-rule-faint py-2 leading-snug xs:grid-cols-[7.5rem_minmax(0,1fr)]">
      <dt className="type-label text-ink-soft">{name}</dt>
      <dd className="min-w-0">{children}</dd>
    </div>
  );
}
