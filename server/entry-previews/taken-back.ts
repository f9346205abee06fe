import type { DataSource, EntityManager } from 'typeorm';
import { type Actor, type Isolation, inFirm } from '../database/firm-scope.ts';

/** Carries a result out of a transaction that is rolled back. */
class TakenBack<T> extends Error {
  readonly value: T;

  constructor(value: T) {
    super('taken back on purpose');
    this.value = value;
  }
}

/** Runs `work` in a transaction of its own and takes everything back that it wrote; gives what it found out. */
export async function inTransactionTakenBack<T>(
  dataSource: DataSource,
  actor: Actor,
  work: (manager: EntityManager) => Promise<T>,
  isolation?: Isolation,
): Promise<T> {
  try {
    return await inFirm(
      dataSource,
      actor,
      async (manager) => {
        throw new TakenBack(await work(manager));
      },
      isolation,
    );
  } catch (error) {
    if (error instanceof TakenBack) return error.value as T;
    throw error;
  }
}
