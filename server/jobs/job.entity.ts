import { Column, Entity, ForeignKey, Index, PrimaryColumn, VersionColumn } from 'typeorm';
import type { JOB_KINDS } from '../../shared/jobs/jobs.schema.ts';

@Entity('job')
@Index('job_opened_at_idx', ['firmId', 'openedAt', 'id'])
@Index('job_unit_idx', ['firmId', 'unitId'])
@ForeignKey('unit', ['firmId', 'unitId'], ['firmId', 'id'], { name: 'job_unit_fkey' })
export class JobEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'job_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'job_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  unitId!: string;

  @Column({ type: 'text' })
  kind!: (typeof JOB_KINDS)[number];

  @Column({ type: 'text', nullable: true })
  title!: string | null;

  @Column({ type: 'timestamptz' })
  openedAt!: Date;

  @Column({ type: 'timestamptz', nullable: true })
  closedAt!: Date | null;

  @VersionColumn({ type: 'integer', default: 1 })
  version!: number;
}
