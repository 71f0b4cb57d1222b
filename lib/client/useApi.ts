import {
  useMutation,
  useQuery,
  useQueryClient,
  type UseQueryOptions,
  type UseQueryResult,
} from '@tanstack/react-query';
import type { Endpoint, ResponseOf } from '@/lib/contracts/endpoint';
import type { Problem } from '@/lib/contracts/problem';
import { call, type CallInput } from './apiClient';
import { noteAnswer } from './connection';
import { problemWords } from './problemWords';

/** An expected refusal or a lost connection, thrown so that queries and mutations carry it as their error. */
export class ProblemError extends Error {
  readonly problem: Problem | null;
  constructor(problem: Problem | null) {
    super(problem ? problemWords(problem) : 'No connection.');
    this.name = 'ProblemError';
    this.problem = problem;
  }
}

// The four schemas differ by endpoint; each use names its own through E.
type AnyEndpoint = Endpoint<any, any, any, any>;

/** Calls an endpoint and throws what it refused. */
export async function ask<E extends AnyEndpoint>(endpoint: E, input: CallInput<E>): Promise<ResponseOf<E>> {
  const answer = await call(endpoint, input);
  noteAnswer(answer.ok || answer.problem !== null);
  if (answer.ok) return answer.value;
  throw new ProblemError(answer.problem);
}

/** The key under which an endpoint's answers are kept; its name alone stands for all of them. */
export function keyOf(endpoint: AnyEndpoint, input?: { params?: unknown; query?: unknown }): readonly unknown[] {
  return input ? [endpoint.name, input.params ?? null, input.query ?? null] : [endpoint.name];
}

/** Reads an endpoint and keeps its answer fresh. */
export function useApi<E extends AnyEndpoint>(
  endpoint: E,
  input: Omit<CallInput<E>, 'body' | 'signal'>,
  options: Omit<UseQueryOptions<ResponseOf<E>, ProblemError>, 'queryKey' | 'queryFn'> = {},
): UseQueryResult<ResponseOf<E>, ProblemError> {
  return useQuery<ResponseOf<E>, ProblemError>({
    queryKey: keyOf(endpoint, input as { params?: unknown; query?: unknown }),
    queryFn: ({ signal }) => ask(endpoint, { ...input, signal } as CallInput<E>),
    ...options,
  });
}

/** Acts through an endpoint; what the act changes is named by the endpoints whose answers it makes old. */
export function useAct<E extends AnyEndpoint>(
  endpoint: E,
  changes: readonly AnyEndpoint[] = [],
  onDone?: (value: ResponseOf<E>) => void,
) {
  const queries = useQueryClient();
  return useMutation<ResponseOf<E>, ProblemError, CallInput<E>>({
    mutationFn: (input) => ask(endpoint, input),
    onSuccess: async (value) => {
      await Promise.all(changes.map((changed) => queries.invalidateQueries({ queryKey: keyOf(changed) })));
      onDone?.(value);
    },
  });
}
