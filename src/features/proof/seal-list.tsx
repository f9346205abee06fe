import { useInfiniteQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { SealRow } from '../../../shared/proof/proof.schema.ts';
import { journalQueries } from '../../api/journal.ts';
import { rowsOf } from '../../api/page.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { Failed } from '../../ui/notice.tsx';
import { Code } from './chain-state.tsx';

export function SealList() {
  const t = useMessages();
  const format = useFormat();
  const list = useInfiniteQuery(journalQueries.seals());
  const rows = useMemo(() => rowsOf(list.data), [list.data]);
  const columns = useMemo(
    (): LedgerColumn<SealRow>[] => [
      { id: 'at', head: t('proof.seals.at'), cell: ({ at }) => format.longDateTime(at) },
      { id: 'sequence', head: t('proof.seals.upTo'), figure: true, cell: ({ sequence }) => format.number(sequence) },
      { id: 'by', head: t('proof.seals.by'), cell: ({ by }) => by?.name ?? t('proof.theProgram') },
      {
        id: 'record',
        head: t('proof.seals.record'),
        figure: true,
        quiet: true,
        cell: ({ record }) => format.number(record),
      },
      {
        id: 'hash',
        head: t('proof.seals.head'),
        quiet: true,
        wideOnly: true,
        cell: ({ hash }) => <Code>{`${hash.slice(0, 16)}…`}</Code>,
      },
      {
        id: 'key',
        head: t('proof.seals.key'),
        quiet: true,
        wideOnly: true,
        cell: ({ keyId }) => <Code>{`${keyId.slice(0, 8)}…`}</Code>,
      },
    ],
    [t, format],
  );
  return (
    <section className="flex flex-col gap-2" aria-labelledby="proof-seals">
      <h2 id="proof-seals" className="type-title text-[1.25rem]">
        {t('proof.seals.title')}
      </h2>
      {list.isError && rows.length === 0 ? (
        <Failed error={list.error} onRetry={() => void list.refetch()} />
      ) : list.isSuccess && rows.length === 0 ? (
        <p className="text-ink-soft">{t('proof.seals.none')}</p>
      ) : (
        <LedgerTable
          caption={t('proof.seals.title')}
          columns={columns}
          rows={rows}
          rowId={({ record }) => String(record)}
          loading={list.isPending}
          more={{ has: list.hasNextPage, loading: list.isFetchingNextPage, load: () => void list.fetchNextPage() }}
        />
      )}
    </section>
  );
}
