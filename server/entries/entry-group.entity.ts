import { Column, Entity, ForeignKey, Index, PrimaryColumn, Unique } from 'typeorm';
import type { GroupKind } from '../../shared/ledger/entry-group.schema.ts';
import { safeInteger } from '../database/columns.ts';

/** Read only: taken by `post_records` from the chained text. */
@Entity('entry_group')
@Unique('entry_group_sequence_key', ['firmId', 'sequence'])
@Index('entry_group_answers_idx', ['firmId', 'answersGroupId'], { where: 'answers_group_id IS NOT NULL' })
@Index('entry_group_closes_idx', ['firmId', 'closesGroupId'], { where: 'closes_group_id IS NOT NULL' })
@Index('entry_group_job_idx', ['firmId', 'jobId'], { where: 'job_id IS NOT NULL' })
@Index('entry_group_open_idx', ['firmId', 'occurredAt'], { where: 'open_weigh_in' })
@Index('entry_group_replaces_key', ['firmId', 'replacesGroupId'], {
  unique: true,
  where: 'replaces_group_id IS NOT NULL',
})
@Index('entry_group_reverses_key', ['firmId', 'reversesGroupId'], {
  unique: true,
  where: 'reverses_group_id IS NOT NULL',
})
@Index('entry_group_unit_idx', ['firmId', 'unitId', 'occurredAt', 'sequence'], { where: 'unit_id IS NOT NULL' })
@ForeignKey('entry_group', ['firmId', 'answersGroupId'], ['firmId', 'id'], { name: 'entry_group_answers_fkey' })
@ForeignKey('charge_sheet', ['firmId', 'chargeSheetId'], ['firmId', 'id'], { name: 'entry_group_charge_sheet_fkey' })
@ForeignKey('entry_group', ['firmId', 'closesGroupId'], ['firmId', 'id'], { name: 'entry_group_closes_fkey' })
@ForeignKey('job', ['firmId', 'jobId'], ['firmId', 'id'], { name: 'entry_group_job_fkey' })
@ForeignKey('membership', ['firmId', 'recordedBy'], ['firmId', 'personId'], { name: 'entry_group_recorded_by_fkey' })
@ForeignKey('entry_group', ['firmId', 'replacesGroupId'], ['firmId', 'id'], { name: 'entry_group_replaces_fkey' })
@ForeignKey('entry_group', ['firmId', 'reversesGroupId'], ['firmId', 'id'], { name: 'entry_group_reverses_fkey' })
@ForeignKey('site', ['firmId', 'siteId'], ['firmId', 'id'], { name: 'entry_group_site_fkey' })
@ForeignKey('membership', ['firmId', 'supervisedBy'], ['firmId', 'personId'], {
  name: 'entry_group_supervised_by_fkey',
})
@ForeignKey('unit', ['firmId', 'unitId'], ['firmId', 'id'], { name: 'entry_group_unit_fkey' })
export class EntryGroupEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'entry_group_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'entry_group_pkey' })
  id!: string;

  @Column({ type: 'bigint', transformer: safeInteger })
  sequence!: number;

  @Column({ type: 'text' })
  kind!: GroupKind;

  @Column({ type: 'uuid', nullable: true })
  unitId!: string | null;

  @Column({ type: 'uuid', nullable: true })
  siteId!: string | null;

  @Column({ type: 'uuid', nullable: true })
  jobId!: string | null;

  @Column({ type: 'uuid', nullable: true })
  chargeSheetId!: string | null;

  @Column({ type: 'uuid', nullable: true })
  supervisedBy!: string | null;

  @Column({ type: 'timestamptz' })
  occurredAt!: Date;

  @Column({ type: 'timestamptz' })
  recordedAt!: Date;

  @Column({ type: 'uuid' })
  recordedBy!: string;

  @Column({ type: 'date' })
  regulatoryDay!: string;

  @Column({ type: 'text' })
  zoneDataVersion!: string;

  @Column({ type: 'timestamptz', nullable: true })
  deviceSentAt!: Date | null;

  @Column({ type: 'integer', nullable: true })
  deviceSkewSeconds!: number | null;

  @Column({ type: 'boolean' })
  openWeighIn!: boolean;

  @Column({ type: 'uuid', nullable: true })
  closesGroupId!: string | null;

  @Column({ type: 'uuid', nullable: true })
  reversesGroupId!: string | null;

  @Column({ type: 'uuid', nullable: true })
  replacesGroupId!: string | null;

  @Column({ type: 'uuid', nullable: true })
  answersGroupId!: string | null;

  @Column({ type: 'bytea' })
  requestHash!: Buffer;

  @Column({ type: 'text', nullable: true })
  reason!: string | null;
}
