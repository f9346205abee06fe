import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';
import type { DOCUMENT_KINDS } from '../../shared/ledger/entry-group.schema.ts';
import type { MassUnit } from '../../shared/units/factors.ts';
import { wholeNumber } from '../database/columns.ts';

/** Read only: taken by `post_records` from the text of its group. */
@Entity('group_document')
@Index('group_document_number_idx', ['firmId', 'number'])
@ForeignKey('entry_group', ['firmId', 'groupId'], ['firmId', 'id'], { name: 'group_document_group_fkey' })
export class GroupDocumentEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'group_document_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'group_document_pkey' })
  groupId!: string;

  @PrimaryColumn({ type: 'smallint', primaryKeyConstraintName: 'group_document_pkey' })
  ordinal!: number;

  @Column({ type: 'text' })
  kind!: (typeof DOCUMENT_KINDS)[number];

  @Column({ type: 'text' })
  number!: string;

  @Column({ type: 'date' })
  dated!: string;

  @Column({ type: 'text', nullable: true })
  refrigerant!: string | null;

  @Column({ type: 'bigint', transformer: wholeNumber, nullable: true })
  massMicrograms!: bigint | null;

  @Column({ type: 'text', nullable: true })
  typedValue!: string | null;

  @Column({ type: 'text', nullable: true })
  typedUnit!: MassUnit | null;
}
