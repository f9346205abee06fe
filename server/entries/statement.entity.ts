import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';
import type { EmptyBy, UnitCondition } from '../../shared/ledger/entry-group.schema.ts';
import { safeInteger } from '../database/columns.ts';

/** What a group says about a unit. Read only: taken by `post_records` from the text of its group. */
@Entity('statement')
@Index('statement_unit_idx', ['firmId', 'unitId', 'occurredAt', 'sequence'])
@ForeignKey('entry_group', ['firmId', 'groupId'], ['firmId', 'id'], { name: 'statement_group_fkey' })
@ForeignKey('unit', ['firmId', 'unitId'], ['firmId', 'id'], { name: 'statement_unit_fkey' })
export class StatementEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'statement_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'statement_pkey' })
  groupId!: string;

  @PrimaryColumn({ type: 'smallint', primaryKeyConstraintName: 'statement_pkey' })
  ordinal!: number;

  @Column({ type: 'bigint', transformer: safeInteger })
  sequence!: number;

  @Column({ type: 'uuid' })
  unitId!: string;

  @Column({ type: 'text' })
  condition!: UnitCondition;

  @Column({ type: 'text', nullable: true })
  shownBy!: EmptyBy | null;

  @Column({ type: 'timestamptz' })
  occurredAt!: Date;
}
