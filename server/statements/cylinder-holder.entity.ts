import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';

/** Who held a cylinder from when on. Read only: fed at commit where the register changes. */
@Entity('cylinder_holder')
@Index('cylinder_holder_held_by_idx', ['firmId', 'heldBy'], { where: 'held_by IS NOT NULL' })
@Index('cylinder_holder_valid_from_idx', ['firmId', 'cylinderId', 'validFrom'])
@ForeignKey('cylinder', ['firmId', 'cylinderId'], ['firmId', 'id'], { name: 'cylinder_holder_cylinder_fkey' })
@ForeignKey('membership', ['firmId', 'heldBy'], ['firmId', 'personId'], { name: 'cylinder_holder_held_by_fkey' })
export class CylinderHolderEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'cylinder_holder_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'cylinder_holder_pkey' })
  cylinderId!: string;

  /** Of the cylinder's register row. */
  @PrimaryColumn({ type: 'integer', primaryKeyConstraintName: 'cylinder_holder_pkey' })
  version!: number;

  @Column({ type: 'uuid', nullable: true })
  heldBy!: string | null;

  @Column({ type: 'timestamptz' })
  validFrom!: Date;
}
