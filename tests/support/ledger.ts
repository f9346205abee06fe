import { v7 as uuid } from 'uuid';
import type { Session } from '../../shared/session/session.schema.ts';
import type { TestApp, TestPerson } from './app.ts';
import type { Answered, TestClient } from './test-client.ts';

export const TARE_G = 7_700;
/** Where registers begin, unless a test says otherwise. */
export const SINCE = '2026-01-05T08:00:00Z';

/** A firm of its own with an owner signed in, and builders for everything that a log speaks of. */
export async function startLedger(app: TestApp, change: Partial<Session['firm']> = {}) {
  const { firm, owner } = await app.addFirm({ timeZone: 'UTC', ...change });
  return ledgerOf(app, firm, owner);
}

export async function ledgerOf(app: TestApp, firm: Session['firm'], owner: TestPerson) {
  const client = await app.signIn(owner);
  const made = async <T extends { id: string }>(path: string, body: T): Promise<T> => {
    const answer = await client.post(path, body);
    if (answer.status !== 201) throw new Error(`${path} answered ${answer.status}: ${JSON.stringify(answer.body)}`);
    return body;
  };
  let numbers = 0;
  const next = (): string => {
    numbers += 1;
    return String(numbers).padStart(4, '0');
  };
  const customer = await made('/customers', { id: uuid(), name: 'Wexcombe Mill' });
  const site = await made('/sites', siteOf(customer.id));
  const scale = await made('/tools', {
    id: uuid(),
    kind: 'scale',
    name: 'Scale 1',
    scale: { resolutionG: 5, repeatabilityG: 0, spanErrorRelative: 0, offsetG: 0 },
  });
  const supplier = await made('/parties', { id: uuid(), kind: 'supplier', name: 'Fallow Gas' });

  return {
    app,
    firm,
    owner,
    client,
    made,
    customer,
    site,
    scale,
    supplier,
    /** A cylinder, opened by an entry unless `contentG` is null. Tare 7,700 g, no limit. */
    async cylinder(contentG: string | null = '9500', fields: Record<string, unknown> = {}) {
      const id = uuid();
      const cylinder = await made('/cylinders', {
        id,
        tag: `C${next()}`,
        kind: 'refillable',
        refrigerant: 'R-410A',
        tare: { id: uuid(), mass: { value: String(TARE_G), unit: 'g' }, validFrom: SINCE },
        ...fields,
      });
      if (contentG !== null) {
        const refrigerant = String(fields.refrigerant ?? 'R-410A');
        const from = { place: 'opening' };
        await posted(
          client,
          groupOf('opening', SINCE, {
            entries: [massOf(contentG, from, { place: 'cylinder', id }, { refrigerant, howKnown: 'estimated' })],
          }),
        );
      }
      return cylinder;
    },
    /** A unit of a known book (opening entry), or with `state` `factory` or `notKnown`. */
    async unit(massG: string, fullChargeG: string | null, fields: Record<string, unknown> = {}, state = 'opening') {
      const id = uuid();
      const mass = { value: massG, unit: 'g' };
      return made('/units', {
        id,
        siteId: site.id,
        tag: `U${next()}`,
        name: 'back bedroom',
        applianceKind: 'comfortCooling',
        refrigerant: 'R-410A',
        refrigerantFrom: '2026-01-01',
        fullCharge:
          fullChargeG === null
            ? null
            : { id: uuid(), mass: { value: fullChargeG, unit: 'g' }, method: 'manufacturer', validFrom: SINCE },
        initialCharge: state === 'notKnown' ? { state } : { state, mass, at: SINCE, entryId: uuid(), groupId: uuid() },
        ...fields,
      });
    },
    async contentG(cylinderId: string): Promise<number> {
      return (await client.get(`/cylinders/${cylinderId}`)).body.contentG;
    },
    async bookG(unitId: string): Promise<number> {
      return (await client.get(`/units/${unitId}`)).body.book.massG;
    },
    /** How many records the firm's chain has. */
    async sequence(): Promise<number> {
      const [head] = await app.database.query<{ sequence: string }>(
        'superuser',
        'SELECT sequence FROM firm_head WHERE firm_id = $1',
        [firm.id],
      );
      return Number(head?.sequence);
    },
    /** As if a month had been closed: closing comes with the books. */
    async closeMonthsBefore(month: string): Promise<void> {
      await app.database.query('superuser', 'UPDATE firm_head SET first_open_month = $2 WHERE firm_id = $1', [
        firm.id,
        month,
      ]);
    },
    post: (body: unknown) => client.post('/entry-groups', body),
  };
}
export type Ledger = Awaited<ReturnType<typeof startLedger>>;

export const siteOf = (customerId: string) => ({
  id: uuid(),
  customerId,
  name: 'Mill Lane',
  addressLines: ['1 Mill Lane', 'Wexcombe'],
  timeZone: 'UTC',
  altitudeM: 12,
  jurisdiction: 'US',
});

type Place = { place: string; id?: string; as?: string };
export const inCylinder = (id: string): Place => ({ place: 'cylinder', id });
export const inUnit = (id: string): Place => ({ place: 'unit', id });
export const HOSE: Place = { place: 'atmosphere', as: 'hose' };

export const massOf = (value: string, from: Place, to: Place, fields: Record<string, unknown> = {}) => ({
  id: uuid(),
  refrigerant: 'R-410A',
  mass: { value, unit: 'g' },
  from,
  to,
  howKnown: 'weighed',
  ...fields,
});

export function groupOf<Parts extends object>(kind: string, occurredAt: string, parts: Parts) {
  return { groupId: uuid(), schema: 1, kind, occurredAt, ...parts };
}

/** A gross reading of a cylinder of the builders' tare, given as net content. */
export const readingOf = (
  cylinderId: string,
  toolId: string,
  moment: 'before' | 'after' | 'only',
  netG: number,
  fields: Record<string, unknown> = {},
) => ({ id: uuid(), cylinderId, toolId, moment, mode: 'gross', value: String(netG + TARE_G), unit: 'g', ...fields });

/** Before and after, with the mass between going into a unit. */
export function weighIn(
  { scale }: Pick<Ledger, 'scale'>,
  { cylinderId, unitId, beforeG, afterG }: { cylinderId: string; unitId: string; beforeG: number; afterG: number },
  fields: Record<string, unknown> = {},
  occurredAt = '2026-03-02T10:00:00Z',
) {
  return groupOf('extraCharge', occurredAt, {
    unitId,
    readings: [readingOf(cylinderId, scale.id, 'before', beforeG), readingOf(cylinderId, scale.id, 'after', afterG)],
    entries: [massOf(String(beforeG - afterG), inCylinder(cylinderId), inUnit(unitId))],
    ...fields,
  });
}

/** @throws Error when the answer is not 201 */
export async function posted(client: TestClient, body: unknown, path = '/entry-groups'): Promise<Answered> {
  const answer = await client.post(path, body);
  if (answer.status !== 201) throw new Error(`${path} answered ${answer.status}: ${JSON.stringify(answer.body)}`);
  return answer;
}
