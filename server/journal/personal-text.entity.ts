import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';

/** Words beside the chain, whose salted hash stands in the record. Read only: `post_records` writes it. */
@Entity('personal_text')
@Index('personal_text_record_idx', ['firmId', 'recordId'])
@ForeignKey('journal_record', ['firmId', 'recordId'], ['firmId', 'recordId'], { name: 'personal_text_record_fkey' })
export class PersonalTextEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'personal_text_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'personal_text_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  recordId!: string;

  @Column({ type: 'text' })
  field!: string;

  @Column({ type: 'bytea' })
  salt!: Buffer;

  @Column({ type: 'text', nullable: true })
  content!: string | null;

  @Column({ type: 'bytea' })
  hash!: Buffer;
}
