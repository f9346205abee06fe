import type { ReactNode } from 'react';
import { useMessages } from '../lib/messages.ts';
import { Button } from './button.tsx';

/** Something worth knowing that is no hazard: a warning about a figure, what a page is waiting for. No colour. */
export function Notice({
  title,
  children,
  role,
}: {
  title?: ReactNode;
  children?: ReactNode;
  role?: 'status' | 'alert';
}) {
  return (
    <div role={role} className="border-l-4 border-ink-soft py-0.5 pl-3 leading-snug">
      {title ? <p className="font-[600]">{title}</p> : null}
      {children ? <div className="text-[0.9375rem] text-ink-soft">{children}</div> : null}
    </div>
  );
}

/** Said where the eye is when something has been done. */
export function Done({ children }: { children: ReactNode }) {
  return (
    <p role="status" className="flex items-center gap-2.5 border-l-4 border-rest py-1 pl-3 font-[600]">
      {children}
    </p>
  );
}

/** An empty list says what to do first. */
export function Empty({ title, children, action }: { title: ReactNode; children?: ReactNode; action?: ReactNode }) {
  return (
    <div className="flex max-w-prose flex-col items-start gap-3 border-t border-rule py-6">
      <p className="type-title text-[1.25rem]">{title}</p>
      {children ? <div className="text-ink-soft">{children}</div> : null}
      {action}
    </div>
  );
}

/** A failure never looks like an empty list: it says so and offers another try. `title` where something was to be kept, not loaded. */
export function Failed({ error, title, onRetry }: { error: unknown; title?: ReactNode; onRetry?: () => void }) {
  const t = useMessages();
  const message = error instanceof Error ? error.message : '';
  return (
    <div role="alert" className="flex max-w-prose flex-col items-start gap-3 border-l-4 border-ink py-2 pl-4">
      <p className="font-[600]">{title ?? t('ui.failed')}</p>
      {message ? <p className="text-ink-soft">{message}</p> : null}
      {onRetry ? <Button onClick={onRetry}>{t('ui.tryAgain')}</Button> : null}
    </div>
  );
}

/** The shape of rows to come, as high as the rows will be, so that nothing jumps. */
export function RowsSkeleton({ rows = 6, rowClass = 'h-14' }: { rows?: number; rowClass?: string }) {
  const t = useMessages();
  return (
    <div aria-busy="true" className="animate-pulse">
      <span className="sr-only" role="status">
        {t('ui.loading')}
      </span>
      {Array.from({ length: rows }, (_, row) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: placeholders have no identity
        <div key={row} className={`flex items-center gap-6 border-b border-rule-faint ${rowClass}`}>
          <span className="h-3 w-1/6 bg-well" />
          <span className="h-3 w-1/3 bg-well" />
          <span className="ml-auto h-3 w-1/8 bg-well" />
        </div>
      ))}
    </div>
  );
}
