import { Client, escapeIdentifier, escapeLiteral } from 'pg';

/**
 * The four roles, one cluster's: the owner migrates, the server connects as `app`, its jobs as `jobs`, a dump as `backup`.
 * Only `backup` passes row-level security, and it can only read.
 */
export const ROLE_NAMES = {
  owner: 'tarewright_owner',
  app: 'tarewright_app',
  jobs: 'tarewright_jobs',
  backup: 'tarewright_backup',
} as const;
export type RoleName = keyof typeof ROLE_NAMES;

const ATTRIBUTES: Record<RoleName, string> = {
  owner: 'NOBYPASSRLS',
  app: 'NOBYPASSRLS',
  jobs: 'NOBYPASSRLS',
  backup: 'BYPASSRLS',
};

/**
 * Makes roles and database where they are missing, and sets attributes and passwords again where they exist.
 * `superuserUrl` names any database of the cluster but `database` itself may be missing yet.
 */
export async function ensureRoles(options: {
  superuserUrl: string;
  database: string;
  passwords: Record<RoleName, string>;
}): Promise<void> {
  const { superuserUrl, database, passwords } = options;
  await withClient(superuserUrl, async (client) => {
    for (const role of Object.keys(ROLE_NAMES) as RoleName[]) {
      const name = escapeIdentifier(ROLE_NAMES[role]);
      const known = await client.query('select from pg_roles where rolname = $1', [ROLE_NAMES[role]]);
      if (known.rowCount === 0) await client.query(`create role ${name}`);
      await client.query(
        `alter role ${name} login nosuperuser nocreatedb nocreaterole noreplication ${ATTRIBUTES[role]}
           password ${escapeLiteral(passwords[role])}`,
      );
    }
    const name = escapeIdentifier(database);
    const owner = escapeIdentifier(ROLE_NAMES.owner);
    const known = await client.query('select from pg_database where datname = $1', [database]);
    if (known.rowCount === 0)
      await client.query(`create database ${name} owner ${owner} encoding 'UTF8' template template0`);
    else await client.query(`alter database ${name} owner to ${owner}`);
    // Nobody else connects, and nobody but the owner makes tables, temporary ones included.
    await client.query(`revoke all on database ${name} from public`);
    const others = [ROLE_NAMES.app, ROLE_NAMES.jobs, ROLE_NAMES.backup]
      .map((role) => escapeIdentifier(role))
      .join(', ');
    await client.query(`grant connect on database ${name} to ${others}`);
  });
}

async function withClient(url: string, work: (client: Client) => Promise<void>): Promise<void> {
  const client = new Client({ connectionString: url });
  await client.connect();
  try {
    await work(client);
  } finally {
    await client.end();
  }
}
