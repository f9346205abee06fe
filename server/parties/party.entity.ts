import { Column, Entity, ForeignKey, Index, PrimaryColumn, VersionColumn } from 'typeorm';
import type { PARTY_KINDS } from '../../shared/parties/parties.schema.ts';

/** Who refrigerant comes from or goes to, besides customers. */
@Entity('party')
@Index('party_name_idx', ['firmId', 'name', 'id'])
@ForeignKey('firm', ['firmId'], ['id'], { name: 'party_firm_fkey' })
export class PartyEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'party_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'party_pkey' })
  id!: string;

  @Column({ type: 'text' })
  kind!: (typeof PARTY_KINDS)[number];

  @Column({ type: 'text' })
  name!: string;

  @Column({ type: 'text', nullable: true })
  note!: string | null;

  @VersionColumn({ type: 'integer', default: 1 })
  version!: number;
}
