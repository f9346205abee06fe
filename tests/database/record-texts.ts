import canonicalize from 'canonicalize';
import { v7 as uuid } from 'uuid';
import type { EntryRecord, GroupRecord, RegisterRecord } from '../../shared/journal/record.schema.ts';
import { entryRecord, groupRecord, registerRecord } from '../../shared/journal/record.schema.ts';

export const NOW = '2026-11-30T21:12:00.000Z';

/** RFC 8785 text of a record, as the server writes it. */
export const textOf = (record: unknown): string => canonicalize(record) as string;

type Place = EntryRecord['from'];
export const place = (kind: Place['place'], id: string | null = null, as: Place['as'] = null): Place => ({
  place: kind,
  id,
  as,
});

export type EntryFields = Partial<EntryRecord> & Pick<EntryRecord, 'from' | 'to'>;
export type GroupFields = Partial<Omit<GroupRecord, 'entryIds'>> & { entries?: EntryFields[]; entryIds?: string[] };

/**
 * A group with its entries as records, in the order of posting. What a test does not say is an ordinary purchase-like
 * group on 30 November 2026; months and the wholeness list follow from the fields unless they are given.
 */
export function groupWithEntries(recordedBy: string, fields: GroupFields = {}): [GroupRecord, ...EntryRecord[]] {
  const { entries = [], entryIds, ...rest } = fields;
  const id = rest.id ?? uuid();
  const recordedAt = rest.recordedAt ?? NOW;
  const occurredAt = rest.occurredAt ?? NOW;
  const entryRecords = entries.map((entry) =>
    entryRecord.parse({
      type: 'entry',
      id: uuid(),
      recordedAt,
      recordedBy,
      groupId: id,
      refrigerant: 'R-32',
      massMicrograms: '90000000',
      typed: { value: '90', unit: 'g' },
      howKnown: 'weighed',
      occurredAt,
      bookingMonth: (entry.occurredAt ?? occurredAt).slice(0, 7),
      late: false,
      addedByServer: false,
      atLeast: false,
      takenBack: false,
      correctsGroupId: null,
      reversesEntryId: null,
      unitId: entry.to.place === 'unit' ? entry.to.id : entry.from.place === 'unit' ? entry.from.id : null,
      siteId: rest.siteId ?? null,
      ...entry,
    }),
  );
  const group = groupRecord.parse({
    type: 'group',
    id,
    recordedAt,
    recordedBy,
    kind: 'purchase',
    unitId: null,
    siteId: null,
    jobId: null,
    chargeSheetId: null,
    supervisedBy: null,
    occurredAt,
    regulatoryDay: occurredAt.slice(0, 10),
    zoneDataVersion: '2026a',
    deviceSentAt: null,
    openWeighIn: false,
    closesGroupId: null,
    reversesGroupId: null,
    replacesGroupId: null,
    answersGroupId: null,
    requestHash: 'ab'.repeat(32),
    readings: [],
    statements: [],
    documents: [],
    reason: null,
    noteHash: null,
    entryIds: entryIds ?? entryRecords.map((entry) => entry.id),
    ...rest,
  });
  return [group, ...entryRecords];
}

export function registerRecordOf(
  recordedBy: string,
  fields: Pick<RegisterRecord, 'noun' | 'subjectId'> & Partial<RegisterRecord>,
): RegisterRecord {
  return registerRecord.parse({
    type: 'register',
    id: uuid(),
    recordedAt: NOW,
    recordedBy,
    version: 1,
    before: null,
    after: {},
    ...fields,
  });
}
