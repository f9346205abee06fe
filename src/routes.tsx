import { Outlet, type RouteObject } from 'react-router-dom';
import { Frame } from './app/frame.tsx';
import { PageSkeleton } from './app/page-skeleton.tsx';
import { RouteProblem } from './app/route-problem.tsx';

/**
 * Every URL with its page. Each page is loaded when it is first opened and exports `Component`, and where it needs
 * data or messages a `loader`. An error stays inside its page: the frame and what was typed remain.
 */
const pages: RouteObject[] = [
  { index: true, lazy: () => import('./features/today/today.route.tsx') },
  { path: 'charge', lazy: () => import('./features/charge/charge.route.tsx') },
  { path: 'units/:unitId/charge', lazy: () => import('./features/charge/unit-charge.route.tsx') },
  { path: 'cylinders', lazy: () => import('./features/cylinders/cylinders.route.tsx') },
  { path: 'cylinders/new', lazy: () => import('./features/cylinders/new-cylinder.route.tsx') },
  { path: 'cylinders/stock-take', lazy: () => import('./features/stock-take/stock-take.route.tsx') },
  { path: 'cylinders/scan', lazy: () => import('./features/stock-take/scan.route.tsx') },
  { path: 'cylinders/:cylinderId/tag', lazy: () => import('./features/stock-take/tag.route.tsx') },
  { path: 'cylinders/:cylinderId/rental', lazy: () => import('./features/stock-take/rental.route.tsx') },
  { path: 'cylinders/:cylinderId/statement', lazy: () => import('./features/statement/statement.route.tsx') },
  { path: 'cylinders/:cylinderId', lazy: () => import('./features/cylinders/cylinder.route.tsx') },
  {
    path: 'log',
    lazy: () => import('./features/entries/log.route.tsx'),
    children: [{ path: ':groupId', lazy: () => import('./features/entries/entry.route.tsx') }],
  },
  { path: 'log/proof', lazy: () => import('./features/proof/proof.route.tsx') },
  { path: 'units', lazy: () => import('./features/units/units.route.tsx') },
  { path: 'units/new', lazy: () => import('./features/units/unit-new.route.tsx') },
  { path: 'units/:unitId', lazy: () => import('./features/units/unit.route.tsx') },
  { path: 'units/:unitId/edit', lazy: () => import('./features/units/unit-edit.route.tsx') },
  { path: 'units/:unitId/full-charge', lazy: () => import('./features/units/full-charge.route.tsx') },
  { path: 'units/:unitId/charge-basis', lazy: () => import('./features/units/charge-basis.route.tsx') },
  { path: 'units/:unitId/line-set', lazy: () => import('./features/units/line-set.route.tsx') },
  { path: 'charge-sheets/:sheetId', lazy: () => import('./features/units/charge-sheet.route.tsx') },
  { path: 'sites', lazy: () => import('./features/sites/sites.route.tsx') },
  { path: 'sites/new', lazy: () => import('./features/sites/site-new.route.tsx') },
  { path: 'sites/:siteId/edit', lazy: () => import('./features/sites/site-edit.route.tsx') },
  { path: 'units/:unitId/weigh-in', lazy: () => import('./features/weigh-in/weigh-in.route.tsx') },
  { path: 'weigh-back/:groupId', lazy: () => import('./features/weigh-in/weigh-back.route.tsx') },
  { path: 'books', lazy: () => import('./features/books/books.route.tsx') },
  { path: 'books/close/:month', lazy: () => import('./features/books/close.route.tsx') },
  { path: 'books/emissions', lazy: () => import('./features/books/emissions.route.tsx') },
  { path: 'exports', lazy: () => import('./features/exports/exports.route.tsx') },
  { path: 'record', lazy: () => import('./features/record/record.route.tsx') },
  { path: 'record/:kind', lazy: () => import('./features/record/record-form.route.tsx') },
  { path: 'people', lazy: () => import('./features/people/people.route.tsx') },
  { path: 'tools', lazy: () => import('./features/registers/tools.route.tsx') },
  { path: 'imports', lazy: () => import('./features/imports/imports.route.tsx') },
  { path: 'parties', lazy: () => import('./features/registers/parties.route.tsx') },
  { path: 'more', lazy: () => import('./features/session/more.route.tsx') },
  { path: 'preferences', lazy: () => import('./features/session/preferences.route.tsx') },
  { path: 'choose-firm', lazy: () => import('./features/session/choose-firm.route.tsx') },
  { path: 'sign-in', lazy: () => import('./features/session/sign-in.route.tsx') },
  { path: 'forgotten-password', lazy: () => import('./features/session/forgotten-password.route.tsx') },
  { path: 'reset-password', lazy: () => import('./features/session/reset-password.route.tsx') },
  { path: 'invitation', lazy: () => import('./features/session/invitation.route.tsx') },
];

export const routes: RouteObject[] = [
  {
    path: '/',
    element: <Frame />,
    errorElement: <RouteProblem bare />,
    HydrateFallback: PageSkeleton,
    children: [
      {
        element: <Outlet />,
        children: [...pages.map((page) => ({ ...page, errorElement: <RouteProblem /> }) as RouteObject), notFound()],
      },
    ],
  },
];

function notFound(): RouteObject {
  return {
    path: '*',
    loader: () => {
      throw new Response(null, { status: 404 });
    },
    errorElement: <RouteProblem />,
  };
}

const SIGNED_OUT = [
  '/charge',
  '/preferences',
  '/more',
  '/sign-in',
  '/forgotten-password',
  '/reset-password',
  '/invitation',
];
/** Pages that someone who is not signed in may stay on. */
export const worksSignedOut = (pathname: string): boolean => SIGNED_OUT.includes(pathname);
