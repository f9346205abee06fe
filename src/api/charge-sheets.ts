import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import type {
  addChargeBasisRequest,
  ChargeSheet,
  createChargeSheetRequest,
  StoredChargeBasis,
} from '../../shared/charge-sheets/charge-sheet.schema.ts';
import { http } from './http.ts';
import type { PageOf } from './page.ts';

/** What the manual says about a unit, and the sheets worked out from it. They hang on the unit's key: a change of it reads them again. */
export const chargeSheetQueries = {
  ofUnit: (unitId: string) =>
    queryOptions({
      queryKey: ['units', unitId, 'charge-sheets'] as const,
      queryFn: ({ signal }) => http.get<PageOf<ChargeSheet>>(`/units/${unitId}/charge-sheets`, { signal }),
      select: (page) => page.items,
    }),
  /** Immutable: once read it is never asked for again. */
  one: (id: string) =>
    queryOptions({
      queryKey: ['charge-sheets', id] as const,
      queryFn: ({ signal }) => http.get<ChargeSheet>(`/charge-sheets/${id}`, { signal }),
      staleTime: Number.POSITIVE_INFINITY,
    }),
  /** Newest first: the first holds now. */
  bases: (unitId: string) =>
    queryOptions({
      queryKey: ['units', unitId, 'charge-bases'] as const,
      queryFn: ({ signal }) => http.get<PageOf<StoredChargeBasis>>(`/units/${unitId}/charge-bases`, { signal }),
      select: (page) => page.items,
    }),
};

export function useAddChargeBasis(unitId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof addChargeBasisRequest>) =>
      http.post<StoredChargeBasis>(`/units/${unitId}/charge-bases`, body),
    onSuccess: () => client.invalidateQueries({ queryKey: ['units', unitId] }),
  });
}

/** Worked out again by the server and kept as it stands. */
export function useMakeChargeSheet(unitId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof createChargeSheetRequest>) =>
      http.post<ChargeSheet>(`/units/${unitId}/charge-sheets`, body),
    onSuccess: () => client.invalidateQueries({ queryKey: ['units', unitId] }),
  });
}
