import type { FullWorld } from '../support/browser-full-world.ts';

/** Who looks at it. Nobody: not signed in. */
export type Who = 'technician' | 'owner' | 'reader' | 'nobody';

/** One route of `src/routes.tsx` as a page that somebody opens. */
export interface RoutePage {
  /** As the route's path reads in `src/routes.tsx`, from the root. */
  route: string;
  path: (world: FullWorld) => string;
  who: Who;
  /** Used with gloves on: targets of 48 px instead of 24. */
  field?: true;
  /** A field whose text an error of the page must not lose: its label, and what is typed. */
  types?: readonly [label: RegExp, text: string];
}

const unit = ({ unit: { id } }: FullWorld) => `/units/${id}`;

/** Every route once. A route without its row fails, and so does a row without its route. */
export const ROUTE_PAGES: readonly RoutePage[] = [
  { route: '/', path: () => '/', who: 'owner' },
  { route: '/charge', path: () => '/charge', who: 'nobody', field: true, types: [/^pipe run/, '12 m'] },
  {
    route: '/units/:unitId/charge',
    path: (world) => `${unit(world)}/charge`,
    who: 'technician',
    field: true,
    types: [/^pipe run/, '11 m'],
  },
  { route: '/cylinders', path: () => '/cylinders', who: 'technician' },
  {
    route: '/cylinders/new',
    path: () => '/cylinders/new',
    who: 'technician',
    field: true,
    types: [/^tag|number/i, '7799'],
  },
  { route: '/cylinders/:cylinderId', path: ({ short }) => `/cylinders/${short.id}`, who: 'owner', field: true },
  { route: '/cylinders/stock-take', path: () => '/cylinders/stock-take', who: 'technician', field: true },
  { route: '/cylinders/scan', path: () => '/cylinders/scan', who: 'technician', field: true },
  { route: '/cylinders/:cylinderId/tag', path: ({ short }) => `/cylinders/${short.id}/tag`, who: 'owner' },
  { route: '/cylinders/:cylinderId/rental', path: ({ short }) => `/cylinders/${short.id}/rental`, who: 'owner' },
  { route: '/cylinders/:cylinderId/statement', path: ({ short }) => `/cylinders/${short.id}/statement`, who: 'owner' },
  { route: '/log', path: () => '/log', who: 'owner' },
  { route: '/log/proof', path: () => '/log/proof', who: 'owner' },
  { route: '/log/:groupId', path: ({ wrongGroupId }) => `/log/${wrongGroupId}`, who: 'owner' },
  { route: '/units', path: () => '/units', who: 'owner' },
  { route: '/record', path: () => '/record', who: 'technician', field: true },
  {
    route: '/record/:kind',
    path: (world) => `/record/relocation?unit=${world.unit.id}`,
    who: 'technician',
    field: true,
  },
  { route: '/units/new', path: () => '/units/new', who: 'owner', types: [/^name/, 'roof, east'] },
  { route: '/units/:unitId', path: unit, who: 'owner' },
  { route: '/units/:unitId/edit', path: (world) => `${unit(world)}/edit`, who: 'owner', types: [/^name/, 'back room'] },
  {
    route: '/units/:unitId/full-charge',
    path: (world) => `${unit(world)}/full-charge`,
    who: 'owner',
    types: [/^why/, 'weighed out'],
  },
  {
    route: '/units/:unitId/charge-basis',
    path: (world) => `${unit(world)}/charge-basis`,
    who: 'owner',
    types: [/^document/, 'Service manual, 2nd edition'],
  },
  {
    route: '/units/:unitId/line-set',
    path: (world) => `${unit(world)}/line-set`,
    who: 'owner',
    types: [/^length, one way/, '14 m'],
  },
  { route: '/charge-sheets/:sheetId', path: ({ sheetId }) => `/charge-sheets/${sheetId}`, who: 'owner' },
  { route: '/sites', path: () => '/sites', who: 'owner' },
  { route: '/sites/new', path: () => '/sites/new', who: 'owner', types: [/^site/, 'Mill Lane 2'] },
  {
    route: '/sites/:siteId/edit',
    path: ({ ledger }) => `/sites/${ledger.site.id}/edit`,
    who: 'owner',
    types: [/^site/, 'Mill Lane, yard'],
  },
  {
    route: '/units/:unitId/weigh-in',
    path: ({ unit: { id }, sheetId }) => `/units/${id}/weigh-in?sheet=${sheetId}`,
    who: 'technician',
    field: true,
  },
  {
    route: '/weigh-back/:groupId',
    path: ({ openGroupId }) => `/weigh-back/${openGroupId}`,
    who: 'technician',
    field: true,
    types: [/^scale reads now/, '950'],
  },
  { route: '/books', path: () => '/books?table=purchases', who: 'owner' },
  { route: '/books/close/:month', path: () => '/books/close/2026-01', who: 'owner', types: [/^note/, 'all looked at'] },
  { route: '/books/emissions', path: () => '/books/emissions', who: 'owner' },
  { route: '/exports', path: () => '/exports', who: 'owner' },
  { route: '/imports', path: () => '/imports', who: 'owner' },
  { route: '/people', path: () => '/people', who: 'owner' },
  { route: '/tools', path: () => '/tools', who: 'owner' },
  { route: '/parties', path: () => '/parties', who: 'owner' },
  { route: '/more', path: () => '/more', who: 'technician' },
  { route: '/preferences', path: () => '/preferences', who: 'technician' },
  { route: '/choose-firm', path: () => '/choose-firm', who: 'technician' },
  { route: '/sign-in', path: () => '/sign-in', who: 'nobody' },
  { route: '/forgotten-password', path: () => '/forgotten-password', who: 'nobody' },
  { route: '/reset-password', path: () => '/reset-password#token=not-a-token', who: 'nobody' },
  { route: '/invitation', path: ({ invitationPath }) => invitationPath, who: 'nobody' },
  { route: '/*', path: () => '/no-such-page', who: 'nobody' },
];
