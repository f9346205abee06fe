import type { DatabaseUrls } from './database-urls.ts';

/** One of the demo firms' people, as the start command prints it. */
export interface DemoSignIn {
  firm: string;
  name: string;
  role: string;
  email: string;
}

/**
 * The hook of the start and dev commands: loads the two demo firms into a database without any firm, and says who can
 * sign in. Called at each start unless TAREWRIGHT_DEMO=0, after the migrations and before the server listens.
 * Both firms are there whole or not at all, whatever interrupts it; a later start then finds nothing and loads again.
 * @param password every demo person's, generated for this installation and kept in its secrets.json
 * @returns the demo people, also when they were loaded earlier; empty in a database that others fill
 */
export async function loadDemoIfEmpty(options: {
  databaseUrls: Pick<DatabaseUrls, 'app' | 'jobs'>;
  password: string;
  now: Date;
}): Promise<DemoSignIn[]> {
  const { loadDemoFirms } = await import('../demo/load-demo-firms.ts');
  return loadDemoFirms(options);
}
