import { Column, Entity, PrimaryColumn, VersionColumn } from 'typeorm';
import type { GwpSet } from '../../shared/reference/gwp.ts';
import type { JURISDICTIONS, Locale } from '../../shared/session/session.schema.ts';

@Entity('firm')
export class FirmEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'firm_pkey' })
  id!: string;

  @Column({ type: 'text' })
  name!: string;

  @Column({ type: 'text' })
  jurisdiction!: (typeof JURISDICTIONS)[number];

  @Column({ type: 'text' })
  timeZone!: string;

  @Column({ type: 'text' })
  locale!: Locale;

  @Column({ type: 'text' })
  gwpSet!: GwpSet;

  @VersionColumn({ type: 'integer', default: 1 })
  version!: number;
}
