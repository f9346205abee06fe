import type { LoaderFunctionArgs } from 'react-router-dom';
import { useExportPath } from '../../api/exports.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Page } from '../../ui/page.tsx';
import { TakeOutLink } from '../../ui/take-out-link.tsx';
import { Invitations } from './invitations.tsx';
import { OwnAccess } from './own-access.tsx';
import { PeopleList } from './people-list.tsx';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('people-screen', 'server')]);
  return null;
}

/** Who works for the firm and what each may do; who has been invited; and one's own ways in. Each only as permitted. */
export function Component() {
  const t = useMessages();
  const seesPeople = usePermission('people:read');
  const manages = usePermission('people:manage');
  const takeOut = useExportPath('people');
  return (
    <Page title={t('people.title')} actions={seesPeople && takeOut ? <TakeOutLink to={takeOut} /> : undefined}>
      <div className="page-gutter flex max-w-[90rem] flex-col gap-10 pt-4">
        {seesPeople ? <PeopleList /> : null}
        {manages ? <Invitations /> : null}
        <OwnAccess />
      </div>
    </Page>
  );
}
