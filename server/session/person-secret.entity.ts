import { Column, Entity, ForeignKey, PrimaryColumn } from 'typeorm';

/** Readable only in the scope of the person (`asPerson`, or `inFirm` as that person). */
@Entity('person_secret')
@ForeignKey('person', ['personId'], ['id'], { name: 'person_secret_person_fkey' })
export class PersonSecretEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'person_secret_pkey' })
  personId!: string;

  @Column({ type: 'text' })
  passwordHash!: string;

  @Column({ type: 'timestamptz' })
  changedAt!: Date;
}
