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
 * No firms are written yet, so nobody is returned and the commands print no sign-ins.
 * @param password every demo person's, generated for this installation and kept in its secrets.json
 * @returns the demo people, also when they were loaded earlier; empty in a database that others fill
 */
export async function loadDemoIfEmpty(_options: {
  databaseUrls: DatabaseUrls;
  password: string;
  now: Date;
}): Promise<DemoSignIn[]> {
  return [];
}
