import { keepPreviousData, useQuery } from '@tanstack/react-query';
import { Link, type LoaderFunctionArgs, useSearchParams } from 'react-router-dom';
import type { BooksResponse, DifferencesResponse } from '../../../shared/books/books.schema.ts';
import type { PeriodsResponse } from '../../../shared/periods/periods.schema.ts';
import { type BooksPeriod, bookQueries, booksCsvPath } from '../../api/books.ts';
import { useExportPath } from '../../api/exports.ts';
import { periodQueries } from '../../api/periods.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { type Formats, useFormat } from '../../lib/format.ts';
import { loadMessages, type Translate, useMessages } from '../../lib/messages.ts';
import { ButtonLink } from '../../ui/button.tsx';
import { Empty, Failed, RowsSkeleton } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { TakeOutLink } from '../../ui/take-out-link.tsx';
import { BookTables } from './book-tables.tsx';
import { asTitle, bookMass, longMonth } from './book-words.ts';
import { lastDayOf, readPeriod, usualMonth } from './books-period.ts';
import { DifferenceList } from './difference-list.tsx';
import { DifferencePlaces } from './difference-places.tsx';
import { FlowPicture } from './flow-picture.tsx';
import { PeriodFilter, periodWords } from './period-filter.tsx';
import { Section } from './section.tsx';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('books', 'statement', 'log-screen', 'server')]);
  return null;
}

/** The owner's balance: what the scales do not explain first, then in = out, then by whatever it can be split by. */
export function Component() {
  const t = useMessages();
  const periods = useQuery(periodQueries.list());
  const usual = periods.data ? usualMonth(periods.data) : null;
  if (periods.data && usual !== null) return <Books periods={periods.data} usual={usual} />;
  return (
    <Page title={t('books.title')}>
      <div className="page-gutter pt-4">
        {periods.isError ? (
          <Failed error={periods.error} onRetry={() => void periods.refetch()} />
        ) : periods.data ? (
          <Empty
            title={t('books.empty')}
            action={
              <ButtonLink kind="act" to="/cylinders/new">
                {t('books.empty.action')}
              </ButtonLink>
            }
          >
            {t('books.empty.text')}
          </Empty>
        ) : (
          <RowsSkeleton rows={10} />
        )}
      </div>
    </Page>
  );
}

function Books({ periods, usual }: { periods: PeriodsResponse; usual: string }) {
  const t = useMessages();
  const format = useFormat();
  const [search] = useSearchParams();
  const period = readPeriod(search, { from: usual, to: usual });
  const books = useQuery({ ...bookQueries.books(period), placeholderData: keepPreviousData });
  const differences = useQuery({ ...bookQueries.differences(period), placeholderData: keepPreviousData });
  const title = asTitle([periodWords(format.locale, period), period.refrigerant].filter(Boolean).join(', '));
  const failed = [books, differences].find(({ isError }) => isError);
  const isOld = books.isPlaceholderData || differences.isPlaceholderData;
  return (
    <Page
      title={<span className="desk:whitespace-nowrap">{title}</span>}
      tabTitle={title}
      {...(differences.data ? { lead: leadOf(t, format, differences.data) } : {})}
      actions={<Ways periods={periods} period={period} />}
    >
      <div className="pt-3">
        <PeriodFilter
          period={period}
          months={periods.items.map(({ month }) => month)}
          refrigerants={books.data?.refrigerants ?? []}
        />
      </div>
      <div className={`page-gutter flex flex-col gap-9 pt-6 ${isOld ? 'opacity-60' : ''}`}>
        {failed ? (
          <Failed
            error={failed.error}
            onRetry={() => {
              void books.refetch();
              void differences.refetch();
            }}
          />
        ) : books.data && differences.data ? (
          <>
            <DifferenceList period={period} found={differences.data} />
            <InAndOut books={books.data} csv={booksCsvPath('equation', period)} />
            <DifferencePlaces period={period} books={books.data} />
            <BookTables period={period} books={books.data} />
          </>
        ) : (
          <RowsSkeleton rows={12} />
        )}
      </div>
    </Page>
  );
}

function InAndOut({ books, csv }: { books: BooksResponse; csv: string }) {
  const t = useMessages();
  return (
    <Section title={t('books.inIsOut')} csv={csv}>
      <div className="pt-3">
        {books.equation.totalG === 0 ? (
          <p className="text-ink-soft">{t('books.nothingMoved')}</p>
        ) : (
          <FlowPicture books={books} />
        )}
      </div>
    </Section>
  );
}

/** `Differences 1.3 kg: 1.2 kg within the scales, 130 g not explained by them.` */
function leadOf(t: Translate, format: Formats, { totals }: DifferencesResponse): string {
  const parts = (['notExplained', 'lookAgain', 'withinScales', 'byCertificate'] as const).flatMap((name) => {
    const massG = totals[`${name}G`];
    return massG === 0 ? [] : t(`books.lead.${name}`, { mass: bookMass(format, massG) });
  });
  const settled = totals.settledG === 0 ? [] : [t('books.lead.settled', { mass: bookMass(format, totals.settledG) })];
  return parts.length + settled.length === 0
    ? t('books.lead.none')
    : t('books.lead', { parts: format.list([...parts, ...settled]) });
}

/** On to the month that is to be closed, to emissions, and to what is handed over of this period. */
function Ways({ periods: { next }, period }: { periods: PeriodsResponse; period: BooksPeriod }) {
  const t = useMessages();
  const { locale } = useFormat();
  const settles = usePermission('books:settle');
  const { from, to } = period;
  const report = useExportPath('periodReport', { from, to });
  const disposal = useExportPath('disposalReport', { from, to });
  const proves = usePermission('exports:make');
  return (
    <>
      {next && settles ? (
        <Link to={`/books/close/${next}`} className="inline-flex min-h-12 items-center font-[600]">
          {t('books.toClose', { month: longMonth(locale, next) })}
        </Link>
      ) : null}
      <Link to="/books/emissions" className="inline-flex min-h-12 items-center">
        {t('books.toEmissions')}
      </Link>
      <TakeOutLink to={report} label={t('books.toReport')} />
      <TakeOutLink to={disposal} label={t('books.toDisposal')} />
      {proves ? (
        <Link to={`/log/proof?from=${from}-01&to=${lastDayOf(to)}`} className="inline-flex min-h-12 items-center">
          {t('books.toProof')}
        </Link>
      ) : null}
    </>
  );
}
