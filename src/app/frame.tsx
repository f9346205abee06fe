import type { ReactNode } from 'react';
import { Link, NavLink, Outlet, ScrollRestoration, useLocation, useNavigation } from 'react-router-dom';
import { signInPath, useOnHand, useSession } from '../api/session.ts';
import { useFormat } from '../lib/format.ts';
import { useMessages } from '../lib/messages.ts';
import { AREAS, type Area, MORE } from './areas.ts';
import { LanguageSwitch } from './language-switch.tsx';

/** The band on top of a desk, the bar at the bottom of a phone, and the page between them. */
export function Frame() {
  const t = useMessages();
  const session = useSession();
  const navigation = useNavigation();
  const signedIn = session != null;
  const areas = AREAS.filter(
    ({ signedOut, permission }) =>
      (signedIn || signedOut) && (!permission || session?.permissions.includes(permission)),
  );
  return (
    <div className="flex min-h-dvh flex-col">
      <a
        href="#page"
        className="sr-only z-30 bg-ink px-4 py-3 text-ground focus:not-sr-only focus:fixed focus:top-2 focus:left-2"
      >
        {t('frame.skip')}
      </a>
      <Band areas={areas} />
      <div
        aria-hidden="true"
        className={`fixed inset-x-0 top-0 z-30 h-1 origin-left bg-rest transition-transform duration-700 ${navigation.state === 'idle' ? 'scale-x-0' : 'scale-x-75'}`}
      />
      <main id="page" tabIndex={-1} className="flex flex-1 flex-col pb-[4.5rem] outline-none desk:pb-0">
        <Outlet />
      </main>
      <BottomBar areas={areas} />
      <ScrollRestoration />
    </div>
  );
}

function Band({ areas }: { areas: readonly Area[] }) {
  const t = useMessages();
  const { pathname } = useLocation();
  return (
    <header className="sticky top-0 z-20 hidden h-14 items-stretch gap-7 border-b-2 border-ink bg-sheet px-6 desk:flex">
      <NavLink to={areas.length > 1 ? '/' : '/charge'} className="flex items-center text-ink no-underline">
        <Wordmark />
      </NavLink>
      <nav aria-label={t('frame.areas')} className="flex gap-1">
        {areas.map((area) => (
          <AreaLink
            key={area.to}
            to={area.to}
            isHere={area.holds.test(pathname)}
            className="type-narrow flex items-center px-2.5 lg:px-3.5"
            here="shadow-[inset_0_-4px_0_var(--color-rest)]"
          >
            {t(area.name)}
          </AreaLink>
        ))}
      </nav>
      <BandEnd />
    </header>
  );
}

/** Plain letters in the widest cut of the family, with a beam's tick under the first: no drawn logo. */
function Wordmark() {
  return <span className="text-[1.0625rem] font-[760] tracking-[-0.012em] [font-stretch:117%]">Tarewright</span>;
}

function BandEnd() {
  const t = useMessages();
  const session = useSession();
  const onHand = useOnHand();
  const format = useFormat();
  const location = useLocation();
  if (!session) {
    return (
      <div className="ml-auto flex items-center gap-6">
        <LanguageSwitch />
        <NavLink
          to="/preferences"
          className="type-narrow flex min-h-12 items-center text-ink-soft no-underline hover:text-ink"
        >
          {t('frame.preferences')}
        </NavLink>
        <NavLink to={signInPath(location)} className="flex min-h-12 items-center font-[600]">
          {t('frame.signIn')}
        </NavLink>
      </div>
    );
  }
  return (
    <div className="ml-auto flex items-center gap-6">
      {onHand ? (
        <div className="type-label hidden text-right text-[0.875rem] leading-tight lg:block">
          <span className="text-ink-soft">{t('frame.onHand', { count: onHand.cylinderCount })}</span>
          <strong className="block text-[1.0625rem] font-[680] [font-stretch:100%]">
            {format.stock(onHand.massG)}
          </strong>
        </div>
      ) : null}
      <NavLink
        to="/more"
        className={({ isActive }) =>
          `type-narrow flex h-full max-w-44 items-center truncate no-underline ${isActive ? 'font-[650] text-ink shadow-[inset_0_-4px_0_var(--color-rest)]' : 'text-ink-soft hover:text-ink'}`
        }
      >
        {session.person.name}
      </NavLink>
    </div>
  );
}

function BottomBar({ areas }: { areas: readonly Area[] }) {
  const t = useMessages();
  const location = useLocation();
  const signedIn = useSession() != null;
  const items: Pick<Area, 'to' | 'name' | 'holds'>[] = [
    ...areas.filter((area) => area.onPhone),
    { to: '/more', name: 'frame.more', holds: MORE },
    ...(signedIn ? [] : [{ to: signInPath(location), name: 'frame.signIn', holds: /^\/sign-in/ }]),
  ];
  return (
    <nav
      aria-label={t('frame.areas')}
      className="pb-safe fixed inset-x-0 bottom-0 z-20 flex border-t-2 border-ink bg-sheet desk:hidden"
    >
      {items.map((item) => (
        <AreaLink
          key={item.name}
          to={item.to}
          isHere={item.holds.test(location.pathname)}
          className="type-label flex h-[3.875rem] min-w-0 flex-1 items-center justify-center px-0.5 text-[1.0625rem]"
          here="shadow-[inset_0_4px_0_var(--color-rest)]"
        >
          <span className="truncate">{t(item.name)}</span>
        </AreaLink>
      ))}
    </nav>
  );
}

/** Where one is, is marked by weight and a bar in verdigris, and said to a screen reader. */
function AreaLink({
  to,
  isHere,
  className,
  here,
  children,
}: {
  to: string;
  isHere: boolean;
  className: string;
  here: string;
  children: ReactNode;
}) {
  return (
    <Link
      to={to}
      aria-current={isHere ? 'page' : undefined}
      className={`no-underline ${className} ${isHere ? `font-[680] text-ink ${here}` : 'text-ink-soft hover:text-ink'}`}
    >
      {children}
    </Link>
  );
}
