import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';
import type { ChargeBasis } from '../../shared/charge/charge.schema.ts';

/** What the installation manual says. Only added to. */
@Entity('charge_basis')
@Index('charge_basis_unit_idx', ['firmId', 'unitId', 'validFrom'])
@ForeignKey('unit', ['firmId', 'unitId'], ['firmId', 'id'], { name: 'charge_basis_unit_fkey' })
export class ChargeBasisEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'charge_basis_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'charge_basis_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  unitId!: string;

  @Column({ type: 'timestamptz' })
  validFrom!: Date;

  @Column({ type: 'jsonb' })
  basis!: ChargeBasis;

  @Column({ type: 'text' })
  document!: string;

  @Column({ type: 'text', nullable: true })
  page!: string | null;

  @Column({ type: 'text', nullable: true })
  note!: string | null;
}
