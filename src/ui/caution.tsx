import type { ReactNode } from 'react';
import { useMessages } from '../lib/messages.ts';

/** The signal words of ANSI Z535.4 (and ISO 3864-4 for their colours), the gravest first. */
export type Signal = 'danger' | 'warning' | 'caution' | 'notice';

const PANEL: Record<Signal, string> = {
  danger: 'bg-danger text-on-danger',
  warning: 'bg-warning text-on-warning',
  caution: 'bg-caution text-on-caution',
  notice: 'bg-notice text-on-notice',
};

/** One hazard where the work is: the signal word with its symbol and colour, then what to do, in ordinary ink. */
export function Caution({ signal, children }: { signal: Signal; children: ReactNode }) {
  return (
    <p className="grid items-start justify-items-start gap-x-3 gap-y-1 text-[0.9375rem] leading-snug xs:grid-cols-[7.75rem_minmax(0,1fr)]">
      <SignalWord signal={signal} />
      <span className="pt-px">{children}</span>
    </p>
  );
}

export function SignalWord({ signal }: { signal: Signal }) {
  const t = useMessages();
  return (
    <strong
      className={`type-label inline-flex min-h-6 items-center gap-1.5 px-2 xs:w-full text-[0.875rem] leading-none font-[700] ${PANEL[signal]}`}
    >
      {signal === 'notice' ? null : <AlertSymbol />}
      {t(`ui.signal.${signal}`)}
    </strong>
  );
}

/** The safety alert symbol: a triangle with an exclamation mark. NOTICE, which is about property, goes without. */
function AlertSymbol() {
  return (
    <svg aria-hidden="true" viewBox="0 0 14 12" className="h-3 w-3.5 shrink-0">
      <path
        fillRule="evenodd"
        className="fill-current"
        d="M7 0.2L13.9 11.9H0.1zM6.2 4.1L6.45 8.1H7.55L7.8 4.1zM6.2 8.9V10.4H7.8V8.9z"
      />
    </svg>
  );
}
