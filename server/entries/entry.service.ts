import type { Response } from 'express';
import type {
  EntryExportQuery,
  EntryListQuery,
  GroupView,
  OnHand,
  ReadingListQuery,
} from '../../shared/entries/entry.schema.ts';
import { countedAdditions, fullChargeRises } from '../../shared/ledger/counted-additions.ts';
import { dayInZone } from '../../shared/units/calendar.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { inFirm } from '../database/firm-scope.ts';
import { mayExport } from '../exports/export-rights.ts';
import { journalCsv } from '../exports/send-csv.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem } from '../http/problem.ts';
import { sendEntriesCsv } from './entry-csv.ts';
import { entryListRepository } from './entry-list.repository.ts';
import { findGroupView } from './group-view.repository.ts';
import { namedIds } from './named-ids.ts';
import { readOnHand } from './on-hand.repository.ts';
import { loadPostingFacts } from './posting-facts.repository.ts';
import { listReadings as readReadings } from './reading.repository.ts';
import { loadTimelines } from './timeline.repository.ts';

export function listEntries(parts: Parts, actor: Actor, query: EntryListQuery) {
  return inFirm(parts.dataSource, actor, (manager) => entryListRepository(manager, actor.locale).list(query));
}

export function getGroup(parts: Parts, actor: Actor, id: string): Promise<GroupView> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    const group = await findGroupView(manager, id, actor.locale);
    if (!group) throw new Problem('notFound');
    return group;
  });
}

export function listReadings(parts: Parts, actor: Actor, query: ReadingListQuery) {
  return inFirm(parts.dataSource, actor, (manager) => readReadings(manager, query));
}

/**
 * The log as a file. Who makes exports takes out everything; a reader what a reader sees; a technician their own.
 * @throws Problem 403
 */
export async function exportEntries(parts: Parts, actor: Actor, query: EntryExportQuery, res: Response): Promise<void> {
  if (!mayExport(actor, { what: 'entries', filters: query })) {
    throw new Problem('notPermitted', {
      errors: [{ code: 'ownEntriesOnly', path: '/personId', given: query.personId ?? null, allowed: actor.personId }],
    });
  }
  const fileName = `log-${parts.now().toISOString().slice(0, 10)}.csv`;
  await journalCsv(parts, actor, { document: 'entries', filters: query }, null);
  await inFirm(
    parts.dataSource,
    actor,
    (manager) => sendEntriesCsv(manager, query, actor.locale, res, fileName),
    'REPEATABLE READ',
  );
}

/** What counts for the leak rate of a unit, by the judge's own rule over its whole timeline. */
export function getCountedAdditions(parts: Parts, actor: Actor, unitId: string) {
  return inFirm(parts.dataSource, actor, async (manager) => {
    const facts = await loadPostingFacts(manager, namedIds([], [], { unitIds: [unitId] }));
    const unit = facts.units.get(unitId);
    if (!unit) throw new Problem('notFound');
    const { groups } = await loadTimelines(manager, [unitId]);
    const zoneAt = (at: number) =>
      (unit.sites.findLast(({ validFrom }) => validFrom <= at) ?? unit.sites[0])?.timeZone ?? facts.firm.timeZone;
    const additions = countedAdditions(unitId, groups, fullChargeRises(unit.register, groups));
    return {
      unitId,
      items: additions.map((addition) => ({
        groupId: addition.groupId,
        jobId: addition.jobId,
        occurredAt: new Date(addition.occurredAt).toISOString(),
        regulatoryDay: dayInZone(addition.occurredAt, zoneAt(addition.occurredAt)),
        refrigerant: addition.refrigerant,
        putInG: gramsOfMicrograms(addition.putInMicrograms),
        countedG: gramsOfMicrograms(addition.countedMicrograms),
      })),
    };
  });
}

export function getOnHand(parts: Parts, actor: Actor): Promise<OnHand> {
  return inFirm(parts.dataSource, actor, (manager) => readOnHand(manager));
}
