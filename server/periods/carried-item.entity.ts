import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';

/** An open item that a month is closed with: who carries it and why. A later row of the same month and item counts. */
@Entity('carried_item')
@Index('carried_item_month_idx', ['firmId', 'month', 'itemKey'])
@ForeignKey('membership', ['firmId', 'carriedBy'], ['firmId', 'personId'], { name: 'carried_item_carried_by_fkey' })
export class CarriedItemEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'carried_item_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'carried_item_pkey' })
  id!: string;

  @Column({ type: 'text' })
  month!: string;

  @Column({ type: 'text' })
  itemKey!: string;

  @Column({ type: 'uuid' })
  carriedBy!: string;

  @Column({ type: 'text' })
  reason!: string;

  @Column({ type: 'timestamptz' })
  decidedAt!: Date;
}
