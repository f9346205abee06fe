import charge from './charge.es.json';
import frame from './frame.es.json';
import server from './server.es.json';

/** Every Spanish sentence by its key; the same keys as in English. */
export const catalogueEs: Readonly<Record<string, string>> = { ...charge, ...frame, ...server };
