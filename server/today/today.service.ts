import type { EntityManager } from 'typeorm';
import type { Today } from '../../shared/today/today.schema.ts';
import { dayInZone } from '../../shared/units/calendar.ts';
import { cylindersRepository, presentCylinder } from '../cylinders/cylinder.repository.ts';
import { inFirm } from '../database/firm-scope.ts';
import { entryListRepository } from '../entries/entry-list.repository.ts';
import { readOnHand } from '../entries/on-hand.repository.ts';
import { flagsRepository } from '../flags/flag.repository.ts';
import { type Actor, mayActor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { readDue, readOpenWeighIns } from './today.repository.ts';

const DUE_WITHIN_DAYS = 30;
const A_DAY_MS = 24 * 60 * 60_000;

/** The day of whoever asks: a technician's van and weigh-ins, the office's arrivals and contradictions. */
export function getToday(parts: Parts, actor: Actor): Promise<Today> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    const isOffice = mayActor(actor, 'registers:correct');
    const now = parts.now().getTime();
    const zone = await firmZone(manager);
    const days = { today: dayInZone(now, zone), until: dayInZone(now + DUE_WITHIN_DAYS * A_DAY_MS, zone) };
    const weighIns = await readOpenWeighIns(manager);
    const own = { heldBy: actor.personId, sort: 'tag' as const, limit: 200 };
    const { items: onTheVan } = await cylindersRepository(manager).list(own, presentCylinder);
    const entries = entryListRepository(manager, actor.locale);
    const cameIn = isOffice ? (await entries.list({ sort: '-sequence', limit: 50 })).items : [];
    const since = now - A_DAY_MS;
    return {
      onTheVan,
      toWeighBack: isOffice ? weighIns : weighIns.filter(({ startedBy }) => startedBy === actor.personId),
      cameIn: cameIn.filter(({ recordedAt }) => Date.parse(recordedAt) >= since),
      contradicts: isOffice ? await flagsRepository(manager, actor.locale).contradictions(100) : [],
      due: isOffice ? await readDue(manager, days) : [],
      onHand: await readOnHand(manager),
    };
  });
}

async function firmZone(manager: EntityManager): Promise<string> {
  const [firm] = await manager.query<{ zone: string }[]>(
    'select time_zone as zone from firm where id = current_firm_id()',
  );
  return firm?.zone ?? 'UTC';
}
