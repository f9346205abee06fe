import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';
import type { READING_MODES, READING_MOMENTS } from '../../shared/ledger/entry-group.schema.ts';
import type { MassUnit } from '../../shared/units/factors.ts';
import { safeInteger, wholeNumber } from '../database/columns.ts';

/** Read only: taken by `post_records` from the text of its group. */
@Entity('reading')
@Index('reading_cylinder_idx', ['firmId', 'cylinderId', 'readAt', 'sequence'])
@Index('reading_group_idx', ['firmId', 'groupId'])
@ForeignKey('cylinder', ['firmId', 'cylinderId'], ['firmId', 'id'], { name: 'reading_cylinder_fkey' })
@ForeignKey('entry_group', ['firmId', 'groupId'], ['firmId', 'id'], { name: 'reading_group_fkey' })
@ForeignKey('tool', ['firmId', 'toolId'], ['firmId', 'id'], { name: 'reading_tool_fkey' })
export class ReadingEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'reading_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'reading_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  groupId!: string;

  @Column({ type: 'bigint', transformer: safeInteger })
  sequence!: number;

  @Column({ type: 'uuid' })
  cylinderId!: string;

  @Column({ type: 'uuid', nullable: true })
  toolId!: string | null;

  @Column({ type: 'timestamptz' })
  readAt!: Date;

  @Column({ type: 'text' })
  moment!: (typeof READING_MOMENTS)[number];

  @Column({ type: 'text' })
  mode!: (typeof READING_MODES)[number];

  @Column({ type: 'text' })
  typedValue!: string;

  @Column({ type: 'text' })
  typedUnit!: MassUnit;

  @Column({ type: 'bigint', transformer: wholeNumber })
  massMicrograms!: bigint;

  @Column({ type: 'boolean', nullable: true })
  hoseFull!: boolean | null;

  @Column({ type: 'text', nullable: true })
  hoseValue!: string | null;

  @Column({ type: 'text', nullable: true })
  hoseUnit!: MassUnit | null;

  @Column({ type: 'bigint', transformer: wholeNumber, nullable: true })
  hoseMicrograms!: bigint | null;

  @Column({ type: 'double precision', nullable: true })
  resolutionG!: number | null;

  @Column({ type: 'double precision', nullable: true })
  repeatabilityG!: number | null;

  @Column({ type: 'double precision', nullable: true })
  spanErrorRelative!: number | null;

  @Column({ type: 'double precision', nullable: true })
  offsetG!: number | null;
}
