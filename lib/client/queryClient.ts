import { MutationCache, QueryCache, QueryClient } from '@tanstack/react-query';
import { getSession } from '@/lib/contracts/auth';
import { keyOf, ProblemError } from './useApi';

/** An answer that asks to sign in means that the session ended meanwhile: the page looks again at once, not in a minute. */
function lookAgain(error: unknown): void {
  if (error instanceof ProblemError && error.problem?.code === 'sign_in_needed')
    void queryClient.invalidateQueries({ queryKey: keyOf(getSession) });
}

/** One store of answers for the page. An expected refusal is not asked again; a lost connection is, twice. */
export const queryClient = new QueryClient({
  queryCache: new QueryCache({ onError: lookAgain }),
  mutationCache: new MutationCache({ onError: lookAgain }),
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
