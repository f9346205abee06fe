import { useMemo } from 'react';
import type { ExportView } from '../../../shared/exports/export.schema.ts';
import { exportFileHref, useCancelExport } from '../../api/exports.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { Failed } from '../../ui/notice.tsx';

interface Props {
  rows: readonly ExportView[];
  loading: boolean;
  more: { has: boolean; loading: boolean; load: () => void };
}

/** Who took out what, how far it is, and the file for who asked for it. */
export function ExportTable({ rows, loading, more }: Props) {
  const t = useMessages();
  const format = useFormat();
  const cancel = useCancelExport();
  const columns = useMemo<LedgerColumn<ExportView>[]>(
    () => [
      {
        id: 'what',
        head: t('exports.what'),
        cell: ({ what, format: form }) => (
          <span className="font-[600]">
            {t(`exports.what.${what}`)} <span className="font-[400] uppercase">{form}</span>
          </span>
        ),
      },
      { id: 'state', head: t('exports.state'), cell: (row) => <State row={row} /> },
      {
        id: 'rows',
        head: t('exports.rows'),
        figure: true,
        cell: ({ rowsDone }) => format.number(rowsDone),
      },
      {
        id: 'action',
        head: t('exports.file'),
        headHidden: true,
        cell: ({ id, state, mayDownload, fileName, what }) => {
          if (state === 'queued' || state === 'running')
            return (
              <Button
                kind="quiet"
                busy={cancel.isPending && cancel.variables === id}
                aria-label={t('exports.cancelNamed', { what: t(`exports.what.${what}`) })}
                onClick={() => cancel.mutate(id)}
              >
                {t('exports.cancel')}
              </Button>
            );
          if (!mayDownload) return null;
          return (
            <a
              className="type-narrow inline-flex min-h-12 items-center font-[600] text-rest"
              href={exportFileHref(id)}
              download={fileName ?? ''}
            >
              {t('exports.download', { file: fileName ?? '' })}
            </a>
          );
        },
      },
      {
        id: 'by',
        head: t('exports.by'),
        wideOnly: true,
        quiet: true,
        cell: ({ requestedBy, requestedAt }) => `${requestedBy.name}, ${format.longDateTime(requestedAt)}`,
      },
      {
        id: 'record',
        head: t('exports.record'),
        wideOnly: true,
        quiet: true,
        cell: ({ record, sha256 }) =>
          record === null ? null : (
            <span title={sha256 ?? ''}>{t('exports.recordNo', { record, hash: (sha256 ?? '').slice(0, 12) })}</span>
          ),
      },
    ],
    [t, format, cancel],
  );
  return (
    <div className="flex flex-col gap-3">
      {cancel.isError ? <Failed title={t('exports.notCancelled')} error={cancel.error} /> : null}
      <LedgerTable
        caption={t('exports.list')}
        columns={columns}
        rows={rows}
        rowId={({ id }) => id}
        loading={loading}
        more={more}
      />
    </div>
  );
}

function State({ row }: { row: ExportView }) {
  const t = useMessages();
  const format = useFormat();
  const { state, rowsDone, rowsTotal, problem, expiresAt } = row;
  if (state === 'running' && rowsTotal)
    return (
      <span className="flex flex-col gap-1">
        <span>{t('exports.state.runningOf', { done: format.number(rowsDone), total: format.number(rowsTotal) })}</span>
        <progress className="h-1.5 w-full" max={rowsTotal} value={rowsDone} aria-label={t('exports.progress')} />
      </span>
    );
  if (state === 'failed') return <span className="block max-w-sm">{problem?.message}</span>;
  if (state === 'done' && expiresAt) return t('exports.state.until', { at: format.longDateTime(expiresAt) });
  return t(`exports.state.${state}`);
}
