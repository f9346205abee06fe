import type { Request } from 'express';
import type { EntityManager } from 'typeorm';
import { actorOf } from './actor.ts';
import type { Parts } from './parts.ts';

/**
 * Runs `work` in one transaction that sees and touches the caller's firm only (a reader: the reader's sites only).
 * Everything that a request reads or writes goes through the manager handed in; another connection would see nothing.
 */
export async function inActorFirm<T>(
  parts: Parts,
  req: Request,
  work: (manager: EntityManager) => Promise<T>,
): Promise<T> {
  const actor = actorOf(req);
  return parts.dataSource.transaction(async (manager) => {
    await manager.query(`SELECT set_config('app.firm_id', $1, true)`, [actor.firmId]);
    return work(manager);
  });
}
