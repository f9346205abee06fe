import type { DerivedRows, EntryRecord, GroupRecord, JournalRecord } from '../../shared/journal/record.schema.ts';
import type { AddedChange } from '../../shared/ledger/added-entry.ts';
import type { AnswerRequest, EntryGroupRequest, GroupKind } from '../../shared/ledger/entry-group.schema.ts';
import type { JudgedGroup, JudgedMass } from '../../shared/ledger/judged-group.ts';
import type { Place } from '../../shared/ledger/place.ts';
import { dayInZone, monthInZone } from '../../shared/units/calendar.ts';
import { saltText } from '../journal/canonical-text.ts';
import { derivedRows } from './derived-rows.ts';
import type { JudgedPosting, Posting } from './judge-posting.ts';
import type { PostingFacts, RegulatoryPlace, StoredGroup } from './posting-facts.ts';
import { documentRecord, placeRecord, readingRecord, recoveryLevelRecord, statementRecord } from './record-parts.ts';

export interface Author {
  personId: string;
  now: Date;
  newId(): string;
  /** Version of the zone data that says which calendar day an instant is. */
  zoneDataVersion: string;
}

/** What the request of the group that carries the posting says beside masses; null for a correction by a register change. */
export interface Envelope {
  kind: GroupKind;
  occurredAt: number;
  unitId: string | null;
  deviceSentAt: string | null;
  requestHash: string;
  reason: string | null;
  reversesGroupId?: string;
  replacesGroupId?: string;
  answersGroupId?: string;
  statements?: AnswerRequest['statement'][];
}

export interface PostingRecords {
  records: JournalRecord[];
  derived: DerivedRows;
  /** The groups of this posting, in order. */
  groupIds: string[];
}

/**
 * Writes down a judged posting: the records to be chained, groups first, and what is kept beside them.
 * @param request of the added group, with where it replaces a reversed one
 * @param envelope of a group that adds nothing itself: a reversal, an answer, a correction after a register change
 */
export function recordsOfPosting(
  author: Author,
  facts: PostingFacts,
  posting: Posting,
  judged: JudgedPosting,
  request: { body: EntryGroupRequest; requestHash: string; replacesGroupId: string | null } | null,
  envelope: Envelope | null,
  stored: ReadonlyMap<string, StoredGroup>,
): PostingRecords {
  const writer = new RecordWriter(author, facts, posting, stored);
  const groups: GroupRecord[] = [];
  const texts: NonNullable<DerivedRows['texts']> = [];
  if (envelope) {
    const entries = [
      ...writer.reversalEntries(posting),
      ...judged.changes
        .filter(({ correctsGroupId }) => request === null || correctsGroupId !== null)
        .map((change) => writer.addedEntry(posting.recordId, change, envelope.unitId)),
    ];
    groups.push(writer.envelopeGroup(posting.recordId, envelope, entries));
  }
  if (request && judged.added) {
    const { body } = request;
    const own = judged.changes.filter(({ correctsGroupId }) => envelope === null || correctsGroupId === null);
    const entries = [
      ...writer.enteredEntries(body, judged.added.group, judged.added.entryIndexes),
      ...own.map((change) => writer.addedEntry(body.groupId, change, body.unitId ?? null)),
    ];
    const note = body.note ? saltText(body.note) : null;
    if (note && body.note) {
      const text = { recordId: body.groupId, field: 'note', salt: note.saltHex, content: body.note };
      texts.push({ id: author.newId(), ...text });
    }
    groups.push(writer.enteredGroup(request, judged.added.group, entries, note?.hash ?? null));
  }
  return {
    records: [...groups, ...writer.entries],
    derived: { ...derivedRows(author, posting.recordId, judged), texts },
    groupIds: groups.map(({ id }) => id),
  };
}

class RecordWriter {
  readonly entries: EntryRecord[] = [];
  private readonly author: Author;
  private readonly facts: PostingFacts;
  private readonly posting: Posting;
  private readonly stored: ReadonlyMap<string, StoredGroup>;

