import calculations from './calculations.en.json';
import charge from './charge.en.json';
import columns from './columns.en.json';
import documents from './documents.en.json';
import exports from './exports.en.json';
import flags from './flags.en.json';
import imports from './imports.en.json';
import periods from './periods.en.json';
import proof from './proof.en.json';
import registers from './registers.en.json';
import server from './server.en.json';
import stockTake from './stock-take.en.json';

/**
 * Every English sentence that the server says: problems, results, mails. A new file of them is added here and in
 * `catalogue-es.ts`; files that only a screen uses are loaded by the screen.
 */
export const catalogueEn: Readonly<Record<string, string>> = {
  ...calculations,
  ...charge,
  ...columns,
  ...documents,
  ...exports,
  ...imports,
  ...flags,
  ...proof,
  ...periods,
  ...registers,
  ...server,
  ...stockTake,
};
