import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createDataSource } from '../../server/database/data-source.ts';
import { loadDemoFirms } from '../../server/demo/load-demo-firms.ts';
import type { Parts } from '../../server/http/parts.ts';
import { verifyLog } from '../../server/proof/verification.service.ts';
import { sealWhatIsDue } from '../../server/seals/seal.service.ts';
import { readSettings } from '../../server/settings.ts';
import { THE_PROGRAM } from '../../shared/proof/seal-record.schema.ts';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';

const NOW = new Date('2026-11-30T15:00:00.000Z');
const home = mkdtempSync(path.join(tmpdir(), 'tarewright-demo-intact-'));
let database: TestDatabase;
beforeAll(async () => {
  database = await createTestDatabase();
  await loadDemoFirms({ databaseUrls: database.urls, password: 'correct horse battery', now: NOW });
}, 240_000);
afterAll(async () => {
  await database.drop();
  rmSync(home, { recursive: true, force: true });
});

describe('The check of the log', () => {
  it('finds the demo firms intact: what people do in three years is never taken for tampering', async () => {
    const dataSource = await createDataSource({ url: database.urls.app, poolSize: 2 }).initialize();
    const jobs = await createDataSource({ url: database.urls.jobs, poolSize: 2 }).initialize();
    const parts = {
      settings: readSettings({ TAREWRIGHT_HOME: home }, '/nowhere'),
      dataSource,
      now: () => NOW,
      newId: () => crypto.randomUUID(),
      mailer: { send: async () => ({ sent: true, messageId: '1' }), close: async () => undefined },
      log: console,
    } as unknown as Parts;
    try {
      await sealWhatIsDue(parts, jobs);
      const firms = await database.query<{ id: string; records: string }>(
        'superuser',
        'select firm_id as id, sequence as records from firm_head order by sequence',
      );
      expect(firms).toHaveLength(2);
      for (const { id, records } of firms) {
        const actor = {
          firmId: id,
          personId: THE_PROGRAM,
          siteIds: null,
          locale: 'en-GB',
          roles: [],
          tokenScopes: null,
        } as const;
        const result = await verifyLog(parts, actor, { onProgress: () => undefined, isGone: () => false });
        expect(result).toMatchObject({ result: 'intact', fault: null, records: Number(records), seals: 1 });
      }
    } finally {
      await dataSource.destroy();
      await jobs.destroy();
    }
  });
});
