import { Column, Entity, ForeignKey, Index, PrimaryColumn, Unique } from 'typeorm';
import type { TokenScope } from '../../shared/permissions/roles.ts';

/** Only the person whose token it is sees the row. */
@Entity('personal_token')
@Unique('personal_token_token_hash_key', ['tokenHash'])
@Index('personal_token_person_idx', ['firmId', 'personId'])
@ForeignKey('membership', ['firmId', 'personId'], ['firmId', 'personId'], { name: 'personal_token_membership_fkey' })
export class PersonalTokenEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'personal_token_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'personal_token_pkey' })
  id!: string;

  @Column({ type: 'uuid' })
  personId!: string;

  @Column({ type: 'text' })
  name!: string;

  @Column({ type: 'text', array: true })
  scopes!: TokenScope[];

  @Column({ type: 'bytea' })
  tokenHash!: Buffer;

  @Column({ type: 'timestamptz' })
  createdAt!: Date;

  @Column({ type: 'date' })
  expiresOn!: string;

  @Column({ type: 'timestamptz', nullable: true })
  lastUsedAt!: Date | null;

  @Column({ type: 'timestamptz', nullable: true })
  revokedAt!: Date | null;
}
