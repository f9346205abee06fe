import { useQuery } from '@tanstack/react-query';
import { createContext, useContext, useMemo } from 'react';
import type { ChargeSheet } from '../../../shared/charge-sheets/charge-sheet.schema.ts';
import { checkRoomOfSheet } from '../../../shared/charge-sheets/room-of-sheet.ts';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { ASSUMED_SCALE, type Scale } from '../../../shared/ledger/scale.ts';
import type { Tool } from '../../../shared/tools/tools.schema.ts';
import type { Unit } from '../../../shared/unit-register/unit.schema.ts';
import { cylinderQueries } from '../../api/cylinders.ts';
import { useSession } from '../../api/session.ts';
import { siteQueries } from '../../api/sites.ts';
import { toolQueries } from '../../api/tools.ts';
import { referenceData } from './refrigerant-facts.ts';
import type { Purpose, WeighIn, WeighInStart } from './weigh-in-state.ts';

/** What a weigh-in is done with, besides what is typed. */
export interface WeighInData {
  unit: Unit;
  sheet: ChargeSheet | null;
  /** Chosen on the charge screen already. */
  preferredCylinderId: string | null;
  /** Null while they are on their way. */
  cylinders: readonly Cylinder[] | null;
  scales: readonly Tool[] | null;
  /** Of the first thing that could not be loaded. */
  failed: { error: unknown; retry: () => void } | null;
  myId: string | null;
  /** Of the unit's site; the firm's own until that has come. */
  jurisdiction: 'US' | 'EU' | null;
  scaleOf: (toolId: string | null) => Scale;
  cylinderOf: (cylinderId: string | null) => Cylinder | null;
}

export const WeighInContext = createContext<WeighInData | null>(null);

export function useWeighInData(): WeighInData {
  const data = useContext(WeighInContext);
  if (!data) throw new Error('useWeighInData outside a weigh-in');
  return data;
}

/** Cylinders and scales of the firm, with what the arithmetic asks of them. */
export function useLoadedData(
  unit: Unit,
  sheet: ChargeSheet | null,
  preferredCylinderId: string | null = null,
): WeighInData {
  const session = useSession();
  const cylinders = useQuery(cylinderQueries.choice());
  const scales = useQuery(toolQueries.choice('scale'));
  const site = useQuery(siteQueries.one(unit.siteId)).data?.jurisdiction;
  const failing = [cylinders, scales].find((query) => query.isError && query.data === undefined);
  return useMemo(() => {
    const all = cylinders.data?.items ?? null;
    const known = scales.data ?? null;
    return {
      unit,
      sheet,
      preferredCylinderId,
      cylinders: all,
      scales: known,
      failed: failing ? { error: failing.error, retry: () => void failing.refetch() } : null,
      myId: session?.person.id ?? null,
      jurisdiction: site ?? session?.firm.jurisdiction ?? null,
      scaleOf: (toolId) => known?.find((tool) => tool.id === toolId)?.scale ?? ASSUMED_SCALE,
      cylinderOf: (cylinderId) => all?.find((cylinder) => cylinder.id === cylinderId) ?? null,
    };
  }, [unit, sheet, preferredCylinderId, cylinders.data, scales.data, failing, session, site]);
}

/** What a charge sheet asks for; null where there is nothing to weigh in. */
export function purposeOfSheet(sheet: ChargeSheet): WeighInStart['sheet'] {
  const { weighInG } = sheet.result;
  if (!(weighInG > 0)) return null;
  const purpose: Purpose = sheet.request.job === 'fullRecharge' ? 'fullRecharge' : 'extraCharge';
  return { id: sheet.id, purpose, target: { value: String(weighInG), unit: 'g' } };
}

/** The full charge that the sheet gives the unit, where that is another one than the register has; else null. */
export function fullChargeBySheet({ unit, sheet }: Pick<WeighInData, 'unit' | 'sheet'>): number | null {
  if (!sheet || sheet.request.basis.refrigerant !== unit.refrigerant) return null;
  const { totalG } = sheet.result;
  return unit.fullCharge !== null && Math.abs(unit.fullCharge.massG - totalG) < 0.5 ? null : totalG;
}

export interface FullChargeToSet {
  id: string;
  massG: number;
  /** From before the weigh-in, so that this addition is already held against it. */
  validFrom: string;
  jobId: string | null;
  reason: string;
}

export function fullChargeToSet(
  data: Pick<WeighInData, 'unit' | 'sheet'>,
  weighIn: Pick<WeighIn, 'ids' | 'setFullCharge'>,
  occurredAt: string,
  reason: string,
): FullChargeToSet | null {
  const massG = fullChargeBySheet(data);
  if (massG === null || !data.sheet || !weighIn.setFullCharge) return null;
  const { madeAt, jobId } = data.sheet;
  const validFrom = Date.parse(madeAt) < Date.parse(occurredAt) ? madeAt : occurredAt;
  return { id: weighIn.ids.fullCharge, massG, validFrom, jobId, reason };
}

/** The circuit's whole charge is more than the smallest room served takes: that stops the charge step, with no override. */
export function isOverRoom(sheet: ChargeSheet | null): boolean {
  if (!sheet) return false;
  const { request, result, room } = sheet;
  return !checkRoomOfSheet({ refrigerant: request.basis.refrigerant, result, room }, referenceData).ok;
}
