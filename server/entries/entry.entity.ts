import { Column, Entity, ForeignKey, Index, PrimaryColumn, Unique } from 'typeorm';
import type { GroupKind, HowKnown } from '../../shared/ledger/entry-group.schema.ts';
import type { AtmosphereKind, PlaceKind } from '../../shared/ledger/place.ts';
import type { MassUnit } from '../../shared/units/factors.ts';
import { safeInteger, wholeNumber } from '../database/columns.ts';

/** Read only: taken by `post_records` from the chained text. */
@Entity('entry')
@Unique('entry_sequence_key', ['firmId', 'sequence'])
@Index('entry_corrects_idx', ['firmId', 'correctsGroupId'], { where: 'corrects_group_id IS NOT NULL' })
@Index('entry_from_idx', ['firmId', 'fromId', 'occurredAt', 'sequence'], { where: 'from_id IS NOT NULL' })
@Index('entry_from_place_idx', ['firmId', 'fromPlace', 'sequence'])
@Index('entry_group_idx', ['firmId', 'groupId'])
@Index('entry_kind_idx', ['firmId', 'kind', 'sequence'])
@Index('entry_month_idx', ['firmId', 'bookingMonth', 'sequence'])
@Index('entry_occurred_at_idx', ['firmId', 'occurredAt', 'sequence'])
@Index('entry_recorded_by_idx', ['firmId', 'recordedBy', 'sequence'])
@Index('entry_refrigerant_idx', ['firmId', 'refrigerant', 'sequence'])
@Index('entry_reverses_key', ['firmId', 'reversesEntryId'], { unique: true, where: 'reverses_entry_id IS NOT NULL' })
@Index('entry_to_idx', ['firmId', 'toId', 'occurredAt', 'sequence'], { where: 'to_id IS NOT NULL' })
@Index('entry_to_place_idx', ['firmId', 'toPlace', 'sequence'])
@Index('entry_unit_idx', ['firmId', 'unitId', 'occurredAt', 'sequence'], { where: 'unit_id IS NOT NULL' })
@ForeignKey('entry_group', ['firmId', 'groupId'], ['firmId', 'id'], { name: 'entry_group_fkey' })
export class EntryEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'entry_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'entry_pkey' })
  id!: string;

  @Column({ type: 'bigint', transformer: safeInteger })
  sequence!: number;

  @Column({ type: 'uuid' })
  groupId!: string;

  @Column({ type: 'text' })
  kind!: GroupKind;

  @Column({ type: 'text' })
  refrigerant!: string;

  @Column({ type: 'bigint', transformer: wholeNumber })
  massMicrograms!: bigint;

  @Column({ type: 'text', nullable: true })
  typedValue!: string | null;

  @Column({ type: 'text', nullable: true })
  typedUnit!: MassUnit | null;

  @Column({ type: 'text' })
  fromPlace!: PlaceKind;

  @Column({ type: 'uuid', nullable: true })
  fromId!: string | null;

  @Column({ type: 'text', nullable: true })
  fromAs!: AtmosphereKind | null;

  @Column({ type: 'text' })
  toPlace!: PlaceKind;

  @Column({ type: 'uuid', nullable: true })
  toId!: string | null;

  @Column({ type: 'text', nullable: true })
  toAs!: AtmosphereKind | null;

  @Column({ type: 'text', nullable: true })
  howKnown!: HowKnown | null;

  @Column({ type: 'timestamptz' })
  occurredAt!: Date;

  @Column({ type: 'timestamptz' })
  recordedAt!: Date;

  @Column({ type: 'uuid' })
  recordedBy!: string;

  @Column({ type: 'text' })
  bookingMonth!: string;

  @Column({ type: 'boolean' })
  late!: boolean;

  @Column({ type: 'boolean' })
  addedByServer!: boolean;

  @Column({ type: 'boolean' })
  atLeast!: boolean;

  @Column({ type: 'boolean' })
  takenBack!: boolean;

  @Column({ type: 'uuid', nullable: true })
  correctsGroupId!: string | null;

  @Column({ type: 'uuid', nullable: true })
  reversesEntryId!: string | null;

  @Column({ type: 'uuid', nullable: true })
  unitId!: string | null;

  @Column({ type: 'uuid', nullable: true })
  siteId!: string | null;
}
