import type { z } from 'zod';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import type { entryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { grossVarianceG2, type Scale } from '../../../shared/ledger/scale.ts';
import { verdictOf } from '../../../shared/scale/reconcile.ts';
import { microgramsOfGrams } from '../../../shared/units/mass.ts';
import { instantOfLocal } from '../../lib/local-time.ts';
import { emptyQuantity, type QuantityDraft, type QuantityReading } from '../../ui/quantity-draft.ts';

export const SHEET_UNITS = ['g', 'kg', 'lb', 'oz'] as const;
export type SheetUnit = (typeof SHEET_UNITS)[number];
export const VERDICTS = ['withinScales', 'lookAgain', 'notExplained'] as const;
export type Verdict = (typeof VERDICTS)[number];

/** What became of a reading that was sent. */
export type RowResult =
  | { is: 'recorded'; contentG: number; movedG: number; verdict: Verdict | null }
  | { is: 'refused'; why: string; needsReason: boolean }
  /** No answer came: it is sent again as it was, so what was typed must not change. */
  | { is: 'unknown' };

/** One cylinder of the sheet. Its ids are made once, so that sending again posts nothing twice. */
export interface SheetRow {
  groupId: string;
  readingId: string;
  gross: QuantityDraft<'mass'>;
  reason: string;
  result: RowResult | null;
}

export interface Sheet {
  at: string;
  toolId: string;
  unit: SheetUnit;
  rows: Readonly<Record<string, SheetRow>>;
}

export const emptySheet = (at: string, unit: SheetUnit): Sheet => ({ at, toolId: '', unit, rows: {} });

export const newRow = (newId: () => string, unit: SheetUnit): SheetRow => ({
  groupId: newId(),
  readingId: newId(),
  gross: emptyQuantity(unit),
  reason: '',
  result: null,
});

export interface RowFigures {
  contentG: number;
  /** Against the book; null at the first weighing, which nothing was before. */
  differenceG: number | null;
  /** Twice the standard uncertainty of the reading against the book, `formulas.md` (j). */
  doubleUncertaintyG: number;
  verdict: Verdict | null;
  belowTareG: number | null;
  overLimit: boolean;
}

/** One gross reading against the book, as the server will judge it. */
export function figuresOf(cylinder: Cylinder, grossG: number, scale: Scale): RowFigures {
  const contentG = grossG - cylinder.tareG;
  const standardG = Math.sqrt(grossVarianceG2(scale, microgramsOfGrams(Math.max(0, contentG))));
  const first = cylinder.lastWeighedAt === null && cylinder.contentG === 0;
  const differenceG = first ? null : contentG - cylinder.contentG;
  return {
    contentG,
    differenceG,
    doubleUncertaintyG: 2 * standardG,
    verdict: differenceG === null ? null : verdictOf(Math.abs(differenceG), standardG),
    belowTareG: contentG < 0 ? -contentG : null,
    overLimit: cylinder.limitG !== null && contentG > cylinder.limitG,
  };
}

/**
 * One group for each cylinder: a reading that is refused does not hold the others.
 * @param sentAt the device's clock when it is sent; no part of what a resend is compared by
 */
export function weighingOf(
  sheet: Sheet,
  row: SheetRow,
  cylinderId: string,
  reading: Extract<QuantityReading<'mass'>, { is: 'read' }>,
  sentAt: string,
): z.input<typeof entryGroupRequest> {
  return {
    groupId: row.groupId,
    schema: 1,
    kind: 'weighing',
    occurredAt: instantOfLocal(sheet.at) ?? '',
    deviceSentAt: sentAt,
    readings: [
      {
        id: row.readingId,
        cylinderId,
        toolId: sheet.toolId || null,
        moment: 'only',
        mode: 'gross',
        value: reading.typed.value,
        unit: reading.typed.unit as 'g',
      },
    ],
    entries: [],
    statements: [],
    documents: [],
    reason: row.reason.trim() || null,
  };
}
