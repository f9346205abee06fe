import type { WriteDocument } from '../exports/run-export.ts';

export const writeDocument: WriteDocument = async () => null;
