import { Column, Entity, Index, PrimaryColumn } from 'typeorm';
import type { AtmosphereKind, PlaceKind } from '../../shared/ledger/place.ts';
import { wholeNumber } from '../database/columns.ts';

/** Sum of the entries of a place. Read only: `post_records` keeps it. */
@Entity('balance')
@Index('balance_place_idx', ['firmId', 'place', 'placeId'])
export class BalanceEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'balance_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'text', primaryKeyConstraintName: 'balance_pkey' })
  placeKey!: string;

  @PrimaryColumn({ type: 'text', primaryKeyConstraintName: 'balance_pkey' })
  refrigerant!: string;

  @Column({ type: 'text' })
  place!: PlaceKind;

  @Column({ type: 'uuid', nullable: true })
  placeId!: string | null;

  @Column({ type: 'text', nullable: true })
  placeAs!: AtmosphereKind | null;

  @Column({ type: 'bigint', transformer: wholeNumber })
  massMicrograms!: bigint;
}
