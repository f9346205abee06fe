import type { DataSource } from 'typeorm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { CustomerEntity } from '../../server/customers/customer.entity.ts';
import { createDataSource } from '../../server/database/data-source.ts';
import { asPerson, em, inFirm } from '../../server/database/firm-scope.ts';
import { EntryEntity } from '../../server/entries/entry.entity.ts';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';
import { type Connection, connect, createTestFirm, type TestFirm } from './test-firm.ts';

let database: TestDatabase;
let app: Connection;
let dataSource: DataSource;
let firms: [TestFirm, TestFirm];
beforeAll(async () => {
  database = await createTestDatabase();
  app = connect(database);
  dataSource = await createDataSource({ url: database.urls.app, poolSize: 4 }).initialize();
  firms = [await createTestFirm(app), await createTestFirm(app)];
  await firms[0].post([firms[0].purchase('9007199254740993', { reason: 'past the limit on purpose' })]);
});
afterAll(async () => {
  await dataSource.destroy();
  await app.close();
  await database.drop();
});

const actorOf = (firm: TestFirm) => ({ firmId: firm.firmId, personId: firm.personId, siteIds: null });

describe('A firm scope', () => {
  it('never mixes sixty requests of two firms over four connections', async () => {
    const seen = await Promise.all(
      Array.from({ length: 60 }, (_, index) => {
        const firm = firms[index % 2] as TestFirm;
        return inFirm(dataSource, actorOf(firm), async () => {
          await em().query('select pg_sleep(0.001)');
          const [customer] = await em().find(CustomerEntity);
          return customer?.firmId === firm.firmId;
        });
      }),
    );

    expect(seen).toEqual(Array(60).fill(true));
  });

  it('leaves the pool without a firm', async () => {
    for (let connection = 0; connection < 4; connection++) {
      expect(await dataSource.query('select current_firm_id() as firm')).toEqual([{ firm: null }]);
    }
    expect(await dataSource.getRepository(CustomerEntity).find()).toEqual([]);
  });

  it('hands masses over as whole numbers, past 2^53 too', async () => {
    const entries = await inFirm(dataSource, actorOf(firms[0]), (manager) => manager.find(EntryEntity));

    expect(entries.map(({ massMicrograms, sequence }) => [massMicrograms, sequence])).toEqual([
      [9_007_199_254_740_993n, 14],
    ]);
  });

  it('leaves nothing behind an exception', async () => {
    const failing = inFirm(dataSource, actorOf(firms[0]), async (manager) => {
      await manager.query('insert into last_sign_in values (current_firm_id(), current_person_id(), now())');
      throw new Error('boom');
    });

    await expect(failing).rejects.toThrow('boom');
    expect(
      await inFirm(dataSource, actorOf(firms[0]), (manager) => manager.query('select * from last_sign_in')),
    ).toEqual([]);
  });

  it('is joined by a call of the same firm and person, and refuses another', async () => {
    await inFirm(dataSource, actorOf(firms[0]), async (outer) => {
      expect(await inFirm(dataSource, actorOf(firms[0]), async (inner) => inner === outer)).toBe(true);
      const other = inFirm(dataSource, actorOf(firms[1]), async () => undefined);
      await expect(other).rejects.toThrow('another firm');
    });
  });

  it('tells nobody a manager outside of it', () => {
    expect(() => em()).toThrow('no firm in scope');
  });

  it('without a firm shows a person their own row and not a customer', async () => {
    const rows = await asPerson(dataSource, firms[0].personId, async (manager) => [
      await manager.query('select id from person'),
      await manager.query('select id from customer'),
    ]);

    expect(rows).toEqual([[{ id: firms[0].personId }], []]);
  });

  it('reads a site list of null as all sites and an empty one as none', async () => {
    const units = (siteIds: string[] | null) =>
      inFirm(dataSource, { ...actorOf(firms[0]), siteIds }, (manager) =>
        manager.query('select id from unit order by id'),
      );

    expect(await units(null)).toHaveLength(2);
    expect(await units([])).toEqual([]);
    expect(await units([firms[0].siteId])).toEqual([{ id: firms[0].unitId }]);
    expect(await units([firms[0].siteId, firms[0].otherSiteId])).toHaveLength(2);
  });

  it('gives up on a lock after five seconds and not never', async () => {
    const settings = await inFirm(dataSource, actorOf(firms[0]), (manager) => manager.query('show lock_timeout'));

    expect(settings).toEqual([{ lock_timeout: '5s' }]);
  });
});
