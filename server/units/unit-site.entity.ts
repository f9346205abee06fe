import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';

/** Where the unit stood from when. Only added to. */
@Entity('unit_site')
@Index('unit_site_moved_idx', ['firmId', 'unitId'], { where: 'id <> unit_id' })
@Index('unit_site_unit_idx', ['firmId', 'unitId', 'validFrom'])
@ForeignKey('site', ['firmId', 'siteId'], ['firmId', 'id'], { name: 'unit_site_site_fkey' })
@ForeignKey('unit', ['firmId', 'unitId'], ['firmId', 'id'], { name: 'unit_site_unit_fkey' })
export class UnitSiteEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'unit_site_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'unit_site_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  unitId!: string;

  @Column({ type: 'uuid' })
  siteId!: string;

  @Column({ type: 'timestamptz' })
  validFrom!: Date;
}
