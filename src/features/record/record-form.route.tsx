import { useMemo, useState } from 'react';
import { type LoaderFunctionArgs, useLoaderData, useSearchParams } from 'react-router-dom';
import { requireSession, usePermission } from '../../api/session.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Notice } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { findForm } from './all-forms.ts';
import type { RecordForm } from './form.ts';
import { Posted } from './posted.tsx';
import { RecordSheet } from './record-sheet.tsx';

export async function loader({ request, params }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('record', 'log-screen', 'server')]);
  const form = findForm(String(params.kind));
  if (!form) throw new Response(null, { status: 404 });
  return { kind: form.kind };
}

/** One row of the log's table as a guided form. */
export function Component() {
  const t = useMessages();
  const { kind } = useLoaderData<typeof loader>();
  const form = findForm(kind) as RecordForm;
  const [search] = useSearchParams();
  const unitId = search.get('unit') ?? '';
  const cylinderId = search.get('cylinder') ?? '';
  const may = usePermission(form.permission);
  const begin = useMemo(() => ({ unitId, cylinderId }), [unitId, cylinderId]);
  const [posted, setPosted] = useState<{ groupId: string; unitId: string; cylinderId: string } | null>(null);
  if (!may) {
    return (
      <Page field title={t(`record.form.${kind}`)}>
        <div className="page-gutter pt-6">
          <Notice title={t(form.permission === 'registers:correct' ? 'record.forManagers' : 'record.notPermitted')} />
        </div>
      </Page>
    );
  }
  if (posted) return <Posted kind={kind} {...posted} onAgain={() => setPosted(null)} />;
  return <RecordSheet key={`${kind} ${unitId} ${cylinderId}`} form={form} begin={begin} onPosted={setPosted} />;
}
