import type { ReactNode } from 'react';
import { Page } from '../../ui/page.tsx';

/** The narrow page that the pages around signing in share: one question, one wide button. */
export function SessionPage({ title, lead, children }: { title: string; lead?: ReactNode; children: ReactNode }) {
  return (
    <Page title={title} {...(lead ? { lead } : {})}>
      <div className="page-gutter pt-5">
        <div className="flex w-full max-w-md flex-col gap-5">{children}</div>
      </div>
    </Page>
  );
}
