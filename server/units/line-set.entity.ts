import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';
import type { LineSet } from '../../shared/unit-register/unit.schema.ts';

/** The line set as installed. Only added to. */
@Entity('line_set')
@Index('line_set_unit_idx', ['firmId', 'unitId', 'validFrom'])
@ForeignKey('unit', ['firmId', 'unitId'], ['firmId', 'id'], { name: 'line_set_unit_fkey' })
export class LineSetEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'line_set_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'line_set_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  unitId!: string;

  @Column({ type: 'timestamptz' })
  validFrom!: Date;

  @Column({ type: 'jsonb' })
  branches!: LineSet['branches'];

  @Column({ type: 'text', nullable: true })
  note!: string | null;
}
