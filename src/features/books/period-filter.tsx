import type { ReactNode } from 'react';
import { useSearchParams } from 'react-router-dom';
import type { BooksPeriod } from '../../api/books.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { FilterBar, FilterSelect } from '../../ui/filter-bar.tsx';
import { longMonth } from './book-words.ts';
import { withPeriod } from './books-period.ts';

/** Which months and which refrigerant, as they stand in the address. */
export function PeriodFilter({
  period,
  months,
  refrigerants,
  end,
  children,
}: {
  period: BooksPeriod;
  /** That there are, the latest first. */
  months: readonly string[];
  /** Left out where there is no choice of one. */
  refrigerants?: readonly string[];
  end?: ReactNode;
  children?: ReactNode;
}) {
  const t = useMessages();
  const { locale } = useFormat();
  const [, setSearch] = useSearchParams();
  const set = (change: Partial<Record<'from' | 'to' | 'refrigerant', string>>) =>
    setSearch((before) => withPeriod(before, period, change), { replace: true });
  const choices = months.map((month) => ({ value: month, label: longMonth(locale, month) }));
  const year = period.to.slice(0, 4);
  const ofYear = months.filter((month) => month.startsWith(year));
  return (
    <FilterBar summary={[periodWords(locale, period), period.refrigerant].filter(Boolean).join(', ')} end={end}>
      <FilterSelect label={t('books.from')} value={period.from} choices={choices} onChange={(from) => set({ from })} />
      <FilterSelect label={t('books.to')} value={period.to} choices={choices} onChange={(to) => set({ to })} />
      {refrigerants ? (
        <FilterSelect
          label={t('books.refrigerant')}
          any={t('books.refrigerant.all')}
          value={period.refrigerant ?? ''}
          choices={refrigerants.map((name) => ({ value: name, label: name }))}
          onChange={(refrigerant) => set({ refrigerant })}
        />
      ) : null}
      {children}
      <span className="flex flex-wrap gap-x-5 not-desk:col-span-2">
        <Button kind="quiet" onClick={() => set({ from: ofYear.at(-1) ?? period.from, to: ofYear[0] ?? period.to })}>
          {t('books.wholeYear', { year })}
        </Button>
      </span>
    </FilterBar>
  );
}

/** `November 2026`, `January 2026 to November 2026`. */
export const periodWords = (locale: string, { from, to }: Pick<BooksPeriod, 'from' | 'to'>): string =>
  from === to ? longMonth(locale, from) : `${longMonth(locale, from)}\u2013${longMonth(locale, to)}`;
