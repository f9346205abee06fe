import { Column, Entity, ForeignKey, PrimaryColumn } from 'typeorm';

@Entity('last_sign_in')
@ForeignKey('membership', ['firmId', 'personId'], ['firmId', 'personId'], { name: 'last_sign_in_membership_fkey' })
export class LastSignInEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'last_sign_in_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'last_sign_in_pkey' })
  personId!: string;

  @Column({ type: 'timestamptz' })
  signedInAt!: Date;
}
