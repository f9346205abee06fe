import { place, textOf } from '../database/record-texts.ts';
import { type Connection, connect, createTestFirm, POST } from '../database/test-firm.ts';
import { cloneTemplate } from '../support/cloned-database.ts';
import type { Bench } from './bench.ts';

/** Texts of so many entries in groups of two: bought into a cylinder, charged from it into a unit. */
function textsOf(firm: Awaited<ReturnType<typeof createTestFirm>>, entryCount: number): string[] {
  return Array.from({ length: entryCount / 2 }, (_, index) => {
    const cylinder = place('cylinder', firm.recoveryCylinderId);
    const unit = index % 2 === 0 ? firm.unitId : firm.otherUnitId;
    return firm.group({
      kind: 'extraCharge',
      unitId: unit,
      siteId: firm.siteId,
      entries: [
        { from: place('supplier', firm.supplierId), to: cylinder, massMicrograms: '91000000' },
        { from: cylinder, to: place('unit', unit) },
      ],
    });
  })
    .flat()
    .map(textOf);
}

/** Groups of three records in a call, as whoever posts much hands them over. */
const RECORDS_A_CALL = 1_500;

async function secondsToPost(app: Connection, entryCount: number): Promise<number> {
  const firm = await createTestFirm(app);
  const texts = textsOf(firm, entryCount);
  const calls = Array.from({ length: Math.ceil(texts.length / RECORDS_A_CALL) }, (_, index) =>
    texts.slice(index * RECORDS_A_CALL, (index + 1) * RECORDS_A_CALL),
  );
  return app.as(firm.scope, async (query) => {
    const start = performance.now();
    for (const call of calls) await query(POST, [call, null]);
    return (performance.now() - start) / 1000;
  });
}

/**
 * Ten times the entries in one transaction take about ten times as long, in calls of 500 groups: one call with all of
 * them takes 11 to 13 times as long, half of it because the array of 80 MB is written and read as one text. Each run posts into a firm of its own; the
 * fastest of three is the one that other work on the computer disturbed least. The connection is the same throughout and
 * starts on an empty database, because plans made then have to hold later.
 */
export const bench: Bench = {
  async run({ startPostgres, say }) {
    const { port } = await startPostgres();
    const database = await cloneTemplate({ port });
    const app = connect(database);
    try {
      await secondsToPost(app, 1_000);
      const fastest = async (entryCount: number): Promise<number> => {
        const seconds: number[] = [];
        for (let run = 0; run < 3; run++) seconds.push(await secondsToPost(app, entryCount));
        say(`${entryCount} entries: ${seconds.map((each) => each.toFixed(2)).join(', ')} s`);
        return Math.min(...seconds);
      };
      const against = await fastest(10_000);
      const value = await fastest(100_000);
      return {
        name: 'posting-growth',
        value,
        unit: 's',
        against,
        againstWhat: '10,000 entries in one transaction',
        bar: { atMost: 12 },
      };
    } finally {
      await app.close();
    }
  },
};
