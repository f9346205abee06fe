import pg from 'pg';
import { v7 as uuid } from 'uuid';
import type { DerivedRows, RegisterNoun } from '../../shared/journal/record.schema.ts';
import type { TestDatabase } from '../support/database.ts';
import { type GroupFields, groupWithEntries, place, registerRecordOf, textOf } from './record-texts.ts';

export interface Scope {
  firmId?: string | null;
  personId?: string | null;
  /** `{}` is no site at all. */
  siteIds?: string;
}
export type Query = <Row extends pg.QueryResultRow = pg.QueryResultRow>(
  sql: string,
  values?: unknown[],
) => Promise<Row[]>;

/** Plain SQL as the application's role, in transactions that carry who asks. */
export function connect(database: Pick<TestDatabase, 'urls'>, role: 'app' | 'jobs' | 'owner' = 'app') {
  const pool = new pg.Pool({ connectionString: database.urls[role], max: 12 });
  // The database may be dropped while a connection that was ended is still closing.
  pool.on('error', () => undefined);
  pool.on('connect', (client) => client.on('error', () => undefined));
  return {
    pool,
    close: () => pool.end(),
    async as<T>(scope: Scope, work: (query: Query) => Promise<T>): Promise<T> {
      const client = await pool.connect();
      try {
        await client.query('begin');
        await client.query(
          `select set_config('app.firm_id', $1, true), set_config('app.person_id', $2, true), set_config('app.site_ids', $3, true)`,
          [scope.firmId ?? '', scope.personId ?? '', scope.siteIds ?? ''],
        );
        const result = await work(async (sql, values) => (await client.query(sql, values)).rows as never);
        await client.query('commit');
        return result;
      } catch (error) {
        await client.query('rollback');
        throw error;
      } finally {
        client.release();
      }
    },
  };
}
export type Connection = ReturnType<typeof connect>;

export const POST = 'select * from post_records($1::text[], $2::jsonb)';

/** What a refused statement says: SQLSTATE, the rule's name, and the figures. */
export async function refusalOf(attempt: Promise<unknown>): Promise<{ code?: string; rule?: string; detail: unknown }> {
  try {
    await attempt;
  } catch (error) {
    const { code, constraint, detail, message } = error as pg.DatabaseError;
    if (!code) throw error;
    return { code, rule: constraint ?? message, detail: code.startsWith('TW') ? JSON.parse(detail ?? '{}') : detail };
  }
  throw new Error('was not refused');
}

