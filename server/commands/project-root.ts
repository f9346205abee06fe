import { existsSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { fileURLToPath } from 'node:url';

/** Folder of the checkout, found upwards from this module, in the sources as in the build. */
export const projectRoot = findRoot(path.dirname(fileURLToPath(import.meta.url)));

function findRoot(folder: string): string {
  const file = path.join(folder, 'package.json');
  if (existsSync(file) && JSON.parse(readFileSync(file, 'utf8')).name === 'tarewright') return folder;
  const above = path.dirname(folder);
  if (above === folder) throw new Error('the checkout with its package.json is not above this module');
  return findRoot(above);
}