  constructor(author: Author, facts: PostingFacts, posting: Posting, stored: ReadonlyMap<string, StoredGroup>) {
    this.author = author;
    this.facts = facts;
    this.posting = posting;
    this.stored = stored;
  }

  enteredEntries(body: EntryGroupRequest, group: JudgedGroup, entryIndexes: readonly number[]): EntryRecord[] {
    const seen = new Set<number>();
    return group.masses.map((mass, position) => {
      const index = entryIndexes[position] ?? 0;
      const entered = body.entries?.[index];
      const isWhole = entryIndexes.filter((other) => other === index).length === 1;
      const isFirst = !seen.has(index);
      seen.add(index);
      return this.entry(body.groupId, mass, group.occurredAt, body.unitId ?? null, {
        id: isFirst && entered ? entered.id : this.author.newId(),
        typed: isWhole && entered ? { value: entered.mass.value, unit: entered.mass.unit } : null,
        howKnown: mass.howKnown,
      });
    });
  }

  /** Every entered mass the other way round, at its own time. */
  reversalEntries({ recordId, reversed }: Posting): EntryRecord[] {
    return (reversed?.masses ?? []).map((mass, index) => {
      const original = reversed?.entries[index];
      const mirrored = { ...mass, from: mass.to, to: mass.from };
      return this.entry(recordId, mirrored, reversed?.occurredAt ?? 0, original?.unitId ?? null, {
        howKnown: mass.howKnown,
        correctsGroupId: reversed?.id ?? null,
        reversesEntryId: original?.id ?? null,
      });
    });
  }

  addedEntry(groupId: string, change: AddedChange, unitId: string | null): EntryRecord {
    const judgedIn = change.judgedPlace.place === 'unit' ? change.judgedPlace.id : null;
    const corrected = this.stored.get(change.groupId);
    const { added } = this.posting;
    const occurredAt = corrected?.occurredAt ?? (added?.id === change.groupId ? added.occurredAt : null);
    if (occurredAt === null) throw new Error(`group ${change.groupId} was not read`);
    return this.entry(
      groupId,
      change,
      occurredAt,
      ofNoUnit(change) ? null : (judgedIn ?? corrected?.unitId ?? unitId),
      {
        addedByServer: true,
        atLeast: change.atLeast,
        takenBack: change.takenBack,
        correctsGroupId: change.correctsGroupId,
      },
    );
  }

  enteredGroup(
    request: { body: EntryGroupRequest; requestHash: string; replacesGroupId: string | null },
    group: JudgedGroup,
    entries: readonly EntryRecord[],
    noteHash: string | null,
  ): GroupRecord {
    const { body } = request;
    const unitId = body.unitId ?? onlyUnit(entries);
    return {
      ...this.authorship(),
      type: 'group',
      id: body.groupId,
      kind: body.kind,
      unitId: body.unitId ?? null,
      ...this.regulatory(unitId, group.occurredAt),
      jobId: body.jobId ?? null,
      chargeSheetId: body.chargeSheetId ?? null,
      supervisedBy: body.supervisedBy ?? null,
      occurredAt: new Date(group.occurredAt).toISOString(),
      deviceSentAt: body.deviceSentAt ? new Date(body.deviceSentAt).toISOString() : null,
      openWeighIn: body.openWeighIn ?? false,
      closesGroupId: body.closesGroupId ?? null,
      reversesGroupId: null,
      replacesGroupId: request.replacesGroupId,
      answersGroupId: null,
      requestHash: request.requestHash,
      readings: (body.readings ?? []).map((reading) => readingRecord(reading, this.facts.scales)),
      statements: (body.statements ?? []).map(statementRecord),
      documents: (body.documents ?? []).map(documentRecord),
      ...recoveryLevelRecord(body.recoveryLevel),
      reason: body.reason ?? null,
      noteHash,
      entryIds: entries.map(({ id }) => id),
    };
  }

