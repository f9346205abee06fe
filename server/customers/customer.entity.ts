import { Column, Entity, ForeignKey, Index, PrimaryColumn, VersionColumn } from 'typeorm';

@Entity('customer')
@Index('customer_name_idx', ['firmId', 'name', 'id'])
@ForeignKey('firm', ['firmId'], ['id'], { name: 'customer_firm_fkey' })
export class CustomerEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'customer_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'customer_pkey' })
  id!: string;

  @Column({ type: 'text' })
  name!: string;

  @Column({ type: 'text', nullable: true })
  email!: string | null;

  @Column({ type: 'text', nullable: true })
  phone!: string | null;

  @Column({ type: 'text', nullable: true })
  note!: string | null;

  @VersionColumn({ type: 'integer', default: 1 })
  version!: number;
}
