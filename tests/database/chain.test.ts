import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createTestDatabase, type TestDatabase } from '../support/database.ts';
import { type ChainRow, firstBrokenRecord } from './chain-from-rows.ts';
import { type Connection, connect, createTestFirm, type TestFirm } from './test-firm.ts';

let database: TestDatabase;
let app: Connection;
let firm: TestFirm;
beforeAll(async () => {
  database = await createTestDatabase();
  app = connect(database);
  firm = await createTestFirm(app);
  await firm.post([firm.purchase('1000'), firm.purchase('2000')]);
  await firm.post([firm.purchase('3000')]);
});
afterAll(async () => {
  await app.close();
  await database.drop();
});

const chain = () =>
  app.as(firm.scope, (query) =>
    query<ChainRow>('select sequence, content, hash from journal_record order by sequence'),
  );

/** Somebody with full rights on the database, past its triggers, in a transaction that is not kept. */
async function chainAfter(tamperWith: string): Promise<ChainRow[]> {
  const owner = connect({ urls: { ...database.urls, app: database.urls.superuser } });
  const undone = new Error('undo');
  let rows: ChainRow[] = [];
  try {
    await owner.as(firm.scope, async (query) => {
      await query(`set local session_replication_role = 'replica'`);
      await query(tamperWith.replaceAll('FIRM', `firm_id = '${firm.firmId}'`));
      rows = await query<ChainRow>(
        `select sequence, content, hash from journal_record where firm_id = '${firm.firmId}' order by sequence`,
      );
      throw undone;
    });
  } catch (error) {
    if (error !== undone) throw error;
  } finally {
    await owner.close();
  }
  return rows;
}

describe('The chain', () => {
  it('is what node:crypto makes of the texts: SHA-256 of sequence, previous hash and hash of the text', async () => {
    const rows = await chain();

    expect(rows).toHaveLength(18);
    expect(firstBrokenRecord(rows)).toBeNull();
  });

  it('ends in the head', async () => {
    const [head] = await app.as(firm.scope, (query) => query('select sequence, hash from firm_head'));
    const last = (await chain()).at(-1);

    expect(head).toEqual({ sequence: last?.sequence, hash: last?.hash });
  });

  it('holds the text byte for byte as it was given', async () => {
    const [record, entry] = firm.purchase('4000', { reason: 'é ≤ "\\" \u2028 𝄞' });
    await firm.post([[record, entry]]);

    const last = (await chain()).at(-2);

    expect(JSON.parse(last?.content ?? '')).toEqual(record);
    expect(last?.content).toContain('"reason":"é ≤ \\"\\\\\\" \u2028 𝄞"');
  });

  it.each([
    [
      'a changed text',
      `update journal_record set content = replace(content, '"2000"', '"2001"') where FIRM and sequence = 16`,
      16,
    ],
    ['a removed record', 'delete from journal_record where FIRM and sequence = 14', 14],
    [
      'two records that changed places',
      `update journal_record r set content = o.content, content_hash = o.content_hash
         from journal_record o where r.FIRM and o.FIRM and (r.sequence, o.sequence) in ((13, 15), (15, 13))`.replaceAll(
        /(\w)\.FIRM/g,
        '$1.FIRM',
      ),
      13,
    ],
    [
      'an inserted record',
      `update journal_record set sequence = -sequence - 1 where FIRM and sequence > 14;
       update journal_record set sequence = -sequence where FIRM and sequence < 0;
       insert into journal_record select firm_id, 15, type, gen_random_uuid(), content, content_hash, hash, noun, subject_id,
         version, recorded_at, recorded_by from journal_record where FIRM and sequence = 13`,
      15,
    ],
    ['a swapped hash', `update journal_record set hash = content_hash where FIRM and sequence = 17`, 17],
  ])('shows %s at its first record', async (_what, tamperWith, sequence) => {
    expect(firstBrokenRecord(await chainAfter(tamperWith))).toBe(sequence);
  });
});
