import { useQueryClient } from '@tanstack/react-query';
import { useCallback, useMemo, useState } from 'react';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import type { Scale } from '../../../shared/ledger/scale.ts';
import { refreshBooks } from '../../api/entries.ts';
import { answerErrors } from '../../api/form-errors.ts';
import { NetworkError, Problem } from '../../api/http.ts';
import { postWeighing } from '../../api/stock-take.ts';
import { useDraft } from '../../lib/draft.ts';
import { deviceNow, toLocalInput } from '../../lib/local-time.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { readQuantity, switchUnit } from '../../ui/quantity-draft.ts';
import {
  emptySheet,
  figuresOf,
  newRow,
  type RowResult,
  type SheetRow,
  type SheetUnit,
  weighingOf,
} from './sheet-state.ts';

/** The sheet of one holder: kept while its tab is open, sent cylinder by cylinder. */
export function useSheet(holder: string, cylinders: readonly Cylinder[], scaleOf: (toolId: string) => Scale) {
  const { locale, mass } = usePreferences();
  const client = useQueryClient();
  const initial = useCallback(() => emptySheet(toLocalInput(deviceNow()), mass === 'lbOz' ? 'lb' : mass), [mass]);
  const [sheet, setSheet, clear] = useDraft(`stock-take.${holder}`, initial);
  const [busy, setBusy] = useState(false);
  const options = useMemo(() => ({ locale }), [locale]);
  const readingOf = (row: SheetRow | undefined) =>
    row ? readQuantity('mass', row.gross, options) : ({ is: 'empty' } as const);
  const toSend = cylinders.filter(({ id, openWeighInGroupId }) => {
    const row = sheet.rows[id];
    return openWeighInGroupId === null && row?.result?.is !== 'recorded' && readingOf(row).is === 'read';
  });
  const setRow = (cylinderId: string, change: Partial<SheetRow>) =>
    setSheet((now) => ({
      ...now,
      rows: {
        ...now.rows,
        [cylinderId]: { ...(now.rows[cylinderId] ?? newRow(newId, now.unit)), result: null, ...change },
      },
    }));
  return {
    sheet,
    busy,
    toSend,
    readingOf,
    setRow,
    clear,
    /** Once something was sent, its time and scale stand: a resend has to be the same. */
    begun: Object.values(sheet.rows).some(({ result }) => result?.is === 'recorded' || result?.is === 'unknown'),
    set: (change: { at?: string; toolId?: string }) => setSheet((now) => ({ ...now, ...change })),
    setUnit: (unit: SheetUnit) =>
      setSheet((now) => ({
        ...now,
        unit,
        rows: Object.fromEntries(
          Object.entries(now.rows).map(([id, row]) => [
            id,
            row.result ? row : { ...row, gross: switchUnit('mass', row.gross, unit, options) },
          ]),
        ),
      })),
    async send() {
      setBusy(true);
      for (const cylinder of toSend) {
        const row = sheet.rows[cylinder.id];
        const reading = readingOf(row);
        if (!row || reading.is !== 'read') continue;
        setRow(cylinder.id, { result: await sendOne(cylinder, row, reading) });
      }
      setBusy(false);
      await refreshBooks(client);
    },
  };

  async function sendOne(
    cylinder: Cylinder,
    row: SheetRow,
    reading: Extract<ReturnType<typeof readingOf>, { is: 'read' }>,
  ): Promise<RowResult> {
    try {
      const { entries } = await postWeighing(weighingOf(sheet, row, cylinder.id, reading, deviceNow().toISOString()));
      const { contentG, verdict } = figuresOf(cylinder, reading.base, scaleOf(sheet.toolId));
      const movedG = entries.reduce((sum, { massG, to }) => sum + (to.id === cylinder.id ? massG : -massG), 0);
      return { is: 'recorded', contentG, movedG, verdict };
    } catch (error) {
      // A gateway in between gave up: behind it the posting may have ended well.
      const gateway = error instanceof Problem && (error.status === 502 || error.status === 504);
      if (gateway || error instanceof NetworkError) return { is: 'unknown' };
      const reasons = answerErrors(error);
      const needsReason = reasons.some(({ code, pointer }) => code === 'reasonRequired' || pointer === '/reason');
      return { is: 'refused', why: reasons.map(({ message }) => message).join(' '), needsReason };
    }
  }
}
