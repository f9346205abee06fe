import { Column, Entity, PrimaryColumn } from 'typeorm';
import type { Snapshot } from '../../shared/ledger/snapshot.ts';
import { safeInteger } from '../database/columns.ts';

/** Where the judge stands with a place. Read only: `post_records` writes what it is given. */
@Entity('place_state')
export class PlaceStateEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'place_state_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'text', primaryKeyConstraintName: 'place_state_pkey' })
  place!: 'cylinder' | 'unit';

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'place_state_pkey' })
  placeId!: string;

  @Column({ type: 'boolean' })
  known!: boolean;

  @Column({ type: 'jsonb' })
  state!: Snapshot;

  @Column({ type: 'timestamptz', nullable: true })
  lastOccurredAt!: Date | null;

  @Column({ type: 'bigint', transformer: safeInteger })
  sequence!: number;
}
