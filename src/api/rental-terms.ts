import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { AddRentalTermsRequest, RentalView } from '../../shared/rental-terms/rental-terms.schema.ts';
import { cylinderQueries } from './cylinders.ts';
import { http } from './http.ts';

export const rentalQueries = {
  of: (cylinderId: string) =>
    queryOptions({
      queryKey: [...cylinderQueries.all(), cylinderId, 'rental-terms'] as const,
      queryFn: ({ signal }) => http.get<RentalView>(`/cylinders/${cylinderId}/rental-terms`, { signal }),
    }),
};

/** The request's id is made when the form opens, so that a second try makes no second terms. */
export function useAddRentalTerms(cylinderId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: AddRentalTermsRequest) => http.post<RentalView>(`/cylinders/${cylinderId}/rental-terms`, body),
    onSuccess: (view) => client.setQueryData(rentalQueries.of(cylinderId).queryKey, view),
  });
}
