import { type KeyboardEvent, type ReactNode, useState } from 'react';
import { Link, type To } from 'react-router-dom';

/** The link or button of a row: its first cell, and what a press anywhere in the row stands for. */
export function Opener({
  id,
  tabbable,
  to,
  onOpen,
  children,
}: {
  id: string;
  tabbable: boolean;
  to: To | undefined;
  onOpen: () => void;
  children: ReactNode;
}) {
  const shared = {
    'data-row': id,
    tabIndex: tabbable ? 0 : -1,
    className:
      'inline-flex min-h-12 min-w-12 items-center text-left desk:min-h-8 text-inherit no-underline [text-decoration:inherit]',
  };
  return to === undefined ? (
    <button {...shared} type="button" onClick={onOpen}>
      {children}
    </button>
  ) : (
    <Link {...shared} to={to}>
      {children}
    </Link>
  );
}

/** A press on a row is a press on its first cell, unless it hit another control or ended a selection of text. */
export function openRow(event: React.MouseEvent<HTMLTableRowElement>): void {
  if ((event.target as Element).closest('a, button, input, select')) return;
  if (window.getSelection()?.isCollapsed === false) return;
  const opener = event.currentTarget.querySelector<HTMLElement>('[data-row]');
  opener?.focus({ preventScroll: true });
  opener?.click();
}

/** Puts the focus back on a row, once what it opened is closed. */
export function focusRow(region: HTMLElement | null, id: string): void {
  region?.querySelector<HTMLElement>(`[data-row="${CSS.escape(id)}"]`)?.focus();
}

interface Rows<Row> {
  rows: readonly Row[];
  rowId: (row: Row) => string;
  openId?: string | null;
  more?: { has: boolean; loading: boolean; load: () => void };
}

/** One row is in the order of the Tab key; the arrow keys, Home and End go on from there. */
export function useRowKeys<Row extends object>({ rows, rowId, openId, more }: Rows<Row>) {
  const [active, setActive] = useState<string | null>(null);
  const has = (id: string | null | undefined) => id != null && rows.some((row) => rowId(row) === id);
  const tabbed = has(active) ? active : has(openId) ? openId : null;
  return {
    tabbable: (id: string, position: number) => (tabbed == null ? position === 0 : tabbed === id),
    onFocus: (event: React.FocusEvent) => {
      const id = (event.target as HTMLElement).dataset.row;
      if (id !== undefined) setActive(id);
    },
    onKeyDown: (event: KeyboardEvent<HTMLTableSectionElement>) => {
      if (event.altKey || event.ctrlKey || event.metaKey) return;
      const all = [...event.currentTarget.querySelectorAll<HTMLElement>('[data-row]')];
      const at = all.indexOf(event.target as HTMLElement);
      const next = { ArrowDown: at + 1, ArrowUp: at - 1, Home: 0, End: all.length - 1 }[event.key];
      if (at === -1 || next === undefined) return;
      event.preventDefault();
      if (next >= all.length && more?.has && !more.loading) more.load();
      all[Math.max(0, Math.min(next, all.length - 1))]?.focus();
    },
  };
}
