import { queryOptions } from '@tanstack/react-query';
import type { CylinderFillRequest, CylinderFillResponse } from '../../shared/cylinder-fill/cylinder-fill.schema.ts';
import type { SaturationResponse } from '../../shared/saturation/saturation.schema.ts';
import { http } from './http.ts';

type AtTemperature = Extract<SaturationResponse, { bubbleKPaAbs: number }>;

/** Results of calculations never change for the same question while the page is open. */
const forever = { staleTime: Number.POSITIVE_INFINITY, retry: false } as const;

export const calculationQueries = {
  /** The published rule's largest content of a refillable or recovery cylinder. */
  cylinderFill: (request: CylinderFillRequest) =>
    queryOptions({
      queryKey: ['calculations', 'cylinder-fill', request] as const,
      queryFn: () => http.post<CylinderFillResponse>('/calculations/cylinder-fill', request),
      ...forever,
    }),
  /** Pressures and densities of a refrigerant at one temperature. */
  saturationAt: (refrigerant: string, tempC: number) =>
    queryOptions({
      queryKey: ['calculations', 'saturation', refrigerant, tempC] as const,
      queryFn: () => http.post<AtTemperature>('/calculations/saturation', { refrigerant, tempC }),
      ...forever,
    }),
};
