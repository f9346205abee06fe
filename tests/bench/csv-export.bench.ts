import { spawn } from 'node:child_process';
import { createHash } from 'node:crypto';
import { createReadStream, existsSync, mkdtempSync, realpathSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import pg from 'pg';
import { pino } from 'pino';
import { v7 as uuid } from 'uuid';
import { findPostgres } from '../../server/commands/bootstrap/programs.mjs';
import { createDataSource } from '../../server/database/data-source.ts';
import { inFirm } from '../../server/database/firm-scope.ts';
import { writeDocument } from '../../server/documents/write-document.ts';
import { exportsRepository } from '../../server/exports/export.repository.ts';
import { type ExportParts, runExport } from '../../server/exports/run-export.ts';
import { inWordsOf, selectOf } from '../../server/exports/tables/table.ts';
import { tableRows } from '../../server/exports/tables/tables.ts';
import { foundFirm } from '../../server/people/found-firm.ts';
import { loadReferenceData } from '../../server/reference/load-reference-data.ts';
import { readSettings } from '../../server/settings.ts';
import { type ClonedDatabase, cloneTemplate } from '../support/cloned-database.ts';
import type { Bench } from './bench.ts';

const ROWS = 1_000_000;
const RUNS = 3;
const LOCALE = 'en-US';
const REQUEST = { what: 'entries', format: 'csv', filters: { sort: 'sequence' } } as const;

/**
 * Rows as posting leaves them, without their chain: what a file holds is the same, and a million are there in a minute.
 * One cylinder and one unit, an entry a group, as a replica writes them.
 */
async function load(database: ClonedDatabase, firmId: string, personId: string): Promise<void> {
  const client = new pg.Client({ connectionString: database.urls.superuser });
  await client.connect();
  try {
    await client.query('set session_replication_role = replica');
    const [cylinder, unit, site, customer] = [uuid(), uuid(), uuid(), uuid()];
    const rows = async (sql: string, values: unknown[]) => void (await client.query(sql, values));
    await rows(`insert into customer (firm_id, id, name, version) values ($1, $2, 'Wexcombe Mill', 1)`, [
      firmId,
      customer,
    ]);
    await rows(
      `insert into site (firm_id, id, customer_id, name, address_lines, time_zone, altitude_m, jurisdiction, version)
         values ($1, $2, $3, 'Mill Lane', '{1 Mill Lane}', 'UTC', 12, 'US', 1)`,
      [firmId, site, customer],
    );
    await rows(
      `insert into unit (firm_id, id, site_id, tag, name, appliance_kind, refrigerant, serials, nameplate_readable, version)
         values ($1, $2, $3, '0412', 'back bedroom', 'comfortCooling', 'R-32', '[]', true, 1)`,
      [firmId, unit, site],
    );
    await rows(
      `insert into cylinder (firm_id, id, tag, kind, refrigerant, content_state, owner_kind, version)
         values ($1, $2, '7741', 'refillable', 'R-32', 'virgin', 'ours', 1)`,
      [firmId, cylinder],
    );
    await rows(
      `insert into entry_group (firm_id, id, sequence, kind, unit_id, site_id, occurred_at, recorded_at, recorded_by,
           regulatory_day, zone_data_version, open_weigh_in, request_hash, reason)
         select $1::uuid, md5('g' || n)::uuid, 2 * n, 'extraCharge', $2::uuid, $3::uuid, t, t, $4::uuid, t::date, '2026a', false,
           sha256(n::text::bytea), case when n % 7 = 0 then '=more than planned' end
         from generate_series(1, ${ROWS}) n, lateral (select timestamptz '2020-01-01' + n * interval '3 minutes' as t) at`,
      [firmId, unit, site, personId],
    );
    await rows(
      `insert into entry (firm_id, id, sequence, group_id, kind, refrigerant, mass_micrograms, typed_value, typed_unit,
           from_place, from_id, to_place, to_id, how_known, occurred_at, recorded_at, recorded_by, booking_month, late,
           added_by_server, at_least, taken_back, unit_id, site_id)
         select $1::uuid, md5('e' || n)::uuid, 2 * n + 1, md5('g' || n)::uuid, 'extraCharge', 'R-32', 90000000 + n, '90', 'g',
           'cylinder', $2::uuid, 'unit', $3::uuid, 'weighed', t, t, $5::uuid, to_char(t, 'YYYY-MM'), false, false, false, false,
           $3::uuid, $4::uuid
         from generate_series(1, ${ROWS}) n, lateral (select timestamptz '2020-01-01' + n * interval '3 minutes' as t) at`,
      [firmId, cylinder, unit, site, personId],
    );
    // What is posted later comes after them.
    await rows('update firm_head set sequence = $2 where firm_id = $1', [firmId, 2 * ROWS + 2]);
    await client.query('reset session_replication_role');
    await client.query('vacuum analyze');
  } finally {
    await client.end();
  }
}

/** Beside the server's programs, wherever a link to them leads; else whatever PATH says. */
function findPsql(): string {
  const folder = findPostgres()?.folder ?? '';
  const places = [folder, path.dirname(realpathSync(path.join(folder, 'postgres')))].map((place) =>
    path.join(place, 'psql'),
  );
  return places.find((place) => existsSync(place)) ?? 'psql';
}

async function sha256Of(file: string): Promise<string> {
  const hash = createHash('sha256');
  for await (const chunk of createReadStream(file)) hash.update(chunk as Buffer);
  return hash.digest('hex');
}

/** The same rows, as the same role under the same policies, by PostgreSQL's own client. @returns seconds */
async function copyByPsql(database: ClonedDatabase, firmId: string, personId: string, file: string): Promise<number> {
  const psql = findPsql();
  const sql = selectOf(inWordsOf(tableRows(REQUEST), LOCALE)).replaceAll(/\s+/g, ' ');
  const start = performance.now();
  await new Promise<void>((resolve, reject) => {
    const child = spawn(psql, ['-q', '-v', 'ON_ERROR_STOP=1', database.urls.jobs, '-f', '-'], {
      env: { ...process.env, PGOPTIONS: `-c app.firm_id=${firmId} -c app.person_id=${personId} -c app.site_ids=` },
      stdio: ['pipe', 'inherit', 'inherit'],
    });
    child.on('error', reject);
    child.on('exit', (code) => (code === 0 ? resolve() : reject(new Error(`psql ended with ${code}`))));
    child.stdin.end(`\\copy (${sql}) to '${file}' with (format csv, header)\n`);
  });
  return (performance.now() - start) / 1000;
}

/**
 * A million entries as a finished CSV file (counted, hashed, synced, journalled, its progress told) against `psql \copy` of
 * the same rows to a file; and how much the process grows meanwhile. The best of the runs counts on both sides.
 */
export const bench: Bench = {
  async run({ startPostgres, say }) {
    const { port } = await startPostgres();
    const database = await cloneTemplate({ port });
    const home = mkdtempSync(path.join(tmpdir(), 'tarewright-bench-'));
    const app = await createDataSource({ url: database.urls.app, poolSize: 2 }).initialize();
    const jobs = await createDataSource({ url: database.urls.jobs, poolSize: 4 }).initialize();
    try {
      const parts: ExportParts = {
        settings: {
          ...readSettings({ TAREWRIGHT_HOME: home }, home),
          sessionSecret: 'a secret of this bench alone, long enough',
        },
        log: pino({ level: 'error' }, pino.destination(2)),
        now: () => new Date(),
        newId: () => uuid(),
        reference: loadReferenceData(),
        dataSource: app,
        mailer: { send: async () => ({ sent: false, reason: 'no mail here' }), close: async () => undefined },
        background: { run: () => undefined, settled: async () => undefined },
      };
      const firmId = uuid();
      const owner = {
        id: uuid(),
        name: 'Ada Firth',
        email: `${firmId}@example.test`,
        password: 'correct horse battery',
      };
      const firm = {
        id: firmId,
        name: 'Bench',
        jurisdiction: 'US',
        timeZone: 'UTC',
        locale: LOCALE,
        gwpSet: 'US-AIM',
      } as const;
      await foundFirm({ ...parts, dataSource: app } as Parameters<typeof foundFirm>[0], firm, owner);
      say(`loading ${ROWS} entries`);
      await load(database, firmId, owner.id);

      const actor = { firmId, personId: owner.id, siteIds: null };
      let [ours, theirs, growth] = [Number.POSITIVE_INFINITY, Number.POSITIVE_INFINITY, 0];
      for (let run = 0; run < RUNS; run++) {
        const bare = path.join(home, 'bare.csv');
        theirs = Math.min(theirs, await copyByPsql(database, firmId, owner.id, bare));
        const id = uuid();
        await inFirm(jobs, actor, (manager) =>
          exportsRepository(manager).insert({
            ...REQUEST,
            firmId,
            id,
            locale: LOCALE,
            requestedBy: owner.id,
            at: parts.now(),
          }),
        );
        global.gc?.();
        const before = process.memoryUsage().rss;
        let most = before;
        const watch = setInterval(() => {
          most = Math.max(most, process.memoryUsage().rss);
        }, 20);
        const start = performance.now();
        const outcome = await runExport(
          parts,
          jobs,
          { firmId, exportId: id },
          writeDocument,
          new AbortController().signal,
        );
        ours = Math.min(ours, (performance.now() - start) / 1000);
        clearInterval(watch);
        growth = Math.max(growth, (most - before) / 2 ** 20);
        if (outcome !== 'done') throw new Error(`the export was ${outcome}`);
        const file = path.join(home, 'exports', firmId, `${id}.1`); // the first attempt
        if ((await sha256Of(file)) !== (await sha256Of(bare))) throw new Error('the two files differ');
        rmSync(file);
        say(
          `run ${run + 1}: ${ours.toFixed(1)} s, psql ${theirs.toFixed(1)} s, grew by ${growth.toFixed(0)} MB at most`,
        );
      }
      return [
        {
          name: 'csv-export',
          value: ROWS / ours,
          unit: 'rows/s',
          against: ROWS / theirs,
          againstWhat: 'psql \\copy of the same rows',
          bar: { atLeast: 0.5 },
        },
        { name: 'csv-export-memory', value: growth, unit: 'MB', against: null, bar: { atMost: 64 } },
      ];
    } finally {
      await jobs.destroy();
      await app.destroy();
      await database.drop();
      rmSync(home, { recursive: true, force: true });
    }
  },
};
