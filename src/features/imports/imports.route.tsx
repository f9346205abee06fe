import { useQuery } from '@tanstack/react-query';
import { type LoaderFunctionArgs, useSearchParams } from 'react-router-dom';
import { Problem } from '../../api/http.ts';
import { importQueries } from '../../api/imports.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Failed, Notice, RowsSkeleton } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { ChooseFile } from './choose-file.tsx';
import { MapColumns } from './map-columns.tsx';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('imports', 'server')]);
  return null;
}

/** A table of units, cylinders or past entries: read, mapped, checked, and then brought in whole. */
export function Component() {
  const t = useMessages();
  const [search, setSearch] = useSearchParams();
  const may = usePermission('registers:correct');
  const id = search.get('file') ?? '';
  const file = useQuery({ ...importQueries.one(id), enabled: may && id !== '' });
  const another = () => setSearch({}, { replace: true });
  const isGone = file.error instanceof Problem && file.error.status === 404;
  return (
    <Page
      title={t('imports.title')}
      lead={t('imports.lead')}
      actions={id === '' ? undefined : <Button onClick={another}>{t('imports.another')}</Button>}
    >
      <div className="page-gutter flex flex-col gap-6 pt-4">
        {may ? null : <Notice title={t('imports.notAllowed')} />}
        {may && isGone ? (
          <Notice role="alert" title={t('imports.gone')}>
            {t('imports.goneText')}
          </Notice>
        ) : null}
        {may && (id === '' || isGone) ? (
          <ChooseFile onRead={(view) => setSearch({ file: view.id }, { replace: true })} />
        ) : null}
        {may && id !== '' && !isGone ? (
          file.data ? (
            <MapColumns key={file.data.id} file={file.data} />
          ) : file.isError ? (
            <Failed error={file.error} onRetry={() => void file.refetch()} />
          ) : (
            <RowsSkeleton />
          )
        ) : null}
      </div>
    </Page>
  );
}