/** A firm with an owner, a customer, a site, two units, two cylinders, a scale and a supplier, all made as the app role. */
export async function createTestFirm(app: Connection, options: { timeZone?: string; personId?: string } = {}) {
  const firmId = uuid();
  const personId = options.personId ?? uuid();
  const scope = { firmId, personId };
  const ids = { customer: uuid(), site: uuid(), otherSite: uuid(), unit: uuid(), otherUnit: uuid() };
  const cylinders = { one: uuid(), two: uuid(), scale: uuid(), supplier: uuid(), reclaimer: uuid() };

  if (!options.personId) {
    await app.as({ personId }, (query) =>
      query('insert into person (id, email, name) values ($1, $2, $3)', [
        personId,
        `${personId}@example.test`,
        'Ada Firth',
      ]),
    );
  }
  const record = (noun: RegisterNoun, subjectId: string) => textOf(registerRecordOf(personId, { noun, subjectId }));
  await app.as(scope, async (query) => {
    await query('select create_firm($1, $2, $3, $4, $5, $6)', [
      firmId,
      'Invented Firm',
      'US',
      options.timeZone ?? 'UTC',
      'en-US',
      'AR4',
    ]);
    await query(`insert into membership (firm_id, person_id, roles) values ($1, $2, '{owner}')`, [firmId, personId]);
    await query('insert into customer (firm_id, id, name) values ($1, $2, $3)', [firmId, ids.customer, 'Tin Mill']);
    for (const site of [ids.site, ids.otherSite]) {
      await query(
        `insert into site (firm_id, id, customer_id, name, address_lines, time_zone, altitude_m, jurisdiction)
           values ($1, $2, $3, 'Mill Lane', '{1 Mill Lane}', 'UTC', 12, 'US')`,
        [firmId, site, ids.customer],
      );
    }
    await query(
      `insert into unit (firm_id, id, site_id, tag, name, appliance_kind, refrigerant)
         values ($1, $2, $3, '0412', 'back bedroom', 'comfortCooling', 'R-32'),
                ($1, $4, $5, '0413', 'hall', 'comfortCooling', 'R-32')`,
      [firmId, ids.unit, ids.site, ids.otherUnit, ids.otherSite],
    );
    await query(
      `insert into party (firm_id, id, kind, name) values ($1, $2, 'supplier', 'Copper & Co'), ($1, $3, 'reclaimer', 'Clean Gas')`,
      [firmId, cylinders.supplier, cylinders.reclaimer],
    );
    await query(
      `insert into tool (firm_id, id, kind, name, resolution_g, repeatability_g, span_error_relative, offset_g)
         values ($1, $2, 'scale', 'Scale 1', 5, 0, 0, 0)`,
      [firmId, cylinders.scale],
    );
    await query(
      `insert into cylinder (firm_id, id, tag, kind, refrigerant, content_state, owner_kind, limit_micrograms)
         values ($1, $2, '7741', 'refillable', 'R-32', 'virgin', 'ours', 11340000000),
                ($1, $3, '7742', 'recovery', 'R-32', 'recovered', 'ours', null)`,
      [firmId, cylinders.one, cylinders.two],
    );
    await query(POST, [
      [
        record('firm', firmId),
        record('membership', personId),
        record('customer', ids.customer),
        record('site', ids.site),
        record('site', ids.otherSite),
        record('unit', ids.unit),
        record('unit', ids.otherUnit),
        record('party', cylinders.supplier),
        record('party', cylinders.reclaimer),
        record('tool', cylinders.scale),
        record('cylinder', cylinders.one),
        record('cylinder', cylinders.two),
      ],
      null,
    ]);
  });

  const group = (fields: GroupFields) => groupWithEntries(personId, fields);
  return {
    ...scope,
    scope,
    siteId: ids.site,
    otherSiteId: ids.otherSite,
    customerId: ids.customer,
    unitId: ids.unit,
    otherUnitId: ids.otherUnit,
    cylinderId: cylinders.one,
    recoveryCylinderId: cylinders.two,
    scaleId: cylinders.scale,
    supplierId: cylinders.supplier,
    reclaimerId: cylinders.reclaimer,
    group,
    /** Posts groups in one call of the posting function, as the firm's owner. */
    post: (groups: readonly (readonly unknown[])[], derived: DerivedRows | null = null) =>
      app.as(scope, (query) =>
        query<PostedRecord>(POST, [groups.flat().map(textOf), derived && JSON.stringify(derived)]),
      ),
    /** Supplier to the first cylinder: 9,500 g unless said. */
    purchase: (massMicrograms = '9500000000', fields: GroupFields = {}) =>
      group({
        ...fields,
        entries: [
          {
            massMicrograms,
            typed: null,
            from: place('supplier', cylinders.supplier),
            to: place('cylinder', cylinders.one),
            howKnown: 'invoice',
          },
        ],
      }),
    async book(placeKey: string): Promise<Record<string, bigint>> {
      const rows = await app.as(scope, (query) =>
        query<{ refrigerant: string; mass: string }>(
          'select refrigerant, mass_micrograms as mass from balance where place_key = $1',
          [placeKey],
        ),
      );
      return Object.fromEntries(rows.map(({ refrigerant, mass }) => [refrigerant, BigInt(mass)]));
    },
  };
}
export type TestFirm = Awaited<ReturnType<typeof createTestFirm>>;
export interface PostedRecord {
  record_id: string;
  sequence: string;
  hash: Buffer;
}
