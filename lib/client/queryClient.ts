import { QueryClient } from '@tanstack/react-query';
import { ProblemError } from './useApi';

/** One store of answers for the page. An expected refusal is not asked again; a lost connection is, twice. */
export const queryClient = new QueryClient({
  defaultOptions: {
    queries: {
      staleTime: 5_000,
      networkMode: 'always',
      retry: (failures, error) => failures < 2 && error instanceof ProblemError && error.problem === null,
      retryDelay: 800,
    },
    mutations: { retry: false, networkMode: 'always' },
  },
});