  envelopeGroup(id: string, envelope: Envelope, entries: readonly EntryRecord[]): GroupRecord {
    return {
      ...this.authorship(),
      type: 'group',
      id,
      kind: envelope.kind,
      unitId: envelope.unitId,
      ...this.regulatory(envelope.unitId ?? onlyUnit(entries), envelope.occurredAt),
      jobId: null,
      chargeSheetId: null,
      supervisedBy: null,
      occurredAt: new Date(envelope.occurredAt).toISOString(),
      deviceSentAt: envelope.deviceSentAt ? new Date(envelope.deviceSentAt).toISOString() : null,
      openWeighIn: false,
      closesGroupId: null,
      reversesGroupId: envelope.reversesGroupId ?? null,
      replacesGroupId: envelope.replacesGroupId ?? null,
      answersGroupId: envelope.answersGroupId ?? null,
      requestHash: envelope.requestHash,
      readings: [],
      statements: (envelope.statements ?? []).map(statementRecord),
      documents: [],
      reason: envelope.reason,
      noteHash: null,
      entryIds: entries.map((entry) => entry.id),
    };
  }

  private authorship() {
    return { recordedAt: this.author.now.toISOString(), recordedBy: this.author.personId };
  }

  private entry(
    groupId: string,
    { refrigerant, massMicrograms, from, to }: Pick<JudgedMass, 'refrigerant' | 'massMicrograms' | 'from' | 'to'>,
    occurredAt: number,
    unitIdElse: string | null,
    marks: Partial<EntryRecord>,
  ): EntryRecord {
    const unitId = unitAtEnds(from, to) ?? unitIdElse;
    const { firstOpenMonth, timeZone } = this.facts.firm;
    const month = monthInZone(occurredAt, timeZone);
    const late = firstOpenMonth !== null && month < firstOpenMonth;
    const record: EntryRecord = {
      ...this.authorship(),
      type: 'entry',
      id: this.author.newId(),
      groupId,
      refrigerant,
      massMicrograms: String(massMicrograms),
      typed: null,
      from: placeRecord(from),
      to: placeRecord(to),
      howKnown: null,
      occurredAt: new Date(occurredAt).toISOString(),
      bookingMonth: late ? firstOpenMonth : month,
      late,
      addedByServer: false,
      atLeast: false,
      takenBack: false,
      correctsGroupId: null,
      reversesEntryId: null,
      unitId,
      siteId: this.regulatory(unitId, occurredAt).siteId,
      ...marks,
    };
    this.entries.push(record);
    return record;
  }

  /** The site where the unit stood then, and the calendar day there; without a unit the firm's. */
  private regulatory(unitId: string | null, occurredAt: number): RegulatoryPlace {
    const sites = unitId === null ? [] : (this.facts.units.get(unitId)?.sites ?? []);
    const site = sites.findLast(({ validFrom }) => validFrom <= occurredAt) ?? sites[0];
    return {
      siteId: site?.siteId ?? null,
      regulatoryDay: dayInZone(occurredAt, site?.timeZone ?? this.facts.firm.timeZone),
      zoneDataVersion: this.author.zoneDataVersion,
    };
  }
}

/** What month close made of a cylinder's difference concerns no unit, whatever group the difference was found in. */
const ofNoUnit = ({ judgedPlace, from, to }: AddedChange): boolean =>
  judgedPlace.place !== 'unit' && from.place !== judgedPlace.place && to.place !== judgedPlace.place;

function unitAtEnds(from: Place, to: Place): string | null {
  if (to.place === 'unit') return to.id;
  return from.place === 'unit' ? from.id : null;
}

/** The one unit that the entries speak of, if it is one. */
function onlyUnit(entries: readonly EntryRecord[]): string | null {
  const ids = new Set(entries.flatMap(({ unitId }) => (unitId === null ? [] : [unitId])));
  const [only, ...others] = ids;
  return only !== undefined && others.length === 0 ? only : null;
}
