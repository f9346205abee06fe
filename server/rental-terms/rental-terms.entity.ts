import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';

/** What is asked for a rented cylinder from a day on. Only added to. Without a currency: it was given back that day. */
@Entity('rental_terms')
@Index('rental_terms_cylinder_idx', ['firmId', 'cylinderId', 'since'])
@ForeignKey('cylinder', ['firmId', 'cylinderId'], ['firmId', 'id'], { name: 'rental_terms_cylinder_fkey' })
export class RentalTermsEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'rental_terms_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'rental_terms_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  cylinderId!: string;

  @Column({ type: 'date' })
  since!: string;

  @Column({ type: 'text', nullable: true })
  deposit!: string | null;

  @Column({ type: 'text', nullable: true })
  dailyRate!: string | null;

  /** ISO 4217. */
  @Column({ type: 'text', nullable: true })
  currency!: string | null;
}
