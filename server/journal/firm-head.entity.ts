import { Column, Entity, ForeignKey, PrimaryColumn } from 'typeorm';
import { safeInteger } from '../database/columns.ts';

/** Head of the chain. Read only: `post_records` writes it. */
@Entity('firm_head')
@ForeignKey('firm', ['firmId'], ['id'], { name: 'firm_head_firm_fkey' })
export class FirmHeadEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'firm_head_pkey' })
  firmId!: string;

  @Column({ type: 'bigint', transformer: safeInteger, default: 0 })
  sequence!: number;

  @Column({ type: 'bytea' })
  hash!: Buffer;

  @Column({ type: 'text', nullable: true })
  firstOpenMonth!: string | null;
}
