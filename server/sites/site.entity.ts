import { Column, Entity, ForeignKey, Index, PrimaryColumn, VersionColumn } from 'typeorm';
import type { JURISDICTIONS } from '../../shared/session/session.schema.ts';

@Entity('site')
@Index('site_customer_idx', ['firmId', 'customerId'])
@Index('site_name_idx', ['firmId', 'name', 'id'])
@ForeignKey('customer', ['firmId', 'customerId'], ['firmId', 'id'], { name: 'site_customer_fkey' })
export class SiteEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'site_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'site_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  customerId!: string;

  @Column({ type: 'text' })
  name!: string;

  @Column({ type: 'text', array: true })
  addressLines!: string[];

  @Column({ type: 'text' })
  timeZone!: string;

  @Column({ type: 'double precision' })
  altitudeM!: number;

  @Column({ type: 'text' })
  jurisdiction!: (typeof JURISDICTIONS)[number];

  @VersionColumn({ type: 'integer', default: 1 })
  version!: number;
}
