import { useQueryClient } from '@tanstack/react-query';
import { useRef, useState } from 'react';
import type { Answer, Body, RouteName } from '#api';
import type { Result } from '#text';
import { type Parts, request } from './client.ts';
import type { ClientFailure } from './failure.ts';
import { newId } from './ids.ts';

/** Endpoints that change something and carry a `requestId`. */
export type ActName = { [N in RouteName]: Body<N> extends { requestId: string } ? N : never }[RouteName];
type WithoutId<T> = T extends unknown ? Omit<T, 'requestId'> : never;
/** The parts of an act without its `requestId`, which `useAct` adds. */
export type ActParts<N extends ActName> = Omit<Parts<N>, 'body'> & { readonly body: WithoutId<Body<N>> };

export interface Act<N extends ActName> {
  readonly act: (parts: ActParts<N>) => Promise<Result<Answer<N>, ClientFailure>>;
  readonly isActing: boolean;
}

/**
 * One changing request. Sent again with the same contents after a lost answer, it keeps its id, so the server gives
 * the first answer instead of acting twice. `refreshes` names the endpoints whose readings are out of date afterwards.
 */
export function useAct<N extends ActName>(name: N, refreshes: readonly RouteName[] = []): Act<N> {
  const queries = useQueryClient();
  const open = useRef<{ readonly contents: string; readonly id: string } | null>(null);
  const [isActing, setActing] = useState(false);

  const act = async (parts: ActParts<N>) => {
    const contents = JSON.stringify(parts);
    if (open.current?.contents !== contents) open.current = { contents, id: newId() };
    setActing(true);
    const withId = { ...parts, body: { ...parts.body, requestId: open.current.id } };
    // `ActParts` is `Parts` less the id that was just put back; the compiler cannot follow that through a generic body.
    const answer = await request(name, withId as unknown as Parts<N>);
    setActing(false);
    if (answer.ok || answer.error.kind === 'refused') open.current = null;
    if (answer.ok) {
      await Promise.all(refreshes.map((each) => queries.invalidateQueries({ queryKey: [each] })));
    }
    return answer;
  };
  return { act, isActing };
}
