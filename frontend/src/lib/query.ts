import { useMutation, useQueryClient, type UseMutationResult } from '@tanstack/react-query';
import type { EndpointName } from '#shared/api/endpoints';
import { call, type Input, type Reply } from './call.js';
import { statusOf } from './refusal.js';

export interface Reading<N extends EndpointName> {
  queryKey: readonly [N, unknown, unknown];
  queryFn: (context: { signal: AbortSignal }) => Promise<Reply<N>>;
}

/** Query options for a reading endpoint; the key is the endpoint's name, its parameters, its query. */
export const reading = <N extends EndpointName>(name: N, input: Input<N>): Reading<N> => ({
  queryKey: [name, input.params ?? null, input.query ?? null],
  queryFn: ({ signal }) => call(name, input, signal),
});

/** A changing endpoint; the readings named in `refreshes` are read again once it is done. */
export function useChange<N extends EndpointName, V = void>(
  name: N, inputOf: (given: V) => Input<N>, refreshes: readonly EndpointName[] = [],
): UseMutationResult<Reply<N>, Error, V> {
  const client = useQueryClient();
  const refresh = async (): Promise<void> => { await Promise.all(refreshes.map((reading) => client.invalidateQueries({ queryKey: [reading] }))); };
  return useMutation({
    mutationFn: (given: V) => call(name, inputOf(given)),
    onSuccess: refresh,
    // Somebody else was first: what the reader saw is stale, so that a second try stands on the new state.
    onError: (error) => { if (statusOf(error) === 409) void refresh(); },
  });
}
