import type { ReactNode } from 'react';
import { useOnline } from '../lib/connection.ts';
import { useMessages } from '../lib/messages.ts';

interface Props {
  title: ReactNode;
  /** Plain words for the browser's tab where `title` is more than text. */
  tabTitle?: string;
  /** One sentence under the title; on a phone under the page's head. */
  lead?: ReactNode;
  /** Left of the title: one step back inside this page. */
  back?: { label: string; onPress: () => void } | null;
  /** Small words at the right of a phone's head: which cylinder, which step. */
  status?: ReactNode;
  /** Links and buttons at the right of the title on a desk, under the head on a phone. */
  actions?: ReactNode;
  /** The next action: a wide button within thumb reach, stuck above the bottom bar on a phone. */
  next?: ReactNode;
  /** A screen that is used with gloves on: 18 px text. */
  field?: boolean;
  /** The page is as high as its place and its content scrolls in itself: a list beside a sheet. */
  fill?: boolean;
  children: ReactNode;
}

/** A page: a slim head on a phone, a large title on a desk, and the next action where the thumb is. */
export function Page({
  title,
  tabTitle,
  lead,
  back,
  status,
  actions,
  next,
  field = false,
  fill = false,
  children,
}: Props) {
  const t = useMessages();
  const online = useOnline();
  const inTab = tabTitle ?? (typeof title === 'string' ? title : '');
  return (
    <div className={`flex flex-1 flex-col ${field ? 'field-screen' : ''} ${fill ? 'min-h-0 min-w-0' : ''}`}>
      <title>{inTab ? `${inTab} · Tarewright` : 'Tarewright'}</title>
      <div className="sticky top-0 z-10 border-b-2 border-ink bg-ground page-gutter desk:static desk:border-0 desk:bg-transparent">
        <div className="flex min-h-14 items-center justify-between gap-4 desk:min-h-0 desk:flex-wrap desk:items-end desk:gap-x-8 desk:gap-y-1 desk:pt-6">
          {back ? (
            <button
              type="button"
              aria-label={back.label}
              title={back.label}
              onClick={back.onPress}
              className="-mr-2 -ml-3 grid size-12 shrink-0 place-items-center text-rest desk:-mb-1.5"
            >
              <svg aria-hidden="true" viewBox="0 0 8 14" className="h-3.5 w-2 fill-none stroke-current stroke-2">
                <path d="M7 1L1 7l6 6" />
              </svg>
            </button>
          ) : null}
          <h1 className="type-narrow min-w-0 flex-1 truncate text-[1.0625rem] font-[640] desk:min-w-min desk:whitespace-normal desk:text-[1.875rem] desk:[overflow-wrap:normal] desk:type-title">
            {title}
          </h1>
          <div className="type-label flex shrink-0 items-center gap-4 text-ink-soft desk:shrink">
            {online ? null : <span className="text-ink">{t('frame.offline')}</span>}
            {status}
            {actions ? (
              <span className="hidden flex-wrap items-center justify-end gap-x-5 gap-y-1 desk:flex">{actions}</span>
            ) : null}
          </div>
        </div>
      </div>
      {lead ? <p className="page-gutter pt-3 text-ink-soft desk:pt-1">{lead}</p> : null}
      {actions ? <div className="page-gutter flex flex-wrap gap-x-5 pt-2 desk:hidden">{actions}</div> : null}
      <div className={`flex flex-1 flex-col ${fill ? 'min-h-0' : 'pb-6'}`}>{children}</div>
      {next ? (
        <div className="page-gutter sticky bottom-[calc(3.875rem+2px+env(safe-area-inset-bottom))] z-10 bg-linear-to-t from-ground from-75% to-transparent pt-5 pb-3 desk:static desk:bg-none desk:pb-8">
          <div className="desk:max-w-md">{next}</div>
        </div>
      ) : null}
    </div>
  );
}
