import { Column, Entity, ForeignKey, PrimaryColumn, Unique } from 'typeorm';

@Entity('password_reset')
@Unique('password_reset_token_hash_key', ['tokenHash'])
@ForeignKey('person', ['personId'], ['id'], { name: 'password_reset_person_fkey' })
export class PasswordResetEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'password_reset_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  personId!: string;

  @Column({ type: 'bytea' })
  tokenHash!: Buffer;

  @Column({ type: 'timestamptz' })
  requestedAt!: Date;

  @Column({ type: 'timestamptz' })
  expiresAt!: Date;

  @Column({ type: 'timestamptz', nullable: true })
  usedAt!: Date | null;
}
