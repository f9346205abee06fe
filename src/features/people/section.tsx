import { type ReactNode, useId } from 'react';

/** One part of a page under its own heading, with what can be done at the right of it. */
export function Section({ title, action, children }: { title: string; action?: ReactNode; children: ReactNode }) {
  const id = useId();
  return (
    <section aria-labelledby={id} className="flex flex-col gap-2">
      <div className="flex min-h-12 flex-wrap items-center justify-between gap-x-4 gap-y-2">
        <h2 id={id} className="type-title text-[1.25rem]">
          {title}
        </h2>
        {action}
      </div>
      {children}
    </section>
  );
}
