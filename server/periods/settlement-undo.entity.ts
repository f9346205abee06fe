import { Column, Entity, ForeignKey, PrimaryColumn } from 'typeorm';
import { wholeNumber } from '../database/columns.ts';

/** How much of a settlement was reversed when its difference was explained, and by which posting. */
@Entity('settlement_undo')
@ForeignKey('entry_group', ['firmId', 'groupId'], ['firmId', 'id'], {
  name: 'settlement_undo_group_fkey',
  deferrable: 'INITIALLY DEFERRED',
})
@ForeignKey('settlement', ['firmId', 'settlementId'], ['firmId', 'id'], { name: 'settlement_undo_settlement_fkey' })
export class SettlementUndoEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'settlement_undo_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'settlement_undo_pkey' })
  settlementId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'settlement_undo_pkey' })
  groupId!: string;

  /** Of the sign of the settlement. */
  @Column({ type: 'bigint', transformer: wholeNumber })
  massMicrograms!: bigint;
}
