import { fileURLToPath } from 'node:url';
import type { TestProject } from 'vitest/node';
import { ensureBuilt } from '../../server/commands/bootstrap/build.mjs';

declare module 'vitest' {
  interface ProvidedContext {
    /** Folder of the built client, for `startServer({ clientFolder })`. */
    clientFolder: string;
  }
}

/** Builds the client once for the browser tests, if its sources changed since the last build. */
export default function setup(project: TestProject): void {
  const root = fileURLToPath(new URL('../..', import.meta.url));
  project.provide('clientFolder', ensureBuilt({ root, side: 'client' }));
}
