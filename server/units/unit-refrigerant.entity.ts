import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';

/** Only added to. */
@Entity('unit_refrigerant')
@Index('unit_refrigerant_unit_idx', ['firmId', 'unitId', 'validFrom'])
@ForeignKey('job', ['firmId', 'jobId'], ['firmId', 'id'], { name: 'unit_refrigerant_job_fkey' })
@ForeignKey('unit', ['firmId', 'unitId'], ['firmId', 'id'], { name: 'unit_refrigerant_unit_fkey' })
export class UnitRefrigerantEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'unit_refrigerant_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'unit_refrigerant_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  unitId!: string;

  @Column({ type: 'text' })
  refrigerant!: string;

  @Column({ type: 'timestamptz' })
  validFrom!: Date;

  @Column({ type: 'uuid', nullable: true })
  jobId!: string | null;
}
