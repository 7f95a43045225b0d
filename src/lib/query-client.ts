import { MutationCache, QueryCache, QueryClient } from '@tanstack/react-query';
import { ApiError } from './api-client';

/** A session that ended elsewhere shows itself at the next request: ask who is signed in, and the frame does the rest. */
function askForSession(error: Error): void {
  if (error instanceof ApiError && error.is('not-signed-in')) void queryClient.invalidateQueries({ queryKey: ['session'] });
}

export const queryClient: QueryClient = new QueryClient({
  queryCache: new QueryCache({ onError: askForSession }),
  mutationCache: new MutationCache({ onError: askForSession }),
  defaultOptions: {
    queries: {
      staleTime: 15_000,
      refetchOnWindowFocus: true,
      retry: (failures, error) => failures < 2 && (!(error instanceof ApiError) || error.status === 0 || error.status === 503),
    },
  },
});
