import { QueryCache, MutationCache, QueryClient } from '@tanstack/react-query';
import { statusOf } from './refusal.js';

/** A session that has ended shows as the sign-in page, wherever the reader was. */
function onRefusal(error: Error): void {
  if (statusOf(error) === 401) queryClient.setQueryData(['readMe', null, null], null);
}

export const queryClient: QueryClient = new QueryClient({
  queryCache: new QueryCache({ onError: onRefusal }),
  mutationCache: new MutationCache({ onError: onRefusal }),
  defaultOptions: {
    queries: {
      staleTime: 15_000,
      retry: (failures, error) => failures < 2 && [0, 502, 503, 504].includes(statusOf(error) ?? 0),
    },
  },
});
