import { Column, Entity, Index, PrimaryGeneratedColumn } from 'typeorm';

/** One row for each refused sign-in, for the throttle. */
@Entity('sign_in_failure')
@Index('sign_in_failure_key_idx', ['throttleKey', 'failedAt'])
export class SignInFailureEntity {
  @PrimaryGeneratedColumn('identity', {
    type: 'bigint',
    generatedIdentity: 'ALWAYS',
    primaryKeyConstraintName: 'sign_in_failure_pkey',
  })
  id!: string;

  @Column({ type: 'text' })
  throttleKey!: string;

  @Column({ type: 'timestamptz' })
  failedAt!: Date;
}
