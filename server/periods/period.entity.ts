import { Column, Entity, ForeignKey, PrimaryColumn, Unique } from 'typeorm';
import { safeInteger } from '../database/columns.ts';

/** A closed booking month. Read only: `close_month` writes it. */
@Entity('period')
@Unique('period_month_key', ['firmId', 'month'])
@ForeignKey('membership', ['firmId', 'closedBy'], ['firmId', 'personId'], { name: 'period_closed_by_fkey' })
export class PeriodEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'period_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'period_pkey' })
  id!: string;

  @Column({ type: 'text' })
  month!: string;

  @Column({ type: 'timestamptz' })
  closedAt!: Date;

  @Column({ type: 'uuid' })
  closedBy!: string;

  /** Of the record that was signed off: everything before it is in the month's sums or in a later month. */
  @Column({ type: 'bigint', transformer: safeInteger })
  recordSequence!: number;
}
