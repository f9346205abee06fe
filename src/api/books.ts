import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import type {
  addPriceRequest,
  BOOK_TABLES,
  BooksResponse,
  CostRow,
  CylinderBook,
  DifferencesResponse,
  JobBook,
  PersonBook,
  PurchaseRow,
  SupplierBook,
} from '../../shared/books/books.schema.ts';
import type { EMISSIONS_BY, EmissionsResponse } from '../../shared/books/emissions.schema.ts';
import type { GwpSet } from '../../shared/reference/gwp.ts';
import { http, queryString } from './http.ts';
import { keysetPages, type PageOf } from './page.ts';

export interface BooksPeriod {
  from: string;
  to: string;
  refrigerant?: string | undefined;
}
export interface EmissionsPeriod {
  from?: string | undefined;
  to?: string | undefined;
  by?: (typeof EMISSIONS_BY)[number] | undefined;
  gwpSet?: GwpSet | undefined;
}
type BookTable = (typeof BOOK_TABLES)[number];
type Priced<Page> = Page & { currency: string };

const asked = ({ from, to, refrigerant }: BooksPeriod) => ({ from, to, refrigerant });

export const bookQueries = {
  all: () => ['books'] as const,
  books: (period: BooksPeriod) =>
    queryOptions({
      queryKey: [...bookQueries.all(), 'sums', asked(period)] as const,
      queryFn: ({ signal }) => http.get<BooksResponse>(`/books${queryString(asked(period))}`, { signal }),
    }),
  /** What the scales do not explain first. */
  differences: (period: BooksPeriod) =>
    queryOptions({
      queryKey: [...bookQueries.all(), 'differences', asked(period)] as const,
      queryFn: ({ signal }) =>
        http.get<DifferencesResponse>(`/books/differences${queryString(asked(period))}`, { signal }),
    }),
  cylinders: (period: BooksPeriod) => pages<CylinderBook, PageOf<CylinderBook>>('cylinders', period),
  jobs: (period: BooksPeriod) => pages<JobBook, Priced<PageOf<JobBook>>>('jobs', period),
  purchases: (period: BooksPeriod) => pages<PurchaseRow, Priced<PageOf<PurchaseRow>>>('purchases', period),
  people: (period: BooksPeriod) => list<{ items: PersonBook[] }>('people', period),
  suppliers: (period: BooksPeriod) => list<Priced<{ items: SupplierBook[] }>>('suppliers', period),
  cost: (period: BooksPeriod) => list<Priced<{ rows: CostRow[] }>>('cost', period),
  emissions: (period: EmissionsPeriod) =>
    queryOptions({
      queryKey: [...bookQueries.all(), 'emissions', period] as const,
      queryFn: ({ signal }) => http.get<EmissionsResponse>(`/emissions${queryString({ ...period })}`, { signal }),
    }),
};

function list<Answer>(name: string, period: BooksPeriod) {
  return queryOptions({
    queryKey: [...bookQueries.all(), name, asked(period)] as const,
    queryFn: ({ signal }) => http.get<Answer>(`/books/${name}${queryString(asked(period))}`, { signal }),
  });
}

function pages<Row, Page extends PageOf<Row>>(name: string, period: BooksPeriod) {
  return infiniteQueryOptions({
    queryKey: [...bookQueries.all(), name, asked(period)] as const,
    queryFn: ({ pageParam, signal }) =>
      http.get<Page>(`/books/${name}${queryString({ ...asked(period), limit: 60, cursor: pageParam })}`, { signal }),
    ...keysetPages,
  });
}

/** Address of one table of the books as CSV. */
export const booksCsvPath = (table: BookTable, period: BooksPeriod): string =>
  `/api/v1/books.csv${queryString({ ...asked(period), table })}`;
export const emissionsCsvPath = (period: EmissionsPeriod): string =>
  `/api/v1/emissions.csv${queryString({ ...period })}`;

/** What a purchase cost. Costs, jobs and suppliers are worked out anew. */
export function useAddPrice() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: z.input<typeof addPriceRequest>) => http.post<unknown>('/books/prices', body),
    onSuccess: () => client.invalidateQueries({ queryKey: bookQueries.all() }),
  });
}
