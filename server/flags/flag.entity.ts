import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';
import type { FlagCode } from '../../shared/ledger/flag.ts';
import { wholeNumber } from '../database/columns.ts';

/** Read only: `post_records` opens, changes and closes it. */
@Entity('flag')
@Index('flag_group_idx', ['firmId', 'groupId'])
@Index('flag_open_idx', ['firmId', 'openedAt', 'id'], { where: 'closed_at IS NULL' })
@Index('flag_opened_at_idx', ['firmId', 'openedAt', 'id'])
@Index('flag_subject_idx', ['firmId', 'subjectId'])
@ForeignKey('entry_group', ['firmId', 'closedByGroupId'], ['firmId', 'id'], { name: 'flag_closed_by_fkey' })
@ForeignKey('entry_group', ['firmId', 'groupId'], ['firmId', 'id'], { name: 'flag_group_fkey' })
@ForeignKey('entry_group', ['firmId', 'openedByGroupId'], ['firmId', 'id'], { name: 'flag_opened_by_fkey' })
export class FlagEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'flag_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'flag_pkey' })
  id!: string;

  @Column({ type: 'text' })
  code!: FlagCode;

  @Column({ type: 'text' })
  subjectKind!: 'unit' | 'cylinder' | 'reclaimer' | 'group';

  @Column({ type: 'uuid' })
  subjectId!: string;

  @Column({ type: 'uuid' })
  groupId!: string;

  @Column({ type: 'text', nullable: true })
  refrigerant!: string | null;

  @Column({ type: 'bigint', transformer: wholeNumber, nullable: true })
  massMicrograms!: bigint | null;

  @Column({ type: 'jsonb', default: {} })
  figures!: Record<string, string>;

  @Column({ type: 'boolean' })
  standing!: boolean;

  @Column({ type: 'timestamptz' })
  openedAt!: Date;

  @Column({ type: 'uuid' })
  openedByGroupId!: string;

  @Column({ type: 'timestamptz', nullable: true })
  closedAt!: Date | null;

  @Column({ type: 'uuid', nullable: true })
  closedByGroupId!: string | null;
}
