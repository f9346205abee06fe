import { Column, Entity, ForeignKey, Index, PrimaryColumn, VersionColumn } from 'typeorm';
import type { CONTENT_STATES, CYLINDER_KINDS } from '../../shared/cylinders/cylinder.schema.ts';
import type { MassUnit } from '../../shared/units/factors.ts';
import { wholeNumber } from '../database/columns.ts';

@Entity('cylinder')
@Index('cylinder_held_by_idx', ['firmId', 'heldBy'])
@Index('cylinder_tag_idx', ['firmId', 'tag', 'id'])
@ForeignKey('firm', ['firmId'], ['id'], { name: 'cylinder_firm_fkey' })
@ForeignKey('membership', ['firmId', 'heldBy'], ['firmId', 'personId'], { name: 'cylinder_held_by_fkey' })
@ForeignKey('customer', ['firmId', 'ownerCustomerId'], ['firmId', 'id'], { name: 'cylinder_owner_customer_fkey' })
@ForeignKey('party', ['firmId', 'ownerPartyId'], ['firmId', 'id'], { name: 'cylinder_owner_party_fkey' })
export class CylinderEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'cylinder_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'cylinder_pkey' })
  id!: string;

  @Column({ type: 'text' })
  tag!: string;

  @Column({ type: 'text' })
  kind!: (typeof CYLINDER_KINDS)[number];

  @Column({ type: 'text' })
  refrigerant!: string;

  @Column({ type: 'text' })
  contentState!: (typeof CONTENT_STATES)[number];

  @Column({ type: 'text' })
  ownerKind!: 'ours' | 'party' | 'customer';

  @Column({ type: 'uuid', nullable: true })
  ownerPartyId!: string | null;

  @Column({ type: 'uuid', nullable: true })
  ownerCustomerId!: string | null;

  @Column({ type: 'bigint', transformer: wholeNumber, nullable: true })
  waterCapacityMicrograms!: bigint | null;

  @Column({ type: 'text', nullable: true })
  waterCapacityValue!: string | null;

  @Column({ type: 'text', nullable: true })
  waterCapacityUnit!: MassUnit | null;

  @Column({ type: 'bigint', transformer: wholeNumber, nullable: true })
  stampedLimitMicrograms!: bigint | null;

  @Column({ type: 'text', nullable: true })
  stampedLimitValue!: string | null;

  @Column({ type: 'text', nullable: true })
  stampedLimitUnit!: MassUnit | null;

  @Column({ type: 'bigint', transformer: wholeNumber, nullable: true })
  limitMicrograms!: bigint | null;

  @Column({ type: 'double precision', name: 'service_pressure_kpa_gauge', nullable: true })
  servicePressureKPaGauge!: number | null;

  @Column({ type: 'date', nullable: true })
  retestDue!: string | null;

  @Column({ type: 'uuid', nullable: true })
  heldBy!: string | null;

  @Column({ type: 'text', nullable: true })
  batch!: string | null;

  @VersionColumn({ type: 'integer', default: 1 })
  version!: number;
}
