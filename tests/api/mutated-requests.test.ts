import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { HOSE, inCylinder, type Ledger, massOf, SINCE, siteOf, startLedger, weighIn } from '../support/ledger.ts';
import { CHARGE_REQUEST } from '../support/scenario-over-http.ts';

let app: TestApp;
let ledger: Ledger;
let cylinderId: string;
let unitId: string;
beforeAll(async () => {
  app = await startTestApp();
  ledger = await startLedger(app);
  cylinderId = (await ledger.cylinder('9500')).id;
  unitId = (await ledger.unit('1250', '1340', {}, 'factory')).id;
});
afterAll(() => app.close());

/** What a field should not hold: other types, no size, every size, ends of time, text that no database keeps. */
const VALUES = [
  null,
  '',
  ' ',
  'x'.repeat(20_000),
  '\u0000',
  '\ud800',
  -1,
  0,
  1e308,
  5e-324,
  0.1,
  true,
  [],
  {},
  '0000-01-01T00:00:00Z',
  '9999-12-31T23:59:59Z',
  '0000-01-01',
  '9999-12-31',
  '0.0000000001',
  '999999999',
  '-0',
  '1e5',
  '019A0000-0000-7000-8000-00000000000A',
  '00000000-0000-0000-0000-000000000000',
];

type Body = Record<string, unknown>;
const mass = (value: string, unit = 'g') => ({ value, unit });
const bodies = (): [path: string, body: Body][] => [
  ['/customers', { id: uuid(), name: 'Mill', email: 'mill@example.test', phone: '1', note: 'n' }],
  ['/sites', siteOf(ledger.customer.id)],
  ['/parties', { id: uuid(), kind: 'supplier', name: 'Fallow', note: 'n' }],
  [
    '/tools',
    {
      id: uuid(),
      kind: 'scale',
      name: 'Scale',
      serial: 's',
      scale: { resolutionG: 5, repeatabilityG: 1, spanErrorRelative: 0.001, offsetG: 1 },
      madeOn: '2020-01-01',
      lastCheckedOn: '2026-01-01',
      heldBy: ledger.owner.id,
    },
  ],
  ['/jobs', { id: uuid(), unitId, kind: 'install', openedAt: SINCE, title: 't' }],
  [
    '/units',
    {
      id: uuid(),
      siteId: ledger.site.id,
      tag: 't',
      name: 'n',
      applianceKind: 'comfortCooling',
      subsector: 'other',
      refrigerant: 'R-410A',
      refrigerantFrom: '2026-01-01',
      serials: [{ part: 'outdoor', serial: 's', model: 'm' }],
      nameplateReadable: true,
      designPressureHighKPaGauge: 4150,
      installedOn: '2026-01-01',
      fullCharge: { id: uuid(), mass: mass('1340'), method: 'manufacturer', validFrom: SINCE },
      initialCharge: { state: 'factory', mass: mass('1250'), at: SINCE, entryId: uuid(), groupId: uuid() },
    },
  ],
  [
    '/cylinders',
    {
      id: uuid(),
      tag: 't',
      kind: 'refillable',
      refrigerant: 'R-410A',
      contentState: 'virgin',
      owner: { kind: 'customer', id: ledger.customer.id },
      tare: { id: uuid(), mass: mass('7700'), validFrom: SINCE },
      waterCapacity: mass('20', 'kg'),
      stampedLimit: mass('18', 'kg'),
      servicePressureKPaGauge: 4137,
      retestDue: '2027-01-01',
      heldBy: ledger.owner.id,
      batch: 'b',
    },
  ],
  [`/cylinders/${cylinderId}/tares`, { id: uuid(), tare: mass('7700'), validFrom: SINCE, reason: 'r' }],
  [
    `/units/${unitId}/full-charges`,
    { id: uuid(), mass: mass('1340'), method: 'measured', validFrom: SINCE, jobId: null, reason: 'r' },
  ],
  [
    `/units/${unitId}/line-sets`,
    {
      id: uuid(),
      validFrom: SINCE,
      branches: [
        {
          name: 'A',
          parent: null,
          liquidOdMm: 6.35,
          gasOdMm: 9.52,
          lengthM: 12,
          riseM: 1,
          bends: 2,
          equivalentMPerBend: 0.3,
        },
      ],
      note: 'n',
    },
  ],
  [
    `/units/${unitId}/charge-bases`,
    { id: uuid(), validFrom: SINCE, basis: CHARGE_REQUEST.basis, manual: { document: 'd', page: '1' }, note: 'n' },
  ],
  [
    `/units/${unitId}/charge-sheets`,
    {
      id: uuid(),
      request: { ...CHARGE_REQUEST, basis: { ...CHARGE_REQUEST.basis, refrigerant: 'R-410A' } },
      room: { areaM2: 18, mounting: 'wall' },
    },
  ],
  [
    '/entry-groups',
    {
      ...weighIn(ledger, { cylinderId, unitId, beforeG: 9500, afterG: 9499 }, {}, '2026-03-02T10:00:00Z'),
      deviceSentAt: '2026-11-30T15:00:00Z',
      supervisedBy: ledger.owner.id,
      entries: [massOf('1', inCylinder(cylinderId), HOSE, { howKnown: 'estimated' })],
      statements: [{ about: 'unit', id: unitId, is: 'empty', by: 'vacuum' }],
      documents: [{ kind: 'invoice', number: '1', date: '2026-03-01', refrigerant: 'R-410A', mass: mass('1') }],
      reason: 'r',
      note: 'n',
    },
  ],
];

function* leavesOf(value: unknown, path: (string | number)[] = []): Generator<(string | number)[]> {
  if (path.length > 0) yield path;
  if (typeof value !== 'object' || value === null) return;
  for (const [key, inner] of Object.entries(value)) {
    yield* leavesOf(inner, [...path, Array.isArray(value) ? Number(key) : key]);
  }
}

function withValueAt(body: Body, path: readonly (string | number)[], value: unknown): Body {
  const copy = structuredClone(body);
  const parent = path.slice(0, -1).reduce<Record<string | number, unknown>>((at, key) => at[key] as never, copy);
  parent[path.at(-1) as string] = value;
  return copy;
}

describe('A request with one field that holds something else', () => {
  it('is taken or refused, by code and place, and never a fault of the server', { timeout: 300_000 }, async () => {
    let asked = 0;
    for (const [index, [path, first]] of bodies().entries()) {
      expect((await ledger.client.post(path, first)).status, path).toBe(201);
      for (const leaf of leavesOf(first)) {
        const answers = await Promise.all(
          VALUES.map(async (value) => {
            // Ids of its own, so that it is no resend of another.
            const [, body] = bodies()[index] as [string, Body];
            const sent = withValueAt(body, leaf, value);
            return { value, answer: await ledger.client.post(path, sent) };
          }),
        );
        for (const { value, answer } of answers) {
          asked += 1;
          const where = `${path} /${leaf.join('/')} = ${JSON.stringify(value)?.slice(0, 60)}: ${JSON.stringify(answer.body)}`;
          expect(answer.status, where).toBeLessThan(500);
          if (answer.status >= 400) expect(answer.body.code, where).toMatch(/^[a-z]/);
        }
      }
    }
    expect(asked).toBeGreaterThan(3_000);
  });
});
