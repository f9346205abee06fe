import { Column, Entity, ForeignKey, Index, PrimaryColumn, VersionColumn } from 'typeorm';
import type { TOOL_KINDS } from '../../shared/tools/tools.schema.ts';

@Entity('tool')
@Index('tool_name_idx', ['firmId', 'name', 'id'])
@ForeignKey('firm', ['firmId'], ['id'], { name: 'tool_firm_fkey' })
@ForeignKey('membership', ['firmId', 'heldBy'], ['firmId', 'personId'], { name: 'tool_held_by_fkey' })
export class ToolEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'tool_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'tool_pkey' })
  id!: string;

  @Column({ type: 'text' })
  kind!: (typeof TOOL_KINDS)[number];

  @Column({ type: 'text' })
  name!: string;

  @Column({ type: 'text', nullable: true })
  serial!: string | null;

  @Column({ type: 'double precision', nullable: true })
  resolutionG!: number | null;

  @Column({ type: 'double precision', nullable: true })
  repeatabilityG!: number | null;

  @Column({ type: 'double precision', nullable: true })
  spanErrorRelative!: number | null;

  @Column({ type: 'double precision', nullable: true })
  offsetG!: number | null;

  @Column({ type: 'date', nullable: true })
  madeOn!: string | null;

  @Column({ type: 'date', nullable: true })
  lastCheckedOn!: string | null;

  @Column({ type: 'uuid', nullable: true })
  heldBy!: string | null;

  @VersionColumn({ type: 'integer', default: 1 })
  version!: number;
}
