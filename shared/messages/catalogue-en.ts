import charge from './charge.en.json';
import frame from './frame.en.json';
import server from './server.en.json';

/** Every English sentence by its key. A new file of sentences is added here and in `catalogue-es.ts`. */
export const catalogueEn: Readonly<Record<string, string>> = { ...charge, ...frame, ...server };
