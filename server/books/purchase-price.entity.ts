import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';
import { wholeNumber } from '../database/columns.ts';

/** Price of what a group bought. Added, never changed: the last one of a group and refrigerant counts. */
@Entity('purchase_price')
@Index('purchase_price_group_idx', ['firmId', 'groupId', 'refrigerant', 'givenAt'])
@ForeignKey('entry_group', ['firmId', 'groupId'], ['firmId', 'id'], { name: 'purchase_price_group_fkey' })
export class PurchasePriceEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'purchase_price_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'purchase_price_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  groupId!: string;

  @Column({ type: 'text' })
  refrigerant!: string;

  @Column({ type: 'text' })
  typedValue!: string;

  /** The price is for one of this. */
  @Column({ type: 'text' })
  typedUnit!: 'kg' | 'lb';

  /** ISO 4217. */
  @Column({ type: 'text' })
  currency!: string;

  /** Millionths of the currency a kilogram. */
  @Column({ type: 'bigint', transformer: wholeNumber })
  microsPerKg!: bigint;

  @Column({ type: 'timestamptz' })
  givenAt!: Date;
}
