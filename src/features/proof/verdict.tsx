import type { ReactNode } from 'react';
import { useMessages } from '../../lib/messages.ts';

/** Intact or not: by a word, a mark and weight, never by colour alone. */
export function Verdict({ intact, children }: { intact: boolean; children: ReactNode }) {
  const t = useMessages();
  return (
    <div role={intact ? 'status' : 'alert'} className={`border-l-8 py-1 pl-4 ${intact ? 'border-rest' : 'border-ink'}`}>
      <p className="type-title flex items-center gap-2.5 text-[1.375rem]">
        <svg aria-hidden="true" viewBox="0 0 16 16" className="size-5 shrink-0 fill-none stroke-current stroke-[2.2]">
          <path d={intact ? 'M2 8.5l4 4L14 3.5' : 'M3 3l10 10M13 3L3 13'} />
        </svg>
        {t(intact ? 'proof.intact' : 'proof.notIntact')}
      </p>
      <div className="flex flex-col gap-2 leading-snug">{children}</div>
    </div>
  );
}

/** How far a check is, on a graduated line. */
export function CheckProgress({ value, of, label }: { value: number; of: number; label: string }) {
  const share = of > 0 ? Math.min(1, value / of) : 0;
  return (
    <div
      role="progressbar"
      aria-label={label}
      aria-valuemin={0}
      aria-valuemax={100}
      aria-valuenow={Math.floor(share * 100)}
      className="flex flex-col gap-1"
    >
      <span className="relative block h-3 border-b-2 border-ink bg-[repeating-linear-gradient(90deg,var(--color-rule)_0_1px,transparent_1px_10%)]">
        <span className="absolute inset-y-0 left-0 bg-rest-fill" style={{ width: `${share * 100}%` }} />
      </span>
      <span className="type-label text-ink-soft" aria-hidden="true">
        {label}
      </span>
    </div>
  );
}
