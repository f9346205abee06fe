import { QueryClient } from '@tanstack/react-query';
import { NetworkError, Problem } from './http.ts';

/** One cache for the whole page; loaders and components share it. */
export const queryClient = new QueryClient({
  defaultOptions: {
    queries: {
      staleTime: 15_000,
      // A refusal stays a refusal; only a lost connection or a failing server is worth another try.
      retry: (count, error) =>
        count < 2 && (error instanceof NetworkError || (error instanceof Problem && error.status >= 500)),
    },
    mutations: { networkMode: 'always' },
  },
});
