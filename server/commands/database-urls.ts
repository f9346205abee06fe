import type { Secrets } from '../cluster/home.ts';

/** Addresses of the product's database, one for each role that a running server uses. */
export interface DatabaseUrls {
  owner: string;
  app: string;
  jobs: string;
  backup: string;
}

/** The administrator's address with another role and its password: same server, database and options. */
export function urlsOfRoles(administratorUrl: string, secrets: Secrets): DatabaseUrls {
  const as = (role: keyof DatabaseUrls) => {
    const url = new URL(administratorUrl);
    url.username = `tarewright_${role}`;
    url.password = secrets[role];
    return url.href;
  };
  return { owner: as('owner'), app: as('app'), jobs: as('jobs'), backup: as('backup') };
}

/** The same server's address of another of its databases. */
export function urlOfDatabase(url: string, database: string): string {
  const other = new URL(url);
  other.pathname = `/${encodeURIComponent(database)}`;
  return other.href;
}

export function databaseNameOf(url: string): string {
  return decodeURIComponent(new URL(url).pathname.slice(1));
}

/** For messages: without the password. */
export function withoutPassword(url: string): string {
  const shown = new URL(url);
  shown.password = '';
  return shown.href;
}
