import { useEffect, useRef } from 'react';
import type { ImportError, ImportView } from '../../../shared/imports/import.schema.ts';
import { answerErrors } from '../../api/form-errors.ts';
import { importErrorsHref, isAtWork, useCancelImport, useRefreshAfterImport, useRunImport } from '../../api/imports.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { FieldError } from '../../ui/field.tsx';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { Done, Notice } from '../../ui/notice.tsx';

/**
 * Beside the columns or under them, and in view whenever it says something new: the button that asked for it stands at
 * the end of a long form.
 */
export function Outcome({ file }: { file: ImportView }) {
  const region = useRef<HTMLDivElement>(null);
  const said = useRef(file.state);
  useEffect(() => {
    if (said.current === file.state) return;
    said.current = file.state;
    region.current?.scrollIntoView?.({ block: 'nearest' });
  }, [file.state]);
  return (
    <div ref={region} className="min-w-0 scroll-mt-24 scroll-mb-24 lg:sticky lg:top-24 lg:self-start">
      <Said file={file} />
    </div>
  );
}

/** What the check or the import came to: progress, errors by row and column, or the way on. */
function Said({ file }: { file: ImportView }) {
  const t = useMessages();
  const run = useRunImport(file.id);
  const refresh = useRefreshAfterImport();
  const refreshed = useRef(false);
  useEffect(() => {
    if (file.state !== 'done' || refreshed.current) return;
    refreshed.current = true;
    void refresh();
  }, [file.state, refresh]);
  if (file.state === 'read') return null;
  if (isAtWork(file)) return <Progress file={file} />;
  if (file.state === 'failed' || file.state === 'cancelled') {
    return (
      <Notice role="alert" title={t(`imports.${file.state}`)}>
        {file.problem ? <p>{file.problem}</p> : null}
        <p>{t('imports.checkOnceMore')}</p>
      </Notice>
    );
  }
  if (file.state === 'done') {
    return (
      <div className="flex flex-col gap-3">
        <Done>{file.made === 0 ? t('imports.doneNothing') : t('imports.done', { count: file.made })}</Done>
        {file.already > 0 ? <p>{t('imports.already', { count: file.already })}</p> : null}
        {file.recordSequence === null ? null : (
          <p className="max-w-prose break-all text-ink-soft">
            {t('imports.recorded', { number: file.recordSequence, sha256: file.sha256 })}
          </p>
        )}
      </div>
    );
  }
  if (file.wrongRows > 0) return <Errors file={file} />;
  return (
    <div className="flex max-w-xl flex-col gap-3">
      <p role="status" className="type-title text-[1.5rem]">
        {file.made === 0 ? t('imports.nothingNew') : t('imports.right', { count: file.made })}
      </p>
      {file.already > 0 ? <p>{t('imports.already', { count: file.already })}</p> : null}
      {run.isError
        ? answerErrors(run.error).map(({ message }) => <FieldError key={message}>{message}</FieldError>)
        : null}
      {file.made === 0 ? null : (
        <Button kind="act" wide busy={run.isPending} onClick={() => run.mutate()}>
          {t('imports.run', { count: file.made })}
        </Button>
      )}
    </div>
  );
}

function Progress({ file }: { file: ImportView }) {
  const t = useMessages();
  const cancel = useCancelImport(file.id);
  const words = t('imports.progress', { done: file.rowsDone, rows: file.read.rows });
  return (
    <div className="flex max-w-xl flex-col gap-2" aria-live="polite">
      <p className="type-title text-[1.5rem]">{t(`imports.${file.state}`)}</p>
      <progress
        className="h-3 w-full accent-rest"
        max={file.read.rows}
        value={file.rowsDone}
        aria-label={t(`imports.${file.state}`)}
      />
      <p className="text-ink-soft">{words}</p>
      {cancel.isSuccess ? (
        <p>{t('imports.cancelling')}</p>
      ) : (
        <Button className="self-start" busy={cancel.isPending} onClick={() => cancel.mutate()}>
          {t('imports.cancel')}
        </Button>
      )}
    </div>
  );
}

function Errors({ file }: { file: ImportView }) {
  const t = useMessages();
  const columns: LedgerColumn<ImportError & { id: string }>[] = [
    { id: 'row', head: t('imports.row'), cell: ({ row }) => row, figure: true },
    {
      id: 'column',
      head: t('imports.column'),
      cell: ({ column }) => <Wrapped>{column ?? t('imports.wholeRow')}</Wrapped>,
    },
    { id: 'given', head: t('imports.given'), cell: ({ given }) => <Wrapped>{given ?? ''}</Wrapped> },
    { id: 'what', head: t('imports.what'), cell: ({ message }) => <Wrapped wide>{message}</Wrapped> },
  ];
  const rows = file.errors.map((error, at) => ({ ...error, id: `${error.row} ${error.column} ${at}` }));
  return (
    <div className="flex min-w-0 flex-col gap-3">
      <Notice role="alert" title={t('imports.wrong', { count: file.wrongRows })}>
        {t('imports.wrongText')}
      </Notice>
      <a href={importErrorsHref(file.id)} download className="inline-flex min-h-12 items-center self-start">
        {t('imports.errorsFile')}
      </a>
      <LedgerTable caption={t('imports.what')} columns={columns} rows={rows} rowId={({ id }) => id} />
    </div>
  );
}

/** A sentence needs more than the one line of a ledger, and a cell of somebody's table may hold anything. */
function Wrapped({ wide = false, children }: { wide?: boolean; children: string }) {
  return (
    <span className={`block whitespace-normal [overflow-wrap:anywhere] ${wide ? 'min-w-56' : 'min-w-16'}`}>
      {children}
    </span>
  );
}
