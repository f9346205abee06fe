import { Column, Entity, ForeignKey, PrimaryColumn, Unique } from 'typeorm';
import type { Role } from '../../shared/permissions/roles.ts';
import type { Locale } from '../../shared/session/session.schema.ts';

@Entity('invitation')
@Unique('invitation_token_hash_key', ['tokenHash'])
@ForeignKey('person', ['acceptedBy'], ['id'], { name: 'invitation_accepted_by_fkey' })
@ForeignKey('membership', ['firmId', 'invitedBy'], ['firmId', 'personId'], { name: 'invitation_invited_by_fkey' })
export class InvitationEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'invitation_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'invitation_pkey' })
  id!: string;

  @Column({ type: 'text' })
  email!: string;

  @Column({ type: 'text' })
  name!: string;

  @Column({ type: 'text', array: true })
  roles!: Role[];

  @Column({ type: 'uuid', array: true, nullable: true })
  siteIds!: string[] | null;

  @Column({ type: 'text', nullable: true })
  locale!: Locale | null;

  @Column({ type: 'bytea' })
  tokenHash!: Buffer;

  @Column({ type: 'uuid' })
  invitedBy!: string;

  @Column({ type: 'timestamptz' })
  invitedAt!: Date;

  @Column({ type: 'timestamptz' })
  expiresAt!: Date;

  @Column({ type: 'timestamptz', nullable: true })
  acceptedAt!: Date | null;

  @Column({ type: 'uuid', nullable: true })
  acceptedBy!: string | null;
}
