import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';
import type { AtmosphereKind, PlaceKind } from '../../shared/ledger/place.ts';
import { wholeNumber } from '../database/columns.ts';

/** What month close made of the difference that one statement shows. Added, never changed. */
@Entity('settlement')
@Index('settlement_entry_key', ['firmId', 'entryId'], { unique: true })
@Index('settlement_judged_group_idx', ['firmId', 'judgedGroupId'])
@Index('settlement_judged_place_idx', ['firmId', 'judgedPlaceId'])
@ForeignKey('entry', ['firmId', 'entryId'], ['firmId', 'id'], { name: 'settlement_entry_fkey' })
@ForeignKey('entry_group', ['firmId', 'judgedGroupId'], ['firmId', 'id'], { name: 'settlement_judged_group_fkey' })
export class SettlementEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'settlement_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'settlement_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  entryId!: string;

  @Column({ type: 'text' })
  month!: string;

  @Column({ type: 'uuid' })
  judgedGroupId!: string;

  @Column({ type: 'text' })
  judgedPlace!: 'cylinder' | 'unit' | 'reclaimer';

  @Column({ type: 'uuid' })
  judgedPlaceId!: string;

  @Column({ type: 'text' })
  difference!: PlaceKind;

  @Column({ type: 'text' })
  settledTo!: PlaceKind;

  @Column({ type: 'uuid', nullable: true })
  settledToId!: string | null;

  @Column({ type: 'text', nullable: true })
  settledToAs!: AtmosphereKind | null;

  @Column({ type: 'text' })
  refrigerant!: string;

  /** Above zero: out of the difference. */
  @Column({ type: 'bigint', transformer: wholeNumber })
  massMicrograms!: bigint;
}
