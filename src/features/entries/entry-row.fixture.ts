import type { EntryRow, GroupView } from '../../../shared/entries/entry.schema.ts';

type Place = EntryRow['from'];
/** A UUID that is always the same for the same word. */
export function idOf(kind: 'cylinder' | 'unit', label: string): string {
  const tail = [...label].map((letter) => letter.charCodeAt(0).toString(16)).join('');
  return `0195f0c4-${kind === 'cylinder' ? 'c000' : 'a000'}-7000-8000-${tail.slice(-12).padStart(12, '0')}`;
}

export const cylinder = (label: string): Place => ({ place: 'cylinder', id: idOf('cylinder', label), as: null, label });
export const unit = (label: string): Place => ({ place: 'unit', id: idOf('unit', label), as: null, label });
export const nowhere = (place: Place['place'], as: string | null = null): Place => ({ place, id: null, as, label: '' });

/** An entry of an extra charge; a test says what its promise is about. */
export function entryRow(change: Partial<EntryRow> & { sequence: number }): EntryRow {
  return {
    id: `entry-${change.sequence}`,
    groupId: `group-${change.sequence}`,
    kind: 'extraCharge',
    refrigerant: 'R-32',
    massG: 90,
    typed: { value: '90', unit: 'g' },
    from: cylinder('7741'),
    to: unit('0412'),
    howKnown: 'weighed',
    occurredAt: '2026-11-30T21:12:00.000Z',
    recordedAt: '2026-11-30T21:14:00.000Z',
    timeZone: 'America/New_York',
    bookingMonth: '2026-11',
    late: false,
    addedByServer: false,
    atLeast: false,
    correctsGroupId: null,
    reversedByGroupId: null,
    reversesGroupId: null,
    recordedByName: 'M. Oduya',
    unitId: idOf('unit', '0412'),
    ...change,
  } as EntryRow;
}

/** A weigh-in of 90 g by two readings, as the side sheet gets it. */
export function groupView(change: Partial<GroupView> = {}): GroupView {
  const id = change.id ?? 'group-82';
  const reading = (moment: string, value: string) => ({
    id: `reading-${moment}`,
    cylinderId: idOf('cylinder', '7741'),
    cylinderTag: '7741',
    toolId: 'tool-1',
    toolName: 'Van 1 scale',
    moment,
    mode: 'gross',
    value,
    unit: 'g',
    readAt: '2026-11-30T21:12:00.000Z',
    massG: Number(value),
    hoseFull: false,
    hoseG: null,
    resolutionG: 5,
    repeatabilityG: 0,
    spanErrorRelative: 0,
    offsetG: 0,
  });
  return {
    id,
    sequence: 81,
    kind: 'extraCharge',
    occurredAt: '2026-11-30T21:12:00.000Z',
    recordedAt: '2026-11-30T21:14:00.000Z',
    timeZone: 'America/New_York',
    recordedBy: 'person-oduya',
    recordedByName: 'M. Oduya',
    supervisedByName: null,
    unitId: idOf('unit', '0412'),
    unitLabel: '0412',
    jobId: null,
    chargeSheetId: null,
    openWeighIn: false,
    closesGroupId: null,
    closedByGroupId: null,
    reversesGroupId: null,
    reversedByGroupId: null,
    replacedByGroupId: null,
    readings: [reading('before', '17420'), reading('after', '17330')],
    statements: [],
    documents: [],
    reason: null,
    note: null,
    entries: [entryRow({ sequence: 82, groupId: id })],
    hash: 'a'.repeat(64),
    previousHash: 'b'.repeat(64),
    ...change,
  } as GroupView;
}
