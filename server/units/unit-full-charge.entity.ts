import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';
import type { FULL_CHARGE_METHODS } from '../../shared/unit-register/unit.schema.ts';
import type { MassUnit } from '../../shared/units/factors.ts';
import { wholeNumber } from '../database/columns.ts';

/** Only added to. */
@Entity('unit_full_charge')
@Index('unit_full_charge_unit_idx', ['firmId', 'unitId', 'validFrom'])
@ForeignKey('job', ['firmId', 'jobId'], ['firmId', 'id'], { name: 'unit_full_charge_job_fkey' })
@ForeignKey('unit', ['firmId', 'unitId'], ['firmId', 'id'], { name: 'unit_full_charge_unit_fkey' })
export class UnitFullChargeEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'unit_full_charge_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'unit_full_charge_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  unitId!: string;

  @Column({ type: 'text' })
  refrigerant!: string;

  @Column({ type: 'bigint', transformer: wholeNumber })
  massMicrograms!: bigint;

  @Column({ type: 'text' })
  typedValue!: string;

  @Column({ type: 'text' })
  typedUnit!: MassUnit;

  @Column({ type: 'text' })
  method!: (typeof FULL_CHARGE_METHODS)[number];

  @Column({ type: 'timestamptz' })
  validFrom!: Date;

  @Column({ type: 'uuid', nullable: true })
  jobId!: string | null;

  @Column({ type: 'text', nullable: true })
  reason!: string | null;
}
