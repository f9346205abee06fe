import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';
import type { ChargeRequest, ChargeResponse } from '../../shared/charge/charge.schema.ts';

/** Frozen: never updated or deleted. Its record in the chain has the noun `chargeSheet`. */
@Entity('charge_sheet')
@Index('charge_sheet_unit_idx', ['firmId', 'unitId', 'madeAt'])
@ForeignKey('job', ['firmId', 'jobId'], ['firmId', 'id'], { name: 'charge_sheet_job_fkey' })
@ForeignKey('membership', ['firmId', 'madeBy'], ['firmId', 'personId'], { name: 'charge_sheet_made_by_fkey' })
@ForeignKey('unit', ['firmId', 'unitId'], ['firmId', 'id'], { name: 'charge_sheet_unit_fkey' })
export class ChargeSheetEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'charge_sheet_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'charge_sheet_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  unitId!: string;

  @Column({ type: 'uuid', nullable: true })
  jobId!: string | null;

  @Column({ type: 'timestamptz' })
  madeAt!: Date;

  @Column({ type: 'uuid' })
  madeBy!: string;

  @Column({ type: 'jsonb' })
  request!: ChargeRequest;

  @Column({ type: 'jsonb' })
  result!: ChargeResponse;

  @Column({ type: 'text', nullable: true })
  manualDocument!: string | null;

  @Column({ type: 'text', nullable: true })
  manualPage!: string | null;

  @Column({ type: 'jsonb', nullable: true })
  room!: unknown;
}
