import { QueryClient } from '@tanstack/react-query';
import type { Answer, RouteName } from '#api';
import { type Parts, request } from './client.ts';
import { type ClientFailure, mayTryAgain } from './failure.ts';

declare module '@tanstack/react-query' {
  interface Register {
    defaultError: RequestError;
  }
}

/** TanStack Query wants an exception where a request was refused; it carries the failure to the page. */
export class RequestError extends Error {
  readonly failure: ClientFailure;
  constructor(failure: ClientFailure) {
    super(failure.message);
    this.name = 'RequestError';
    this.failure = failure;
  }
}

export function newQueryClient(): QueryClient {
  return new QueryClient({
    defaultOptions: {
      queries: {
        staleTime: 30_000,
        networkMode: 'always',
        retry: (count, error) => count < 2 && error instanceof RequestError && mayTryAgain(error.failure),
      },
    },
  });
}

/**
 * Options for reading one endpoint, used by loaders, hooks and cache updates alike; the key starts with the endpoint's
 * name, so `invalidateQueries({ queryKey: ['recipes.list'] })` reaches it.
 */
export function reading<N extends RouteName>(name: N, parts: Parts<N>) {
  return {
    queryKey: [name, parts] as const,
    queryFn: async ({ signal }: { signal: AbortSignal }): Promise<Answer<N>> => {
      const answer = await request(name, parts, { signal });
      if (!answer.ok) throw new RequestError(answer.error);
      return answer.value;
    },
  };
}
