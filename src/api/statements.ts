import { queryOptions } from '@tanstack/react-query';
import type { CylinderStatement } from '../../shared/statements/cylinder-statement.schema.ts';
import { http, queryString } from './http.ts';

/** Days, both included; left out: this month up to today. */
export interface StatementPeriod {
  from?: string | undefined;
  to?: string | undefined;
}

export const statementQueries = {
  all: () => ['statements'] as const,
  of: (cylinderId: string, period: StatementPeriod) =>
    queryOptions({
      queryKey: [...statementQueries.all(), cylinderId, period] as const,
      queryFn: ({ signal }) =>
        http.get<CylinderStatement>(`/cylinders/${cylinderId}/statement${queryString({ ...period })}`, { signal }),
    }),
};

export const statementCsvPath = (cylinderId: string, period: StatementPeriod): string =>
  `/api/v1/cylinders/${cylinderId}/statement.csv${queryString({ ...period })}`;
