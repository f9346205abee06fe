import { Column, Entity, PrimaryColumn } from 'typeorm';
import { safeInteger, wholeNumber } from '../database/columns.ts';

/** Sum of the entries of a booking month, from kind of place to kind of place (`atmosphere:hose`). Read only: `post_records` keeps it. */
@Entity('month_sum')
export class MonthSumEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'month_sum_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'text', primaryKeyConstraintName: 'month_sum_pkey' })
  month!: string;

  @PrimaryColumn({ type: 'text', primaryKeyConstraintName: 'month_sum_pkey' })
  refrigerant!: string;

  @PrimaryColumn({ type: 'text', primaryKeyConstraintName: 'month_sum_pkey' })
  fromKind!: string;

  @PrimaryColumn({ type: 'text', primaryKeyConstraintName: 'month_sum_pkey' })
  toKind!: string;

  @Column({ type: 'bigint', transformer: wholeNumber })
  massMicrograms!: bigint;

  @Column({ type: 'bigint', transformer: safeInteger })
  entryCount!: number;

  /** The part of the mass that reversals move: what they take back goes off the other way. */
  @Column({ type: 'bigint', transformer: wholeNumber, default: 0 })
  reversalMicrograms!: bigint;
}
