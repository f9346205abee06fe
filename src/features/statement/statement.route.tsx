import { keepPreviousData, useQuery } from '@tanstack/react-query';
import { Link, type LoaderFunctionArgs, useParams, useSearchParams } from 'react-router-dom';
import { useExportPath } from '../../api/exports.ts';
import { requireSession } from '../../api/session.ts';
import { type StatementPeriod, statementCsvPath, statementQueries } from '../../api/statements.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow } from '../../lib/local-time.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { TextField } from '../../ui/field.tsx';
import { Failed, RowsSkeleton } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { TakeOutLink } from '../../ui/take-out-link.tsx';
import { HeldBetween } from './held-between.tsx';
import './statement.css';
import { StatementFigures } from './statement-figures.tsx';
import { StatementLines } from './statement-lines.tsx';
import { PRESETS, presetPeriod, readPeriod, withPeriod } from './statement-period.ts';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('statement', 'log-screen', 'server')]);
  return null;
}

/** The statement of one cylinder, like a bank's: for any period, on screen and on paper. */
export function Component() {
  const { cylinderId = '' } = useParams();
  const [search] = useSearchParams();
  const t = useMessages();
  const format = useFormat();
  const period = readPeriod(search);
  const statement = useQuery({ ...statementQueries.of(cylinderId, period), placeholderData: keepPreviousData });
  const { data } = statement;
  const asPdf = useExportPath('cylinderStatement', {
    cylinderId,
    from: period.from ?? data?.from,
    to: period.to ?? data?.to,
  });
  return (
    <Page
      title={data ? t('statement.title', { tag: data.cylinder.tag }) : t('statement.titleBare')}
      status={<span className="desk:hidden">{data?.cylinder.refrigerant}</span>}
      {...(data
        ? {
            lead: t('statement.lead', {
              from: format.day(data.from),
              to: format.day(data.to),
              refrigerant: data.cylinder.refrigerant,
              firm: data.firmName,
            }),
          }
        : {})}
      actions={
        <span className="not-on-paper contents">
          <Button kind="quiet" onClick={() => window.print()}>
            {t('statement.print')}
          </Button>
          <a href={statementCsvPath(cylinderId, period)} download className="inline-flex min-h-12 items-center">
            {t('statement.csv')}
          </a>
          <TakeOutLink to={asPdf} label={t('statement.pdf')} />
          <Link to={`/cylinders/${cylinderId}`} className="inline-flex min-h-12 items-center">
            {t('statement.toCylinder')}
          </Link>
        </span>
      }
    >
      <div className="statement-paper page-gutter flex w-full max-w-[90rem] flex-col gap-8 pt-4">
        <PeriodFields period={period} shown={data} />
        {statement.isPending ? <RowsSkeleton rows={8} rowClass="h-11" /> : null}
        {statement.isError ? <Failed error={statement.error} onRetry={() => void statement.refetch()} /> : null}
        {data && !statement.isError ? (
          <div className={`flex flex-col gap-8 ${statement.isPlaceholderData ? 'opacity-60' : ''}`}>
            <StatementFigures statement={data} />
            <HeldBetween statement={data} />
            <StatementLines statement={data} />
          </div>
        ) : null}
      </div>
    </Page>
  );
}

/** First and last day, and the usual periods in one press. */
function PeriodFields({ period, shown }: { period: StatementPeriod; shown: { from: string; to: string } | undefined }) {
  const t = useMessages();
  const [, setSearch] = useSearchParams();
  const set = (next: StatementPeriod) => setSearch((before) => withPeriod(before, next), { replace: true });
  const from = period.from ?? shown?.from ?? '';
  const to = period.to ?? shown?.to ?? '';
  return (
    <search
      aria-label={t('statement.period')}
      className="not-on-paper flex flex-wrap items-end gap-x-6 gap-y-2 border-b border-rule pb-3"
    >
      <span className="grid w-full grid-cols-2 gap-3 xs:w-auto">
        <TextField
          label={t('statement.from')}
          type="date"
          value={from}
          max={to || undefined}
          onChange={({ target }) => target.value && set({ from: target.value, to })}
        />
        <TextField
          label={t('statement.to')}
          type="date"
          value={to}
          min={from || undefined}
          onChange={({ target }) => target.value && set({ from, to: target.value })}
        />
      </span>
      <span className="flex flex-wrap gap-x-5">
        {PRESETS.map((preset) => (
          <Button key={preset} kind="quiet" onClick={() => set(presetPeriod(preset, deviceNow()))}>
            {t(`statement.preset.${preset}`)}
          </Button>
        ))}
      </span>
    </search>
  );
}
