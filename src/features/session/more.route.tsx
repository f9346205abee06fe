import { Link, useNavigate } from 'react-router-dom';
import { usePermission, useSession, useSignOut } from '../../api/session.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Failed } from '../../ui/notice.tsx';
import { SessionPage } from './session-page.tsx';

export async function loader() {
  await loadMessages('session', 'imports', 'exports-screen', 'people-screen', 'proof');
  return null;
}

/** What does not fit the bar of a phone: the other areas, the person, the firm, the way out. */
export function Component() {
  const t = useMessages();
  const navigate = useNavigate();
  const session = useSession();
  const seesPeople = usePermission('people:read');
  const seesBooks = usePermission('books:read');
  const mayImport = usePermission('registers:correct');
  const signOut = useSignOut();
  const leave = (everywhere: boolean) =>
    signOut.mutate({ everywhere }, { onSuccess: () => void navigate('/sign-in', { replace: true }) });
  const links = [
    ...(session ? [{ to: '/units', name: t('frame.units') }] : []),
    ...(seesBooks ? [{ to: '/books', name: t('frame.books') }] : []),
    ...(seesPeople ? [{ to: '/people', name: t('frame.people') }] : []),
    ...(seesPeople ? [{ to: '/tools', name: t('registers.tools.title') }] : []),
    ...(seesPeople ? [{ to: '/parties', name: t('registers.parties.title') }] : []),
    ...(session ? [{ to: '/exports', name: t('exports.title') }] : []),
    ...(mayImport ? [{ to: '/log/proof', name: t('proof.title') }] : []),
    ...(mayImport ? [{ to: '/imports', name: t('imports.title') }] : []),
    { to: '/preferences', name: t('frame.preferences') },
    ...(session && session.firms.length > 1 ? [{ to: '/choose-firm', name: t('session.firm.title') }] : []),
    ...(session ? [] : [{ to: '/sign-in', name: t('frame.signIn') }]),
  ];
  return (
    <SessionPage
      title={session ? session.person.name : t('session.more.title')}
      {...(session ? { lead: session.firm.name } : {})}
    >
      <nav aria-label={t('session.more.title')} className="border-t border-rule text-[1.125rem]">
        {links.map((link) => (
          <Link
            key={link.to}
            to={link.to}
            className="flex min-h-14 items-center justify-between border-b border-rule text-ink no-underline hover:bg-well"
          >
            {link.name}
            <svg aria-hidden="true" viewBox="0 0 6 10" className="h-2.5 w-1.5 fill-none stroke-current stroke-[1.6]">
              <path d="M1 1l4 4-4 4" />
            </svg>
          </Link>
        ))}
      </nav>
      {signOut.isError ? <Failed title={t('session.notSignedOut')} error={signOut.error} /> : null}
      {session ? (
        <div className="flex flex-wrap gap-3">
          <Button busy={signOut.isPending} onClick={() => leave(false)}>
            {t('session.signOut')}
          </Button>
          <Button kind="quiet" onClick={() => leave(true)}>
            {t('session.signOutEverywhere')}
          </Button>
        </div>
      ) : null}
    </SessionPage>
  );
}
