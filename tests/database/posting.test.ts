import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';
import { place } from './record-texts.ts';
import { type Connection, connect, createTestFirm, type TestFirm } from './test-firm.ts';

let database: TestDatabase;
let app: Connection;
let firm: TestFirm;
beforeAll(async () => {
  database = await createTestDatabase();
  app = connect(database);
});
afterAll(async () => {
  await app.close();
  await database.drop();
});
beforeEach(async () => {
  firm = await createTestFirm(app);
});

describe('Posting a group', () => {
  it('moves its masses between books and fills every column from the chained text', async () => {
    const [record, entry] = firm.purchase();
    const posted = await firm.post([[record, entry]]);

    expect(posted.map((row) => row.record_id)).toEqual([record.id, entry?.id]);
    expect(await firm.book(`cylinder:${firm.cylinderId}`)).toEqual({ 'R-32': 9_500_000_000n });
    expect(await firm.book(`supplier:${firm.supplierId}`)).toEqual({ 'R-32': -9_500_000_000n });
  });
});
