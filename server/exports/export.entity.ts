import { Column, Entity, ForeignKey, Index, PrimaryColumn } from 'typeorm';
import type { CreateExportRequest, ExportFormat, ExportWhat } from '../../shared/exports/export.schema.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { safeInteger } from '../database/columns.ts';

@Entity('export')
@Index('export_requested_at_idx', ['firmId', 'requestedAt', 'id'])
@Index('export_unfinished_idx', ['touchedAt'], { where: `state = ANY (ARRAY['queued'::text, 'running'::text])` })
@Index('export_expires_at_idx', ['expiresAt'], { where: `state = 'done'::text` })
@ForeignKey('membership', ['firmId', 'requestedBy'], ['firmId', 'personId'], { name: 'export_requested_by_fkey' })
@ForeignKey('journal_record', ['firmId', 'recordSequence'], ['firmId', 'sequence'], { name: 'export_record_fkey' })
export class ExportEntity {
  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'export_pkey' })
  firmId!: string;

  @PrimaryColumn({ type: 'uuid', primaryKeyConstraintName: 'export_pkey' })
  id!: string;

  @Column({ type: 'text' })
  what!: ExportWhat;

  @Column({ type: 'text' })
  format!: ExportFormat;

  @Column({ type: 'jsonb' })
  filters!: CreateExportRequest['filters'];

  @Column({ type: 'text' })
  locale!: Locale;

  @Column({ type: 'uuid' })
  requestedBy!: string;

  @Column({ type: 'timestamptz' })
  requestedAt!: Date;

  @Column({ type: 'text', default: 'queued' })
  state!: 'queued' | 'running' | 'done' | 'cancelled' | 'failed';

  @Column({ type: 'integer', default: 0 })
  attempts!: number;

  @Column({ type: 'bigint', transformer: safeInteger, default: 0 })
  rowsDone!: number;

  @Column({ type: 'bigint', transformer: safeInteger, nullable: true })
  rowsTotal!: number | null;

  @Column({ type: 'timestamptz' })
  touchedAt!: Date;

  @Column({ type: 'timestamptz', nullable: true })
  finishedAt!: Date | null;

  @Column({ type: 'timestamptz', nullable: true })
  expiresAt!: Date | null;

  @Column({ type: 'text', nullable: true })
  fileName!: string | null;

  @Column({ type: 'bigint', transformer: safeInteger, nullable: true })
  sizeBytes!: number | null;

  @Column({ type: 'bytea', nullable: true })
  sha256!: Buffer | null;

  @Column({ type: 'bigint', transformer: safeInteger, nullable: true })
  recordSequence!: number | null;

  @Column({ type: 'text', nullable: true })
  problem!: string | null;
}
