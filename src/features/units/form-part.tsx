import type { ReactNode } from 'react';

/** One part of a long form under its ruled heading. */
export function FormPart({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section className="flex flex-col gap-1 pb-6">
      <h2 className="type-narrow mb-1 border-b-2 border-ink pb-1.5 text-[1.1875rem] font-[650]">{title}</h2>
      {children}
    </section>
  );
}
