import { Column, Entity, Index, PrimaryColumn, VersionColumn } from 'typeorm';
import type { Preferences } from '../../shared/session/session.schema.ts';

/** Belongs to no firm. Seen by the person and by everybody of the firms that the person is or was in. */
@Entity('person')
@Index('person_email_key', { synchronize: false })
export class PersonEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'person_pkey' })
  id!: string;

  @Column({ type: 'text' })
  email!: string;

  @Column({ type: 'text' })
  name!: string;

  @Column({ type: 'jsonb', default: {} })
  preferences!: Partial<Preferences>;

  @VersionColumn({ type: 'integer', default: 1 })
  version!: number;
}
