import { Column, Entity, ForeignKey, Index, PrimaryColumn, VersionColumn } from 'typeorm';
import type { APPLIANCE_KINDS, CreateUnitRequest, SUBSECTORS } from '../../shared/unit-register/unit.schema.ts';

/** One independent refrigerant circuit and its equipment, as it is now; dated facts stand in the tables beside. */
@Entity('unit')
@Index('unit_name_idx', ['firmId', 'name', 'id'])
@Index('unit_site_idx', ['firmId', 'siteId'])
@Index('unit_tag_idx', ['firmId', 'tag', 'id'])
@ForeignKey('site', ['firmId', 'siteId'], ['firmId', 'id'], { name: 'unit_site_fkey' })
export class UnitEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'unit_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'unit_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  siteId!: string;

  @Column({ type: 'text' })
  tag!: string;

  @Column({ type: 'text' })
  name!: string;

  @Column({ type: 'text' })
  applianceKind!: (typeof APPLIANCE_KINDS)[number];

  @Column({ type: 'text', nullable: true })
  subsector!: (typeof SUBSECTORS)[number] | null;

  @Column({ type: 'text' })
  refrigerant!: string;

  @Column({ type: 'jsonb', default: [] })
  serials!: CreateUnitRequest['serials'];

  @Column({ type: 'boolean', default: true })
  nameplateReadable!: boolean;

  @Column({ type: 'double precision', name: 'design_pressure_high_kpa_gauge', nullable: true })
  designPressureHighKPaGauge!: number | null;

  @Column({ type: 'double precision', name: 'design_pressure_low_kpa_gauge', nullable: true })
  designPressureLowKPaGauge!: number | null;

  @Column({ type: 'date', nullable: true })
  installedOn!: string | null;

  @VersionColumn({ type: 'integer', default: 1 })
  version!: number;
}
