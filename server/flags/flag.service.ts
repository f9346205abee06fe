import type { FlagListQuery } from '../../shared/entries/entry.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { flagsRepository } from './flag.repository.ts';

export function listFlags(parts: Parts, actor: Actor, query: FlagListQuery) {
  return inFirm(parts.dataSource, actor, (manager) => flagsRepository(manager, actor.locale).list(query));
}
