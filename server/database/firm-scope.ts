import { AsyncLocalStorage } from 'node:async_hooks';
import type { DataSource, EntityManager, QueryRunner } from 'typeorm';

/** Who asks. `siteIds` null: all sites of the firm; an empty list: none. */
export interface Actor {
  readonly firmId: string;
  readonly personId: string;
  readonly siteIds: readonly string[] | null;
}
export type Isolation = 'READ COMMITTED' | 'REPEATABLE READ' | 'SERIALIZABLE';

interface Scope {
  readonly firmId: string | null;
  readonly personId: string;
  readonly runner: QueryRunner;
}
const scopes = new AsyncLocalStorage<Scope>();

/** How long a statement waits for a row or a firm's head before it gives up with SQLSTATE 55P03. */
const LOCK_TIMEOUT = '5s';
const SET_SCOPE = `select set_config('app.firm_id', $1, true), set_config('app.person_id', $2, true),
  set_config('app.site_ids', $3, true), set_config('lock_timeout', '${LOCK_TIMEOUT}', true)`;

/**
 * Runs `work` in a transaction that sees one firm's rows, and commits. Within it `em()` gives the manager; a call inside
 * another of the same firm and person joins that transaction.
 *
 * Await statements in turn: one connection does one thing at a time.
 *
 * @throws what `work` throws, after a rollback; Error inside the scope of another firm or person.
 */
export function inFirm<T>(
  dataSource: DataSource,
  actor: Actor,
  work: (manager: EntityManager) => Promise<T>,
  isolation: Isolation = 'READ COMMITTED',
): Promise<T> {
  return inScope(dataSource, actor, work, isolation);
}

/** As `inFirm`, before a firm is chosen: sees the person's own rows (secret, resets, memberships, their firms' ids) only. */
export function asPerson<T>(
  dataSource: DataSource,
  personId: string,
  work: (manager: EntityManager) => Promise<T>,
): Promise<T> {
  return inScope(dataSource, { firmId: null, personId, siteIds: null }, work, 'READ COMMITTED');
}

/** The manager of the transaction that is open. @throws Error outside of `inFirm` and `asPerson`. */
export function em(): EntityManager {
  const scope = scopes.getStore();
  if (!scope) throw new Error('no firm in scope: call this within inFirm');
  return scope.runner.manager;
}

async function inScope<T>(
  dataSource: DataSource,
  { firmId, personId, siteIds }: Omit<Actor, 'firmId'> & { firmId: string | null },
  work: (manager: EntityManager) => Promise<T>,
  isolation: Isolation,
): Promise<T> {
  const outer = scopes.getStore();
  if (outer) {
    if (outer.firmId !== firmId || outer.personId !== personId)
      throw new Error('a transaction of another firm or person is open');
    return work(outer.runner.manager);
  }
  const runner = dataSource.createQueryRunner();
  await runner.connect();
  try {
    // READ COMMITTED is the server's own: naming it would cost a round trip.
    await runner.startTransaction(isolation === 'READ COMMITTED' ? undefined : isolation);
    await runner.query(SET_SCOPE, [firmId ?? '', personId, siteIds === null ? '' : `{${siteIds.join(',')}}`]);
    const result = await scopes.run({ firmId, personId, runner }, () => work(runner.manager));
    await runner.commitTransaction();
    return result;
  } catch (error) {
    if (runner.isTransactionActive) await runner.rollbackTransaction().catch(() => undefined);
    throw error;
  } finally {
    await runner.release();
  }
}
