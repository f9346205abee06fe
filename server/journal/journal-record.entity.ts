import { Column, Entity, ForeignKey, Index, PrimaryColumn, Unique } from 'typeorm';
import type { JournalRecord, RegisterNoun } from '../../shared/journal/record.schema.ts';
import { safeInteger } from '../database/columns.ts';

/** Read only: `post_records` writes it. `shared/journal/record.schema.ts` says what `content` holds. */
@Entity('journal_record')
@Unique('journal_record_record_id_key', ['firmId', 'recordId'])
@Index('journal_record_subject_key', ['firmId', 'noun', 'subjectId', 'version'], {
  unique: true,
  where: 'noun IS NOT NULL',
})
@Index('journal_record_seal_idx', { synchronize: false })
@ForeignKey('firm', ['firmId'], ['id'], { name: 'journal_record_firm_fkey' })
export class JournalRecordEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'journal_record_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'bigint', transformer: safeInteger, primaryKeyConstraintName: 'journal_record_pkey' })
  sequence!: number;

  @Column({ type: 'text' })
  type!: JournalRecord['type'];

  @Column({ type: 'uuid' })
  recordId!: string;

  @Column({ type: 'text' })
  content!: string;

  @Column({ type: 'bytea' })
  contentHash!: Buffer;

  @Column({ type: 'bytea' })
  hash!: Buffer;

  @Column({ type: 'text', nullable: true })
  noun!: RegisterNoun | null;

  @Column({ type: 'uuid', nullable: true })
  subjectId!: string | null;

  @Column({ type: 'integer', nullable: true })
  version!: number | null;

  @Column({ type: 'timestamptz' })
  recordedAt!: Date;

  @Column({ type: 'uuid' })
  recordedBy!: string;
}
