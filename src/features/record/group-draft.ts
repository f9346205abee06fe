import type {
  EmptyBy,
  EntryGroupRequest,
  GroupKind,
  HowKnown,
  UnitCondition,
} from '../../../shared/ledger/entry-group.schema.ts';
import type { PlaceFields } from '../../../shared/ledger/place.ts';
import type { TypedMass } from '../../../shared/units/mass.ts';
import type { Answers, FormContext, WeighedRow } from './answers.ts';
import { typedOf } from './answers.ts';
import { isBelowZero, isZero } from './typed-mass.ts';

export type Readings = NonNullable<EntryGroupRequest['readings']>;
export type Entries = NonNullable<EntryGroupRequest['entries']>;
type Documents = NonNullable<EntryGroupRequest['documents']>;
export type RecoveryLevelRequest = NonNullable<EntryGroupRequest['recoveryLevel']>;

/** A request, and which blank of the form stands behind each of its places, so that a refusal is shown at its blank. */
export interface BuiltGroup {
  body: EntryGroupRequest;
  places: (readonly [pointer: string, field: string])[];
  /** The group is withdrawn, and `body` posted in its place. */
  reverses?: { groupId: string; reversalId: string; reason: string };
}

export interface NewMass {
  id: string;
  refrigerant: string | null;
  mass: TypedMass | null;
  from: PlaceFields;
  to: PlaceFields;
  howKnown: HowKnown;
}

/** Collects the parts of a group in the order in which the form asks for them. */
export class GroupDraft {
  readonly #answers: Answers;
  readonly #context: FormContext;
  readonly #kind: GroupKind;
  readonly #readings: Readings = [];
  readonly #entries: Entries = [];
  readonly #documents: Documents = [];
  #statements: NonNullable<EntryGroupRequest['statements']> = [];
  readonly #places: [string, string][] = [];
  #level: RecoveryLevelRequest | null = null;
  #note: string[] = [];

  constructor(kind: GroupKind, answers: Answers, context: FormContext) {
    this.#kind = kind;
    this.#answers = answers;
    this.#context = context;
  }

  reading(row: WeighedRow, moment: 'before' | 'after' | 'only', field: string): this {
    const draft = moment === 'after' ? row.after : row.before;
    const isZero = row.mode === 'zeroed';
    const typed = isZero && moment === 'before' ? null : typedOf(draft, this.#context);
    const unit = typed?.unit ?? typedOf(row.after, this.#context)?.unit ?? 'g';
    const value = isZero
      ? moment === 'before'
        ? '0'
        : shownSinceZero(typed, this.#goesOut(row))
      : (typed?.value ?? '');
    const hose = moment === 'before' && row.hasHose && row.hoseFullAtStart ? typedOf(row.hose, this.#context) : null;
    this.#places.push([`/readings/${this.#readings.length}/cylinderId`, `${field}.cylinderId`]);
    this.#places.push([`/readings/${this.#readings.length}`, `${field}.${moment === 'after' ? 'after' : 'before'}`]);
    this.#readings.push({
      id: moment === 'after' ? row.ids.after : row.ids.before,
      cylinderId: row.cylinderId,
      toolId: row.toolId || null,
      moment,
      mode: isZero ? 'zeroed' : 'gross',
      value,
      unit,
      ...(hose ? { hoseFull: true, hose } : {}),
    });
    return this;
  }

  #goesOut(row: WeighedRow): boolean {
    return !this.#into.has(row);
  }
  readonly #into = new Set<WeighedRow>();
  /** Since it was zeroed a scale counts up for what comes into the cylinder on it, and down for what leaves. */
  fills(row: WeighedRow): this {
    this.#into.add(row);
    return this;
  }

  /** Nothing is entered while the mass is not there, or is no mass. */
  mass({ mass, ...entry }: NewMass, field: string): this {
    this.#places.push([`/entries/${this.#entries.length}`, field]);
    if (!mass || isZero(mass) || isBelowZero(mass)) return this;
    this.#entries.push({ ...entry, mass });
    return this;
  }

  states(is: UnitCondition | null, by: EmptyBy | null = null): this {
    const { unitId } = this.#answers;
    if (is) this.#statements = [{ about: 'unit', id: unitId, is, ...(by ? { by } : {}) }];
    return this;
  }

  level(told: RecoveryLevelRequest | null): this {
    this.#level = told;
    this.#places.push(['/recoveryLevel', 'levelReached']);
    return this;
  }

  document(kind: Documents[number]['kind'], of: { refrigerant?: string; mass?: TypedMass } = {}): this {
    const { documentNumber, documentDate } = this.#answers;
    this.#places.push([`/documents/${this.#documents.length}/date`, 'documentDate']);
    this.#places.push([`/documents/${this.#documents.length}`, 'documentNumber']);
    this.#documents.push({ kind, number: documentNumber.trim(), date: documentDate, ...of });
    return this;
  }

  note(sentence: string): this {
    if (sentence) this.#note.push(sentence);
    return this;
  }

  built(over: { occurredAt?: string; unitId?: string | null } = {}): BuiltGroup {
    const { ids, unitId, jobId, at, reason, note } = this.#answers;
    const said = [...this.#note, note.trim()].filter(Boolean).join('\n');
    return {
      body: {
        groupId: ids.group,
        schema: 1,
        kind: this.#kind,
        unitId: (over.unitId === undefined ? unitId : over.unitId) || null,
        jobId: jobId || null,
        occurredAt: over.occurredAt ?? this.#context.instant(at),
        readings: this.#readings,
        entries: this.#entries,
        statements: this.#statements,
        documents: this.#documents,
        recoveryLevel: this.#level,
        reason: reason.trim() || null,
        note: said || null,
      },
      places: [...this.#places, ['/occurredAt', 'at'], ['/reason', 'reason'], ['/unitId', 'unitId']],
    };
  }
}

function shownSinceZero(typed: TypedMass | null, goesOut: boolean): string {
  if (!typed) return '';
  return goesOut && !isBelowZero(typed) && !isZero(typed) ? `-${typed.value}` : typed.value;
}
