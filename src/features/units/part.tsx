import type { ReactNode } from 'react';

/** One part of a unit's page under its ruled heading, with the way to change it at the right edge. */
export function Part({ title, action, children }: { title: string; action?: ReactNode; children: ReactNode }) {
  return (
    <section>
      <div className="flex min-h-10 items-end justify-between gap-4 border-b-2 border-ink pb-1.5">
        <h2 className="type-narrow text-[1.1875rem] font-[650]">{title}</h2>
        {action}
      </div>
      {children}
    </section>
  );
}

/** Name left, fact right, a hairline under it. */
export function Fact({ name, children }: { name: string; children: ReactNode }) {
  return (
    <div className="grid grid-cols-[minmax(0,2fr)_minmax(0,3fr)] items-baseline gap-x-4 border-b border-rule-faint py-2">
      <dt className="type-label text-ink-soft">{name}</dt>
      <dd className="min-w-0 leading-snug">{children}</dd>
    </div>
  );
}
