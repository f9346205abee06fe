import calculations from './calculations.es.json';
import charge from './charge.es.json';
import columns from './columns.es.json';
import documents from './documents.es.json';
import exports from './exports.es.json';
import flags from './flags.es.json';
import imports from './imports.es.json';
import periods from './periods.es.json';
import proof from './proof.es.json';
import registers from './registers.es.json';
import server from './server.es.json';
import stockTake from './stock-take.es.json';

/** Every Spanish sentence that the server says; the same keys as in English. */
export const catalogueEs: Readonly<Record<string, string>> = {
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
