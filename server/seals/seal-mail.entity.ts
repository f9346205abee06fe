import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';
import { safeInteger } from '../database/columns.ts';

/** Which owner is still to be mailed which sealed head. */
@Entity('seal_mail')
@Index('seal_mail_due_idx', ['firmId', 'dueSince'], { where: 'sent_at IS NULL' })
@ForeignKey('journal_record', ['firmId', 'sequence'], ['firmId', 'sequence'], { name: 'seal_mail_record_fkey' })
@ForeignKey('membership', ['firmId', 'personId'], ['firmId', 'personId'], { name: 'seal_mail_membership_fkey' })
export class SealMailEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'seal_mail_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'bigint', transformer: safeInteger, primaryKeyConstraintName: 'seal_mail_pkey' })
  sequence!: number;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'seal_mail_pkey' })
  personId!: string;

  @Column({ type: 'timestamptz' })
  dueSince!: Date;

  @Column({ type: 'timestamptz', nullable: true })
  claimedUntil!: Date | null;

  @Column({ type: 'timestamptz', nullable: true })
  sentAt!: Date | null;
}
