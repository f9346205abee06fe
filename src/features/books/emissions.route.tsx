import { keepPreviousData, useQuery } from '@tanstack/react-query';
import { Link, type LoaderFunctionArgs, useSearchParams } from 'react-router-dom';
import { EMISSIONS_BY, type EmissionsResponse } from '../../../shared/books/emissions.schema.ts';
import type { PeriodsResponse } from '../../../shared/periods/periods.schema.ts';
import { GWP_SETS } from '../../../shared/reference/gwp.ts';
import { bookQueries, emissionsCsvPath } from '../../api/books.ts';
import { periodQueries } from '../../api/periods.ts';
import { requireSession } from '../../api/session.ts';
import { useFormat } from '../../lib/format.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { FilterSelect } from '../../ui/filter-bar.tsx';
import { Failed, RowsSkeleton } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { asTitle } from './book-words.ts';
import { readPeriod, usualMonth, usualYear } from './books-period.ts';
import { EmissionChart } from './emissions/emission-chart.tsx';
import { EmissionTable } from './emissions/emission-table.tsx';
import { EmissionTotals } from './emissions/emission-totals.tsx';
import { PeriodFilter, periodWords } from './period-filter.tsx';
import { Section } from './section.tsx';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('books', 'server')]);
  return null;
}

/** What went to the atmosphere, as the log has it: in mass and in t CO2 equivalent by a set that is named. */
export function Component() {
  const t = useMessages();
  const periods = useQuery(periodQueries.list());
  const usual = periods.data ? usualMonth(periods.data) : null;
  if (periods.data && usual !== null) return <Emissions periods={periods.data} usual={usual} />;
  return (
    <Page title={t('books.emissions')}>
      <div className="page-gutter pt-4">
        {periods.isError ? (
          <Failed error={periods.error} onRetry={() => void periods.refetch()} />
        ) : periods.data ? (
          <p>{t('books.emissions.none')}</p>
        ) : (
          <RowsSkeleton rows={10} />
        )}
      </div>
    </Page>
  );
}

function Emissions({ periods, usual }: { periods: PeriodsResponse; usual: string }) {
  const t = useMessages();
  const format = useFormat();
  const [search, setSearch] = useSearchParams();
  const { from, to } = readPeriod(search, usualYear(periods, usual));
  const by = EMISSIONS_BY.find((name) => name === search.get('by')) ?? 'refrigerant';
  const gwpSet = GWP_SETS.find((name) => name === search.get('gwpSet'));
  const asked = { from, to, by, gwpSet };
  const emissions = useQuery({ ...bookQueries.emissions(asked), placeholderData: keepPreviousData });
  const monthly = useQuery({
    ...bookQueries.emissions({ ...asked, by: 'month' }),
    enabled: from !== to,
    placeholderData: keepPreviousData,
  });
  const set = (name: string, value: string) =>
    setSearch(
      (before) => {
        const next = new URLSearchParams(before);
        next.set(name, value);
        return next;
      },
      { replace: true },
    );
  return (
    <Page
      title={t('books.emissions')}
      lead={asTitle(periodWords(format.locale, { from, to }))}
      actions={
        <Link to={`/books?from=${from}&to=${to}`} className="inline-flex min-h-12 items-center">
          {t('books.close.toBooks')}
        </Link>
      }
    >
      <div className="pt-3">
        <PeriodFilter period={{ from, to }} months={periods.items.map(({ month }) => month)}>
          <FilterSelect
            label={t('books.emissions.by')}
            value={by}
            choices={EMISSIONS_BY.map((name) => ({ value: name, label: t(`books.emissions.by.${name}`) }))}
            onChange={(value) => set('by', value)}
          />
          <FilterSelect
            label={t('books.emissions.gwpSet')}
            value={gwpSet ?? emissions.data?.gwpSet.name ?? ''}
            choices={GWP_SETS.map((name) => ({ value: name, label: t(`books.gwpSet.${name}`) }))}
            onChange={(value) => set('gwpSet', value)}
          />
        </PeriodFilter>
      </div>
      <div className={`page-gutter flex flex-col gap-9 pt-6 ${emissions.isPlaceholderData ? 'opacity-60' : ''}`}>
        {emissions.isError ? (
          <Failed error={emissions.error} onRetry={() => void emissions.refetch()} />
        ) : emissions.data ? (
          <>
            <EmissionTotals emissions={emissions.data} />
            {from !== to && monthly.data ? (
              <Section title={t('books.emissions.byMonth')} csv={emissionsCsvPath({ ...asked, by: 'month' })}>
                <EmissionChart emissions={monthly.data} from={from} to={to} />
              </Section>
            ) : null}
            <Section title={t(`books.emissions.table.${by}`)} csv={emissionsCsvPath(asked)}>
              <EmissionTable emissions={emissions.data} />
            </Section>
            <Sources emissions={emissions.data} />
          </>
        ) : (
          <RowsSkeleton rows={12} />
        )}
      </div>
    </Page>
  );
}

/** Where each figure of the set was read. */
function Sources({ emissions: { gwpSet } }: { emissions: EmissionsResponse }) {
  const t = useMessages();
  if (gwpSet.sources.length === 0) return null;
  return (
    <Section title={t('books.emissions.sources', { gwpSet: t(`books.gwpSet.${gwpSet.name}`) })}>
      <dl className="text-[0.9375rem]">
        {gwpSet.sources.map(({ refrigerant, source }) => (
          <div
            key={refrigerant}
            className="grid grid-cols-[6rem_minmax(0,1fr)] gap-x-3 border-b border-rule-faint py-2 leading-snug"
          >
            <dt className="font-[600]">{refrigerant}</dt>
            <dd className="min-w-0 text-ink-soft [overflow-wrap:anywhere]">{source}</dd>
          </div>
        ))}
      </dl>
    </Section>
  );
}
