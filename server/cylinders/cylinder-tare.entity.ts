import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';
import type { MassUnit } from '../../shared/units/factors.ts';
import { wholeNumber } from '../database/columns.ts';

/** Only added to. */
@Entity('cylinder_tare')
@Index('cylinder_tare_cylinder_idx', ['firmId', 'cylinderId', 'validFrom'])
@ForeignKey('cylinder', ['firmId', 'cylinderId'], ['firmId', 'id'], { name: 'cylinder_tare_cylinder_fkey' })
export class CylinderTareEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'cylinder_tare_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'cylinder_tare_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  cylinderId!: string;

  @Column({ type: 'bigint', transformer: wholeNumber })
  massMicrograms!: bigint;

  @Column({ type: 'text' })
  typedValue!: string;

  @Column({ type: 'text' })
  typedUnit!: MassUnit;

  @Column({ type: 'timestamptz' })
  validFrom!: Date;

  @Column({ type: 'text', nullable: true })
  reason!: string | null;
}
