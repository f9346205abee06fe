import type { CloseResponse } from '../../shared/periods/periods.schema.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { sealNow } from '../seals/seal.service.ts';

/**
 * Seals the chain once a month is closed, so that what was signed off stands under a signature. In a transaction of its
 * own: a lost key must not keep a month open, and the daily seal makes up for it.
 */
export async function sealAfterClose(parts: Parts, actor: Actor): Promise<CloseResponse['seal']> {
  try {
    const { seal } = await sealNow(parts, actor);
    return { record: seal.record, hash: seal.hash, keyId: seal.keyId };
  } catch (error) {
    parts.log.error({ err: error, firmId: actor.firmId }, 'a closed month could not be sealed');
    return null;
  }
}
