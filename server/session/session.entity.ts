import { Column, Entity, Index, PrimaryColumn } from 'typeorm';

/** Written by connect-pg-simple; `personId` is set by the database from the content. */
@Entity('session')
@Index('session_expire_idx', ['expire'])
@Index('session_person_idx', ['personId'])
export class SessionEntity {
  @PrimaryColumn({ type: 'varchar', primaryKeyConstraintName: 'session_pkey' })
  sid!: string;

  @Column({ type: 'json' })
  sess!: unknown;

  @Column({ type: 'timestamp', precision: 6 })
  expire!: Date;

  @Column({ type: 'uuid', nullable: true })
  personId!: string | null;
}
