import type { ReactNode } from 'react';

/** One part of the day under its ruled heading; how many stands beside it. */
export function Section({ title, count, children }: { title: string; count?: ReactNode; children: ReactNode }) {
  return (
    <section>
      <h2 className="type-narrow flex items-baseline gap-3 border-b-2 border-ink pb-1.5 text-[1.1875rem] font-[650]">
        {title}
        {count === undefined ? null : <span className="font-[400] text-ink-soft">{count}</span>}
      </h2>
      {children}
    </section>
  );
}

export function Nothing({ children }: { children: ReactNode }) {
  return <p className="py-3 text-ink-soft">{children}</p>;
}
