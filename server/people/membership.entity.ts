import { Column, Entity, ForeignKey, Index, PrimaryColumn, VersionColumn } from 'typeorm';
import type { Role } from '../../shared/permissions/roles.ts';

/** A person in a firm, and what they may do there. It is never deleted: records name who wrote them. */
@Entity('membership')
@Index('membership_person_idx', ['personId'])
@ForeignKey('firm', ['firmId'], ['id'], { name: 'membership_firm_fkey' })
@ForeignKey('person', ['personId'], ['id'], { name: 'membership_person_fkey' })
export class MembershipEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'membership_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'membership_pkey' })
  personId!: string;

  @Column({ type: 'text', array: true })
  roles!: Role[];

  @Column({ type: 'uuid', array: true, nullable: true })
  siteIds!: string[] | null;

  @Column({ type: 'boolean', default: true })
  active!: boolean;

  @Column({ type: 'text', nullable: true })
  van!: string | null;

  @VersionColumn({ type: 'integer', default: 1 })
  version!: number;
}
