import { useId } from 'react';
import { Link, useSearchParams } from 'react-router-dom';
import type { BooksResponse } from '../../../shared/books/books.schema.ts';
import { type BooksPeriod, booksCsvPath } from '../../api/books.ts';
import { useMessages } from '../../lib/messages.ts';
import { readTable, TABLES, type TableName } from './books-period.ts';
import { CostTable } from './tables/cost-table.tsx';
import { CylinderTable } from './tables/cylinder-table.tsx';
import { JobTable } from './tables/job-table.tsx';
import { PeopleTable } from './tables/people-table.tsx';
import { PlaceTable } from './tables/place-table.tsx';
import { PurchaseTable } from './tables/purchase-table.tsx';
import { SupplierTable } from './tables/supplier-table.tsx';

/** The same books split by whatever one asks by; one table at a time, each fetched when it is opened. */
export function BookTables({ period, books }: { period: BooksPeriod; books: BooksResponse }) {
  const t = useMessages();
  const [search] = useSearchParams();
  const shown = readTable(search);
  const titleId = useId();
  return (
    <section aria-labelledby={titleId} className="min-w-0">
      <h2 id={titleId} className="sr-only">
        {t('books.tables')}
      </h2>
      <div className="flex flex-wrap items-end justify-between gap-x-6 border-b-2 border-ink">
        <nav aria-label={t('books.tables')} className="flex flex-wrap gap-x-6">
          {TABLES.map((name) => (
            <Link
              key={name}
              to={`?${withTable(search, name)}`}
              replace
              preventScrollReset
              aria-current={name === shown ? 'true' : undefined}
              className={`type-narrow inline-flex min-h-12 items-center no-underline desk:min-h-10 ${name === shown ? 'font-[680] text-ink shadow-[inset_0_-4px_0_var(--color-rest)]' : 'text-ink-soft hover:text-ink'}`}
            >
              {t(`books.table.${name}`)}
            </Link>
          ))}
        </nav>
        <a
          href={booksCsvPath(shown, period)}
          download
          className="type-label inline-flex min-h-12 items-end pb-1.5 desk:min-h-9"
        >
          {t('books.csv')}
        </a>
      </div>
      <p className="max-w-prose pt-2 text-[0.9375rem] text-ink-soft">{t(`books.table.${shown}.lead`)}</p>
      <Table name={shown} period={period} books={books} />
    </section>
  );
}

function withTable(search: URLSearchParams, name: TableName): URLSearchParams {
  const next = new URLSearchParams(search);
  next.set('table', name);
  return next;
}

function Table({ name, period, books }: { name: TableName; period: BooksPeriod; books: BooksResponse }) {
  switch (name) {
    case 'cylinders':
      return <CylinderTable period={period} />;
    case 'people':
      return <PeopleTable period={period} />;
    case 'suppliers':
      return <SupplierTable period={period} />;
    case 'jobs':
      return <JobTable period={period} />;
    case 'purchases':
      return <PurchaseTable period={period} />;
    case 'cost':
      return <CostTable period={period} />;
    case 'places':
      return <PlaceTable books={books} />;
  }
}
