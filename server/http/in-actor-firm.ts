import type { Request } from 'express';
import type { EntityManager } from 'typeorm';
import { inFirm } from '../database/firm-scope.ts';
import { actorOf } from './actor.ts';
import type { Parts } from './parts.ts';

/**
 * Runs `work` in one transaction that sees and touches the caller's firm only (a reader: the reader's sites only).
 * Everything that a request reads or writes goes through the manager handed in; another connection would see nothing.
 */
export function inActorFirm<T>(parts: Parts, req: Request, work: (manager: EntityManager) => Promise<T>): Promise<T> {
  return inFirm(parts.dataSource, actorOf(req), work);
}
