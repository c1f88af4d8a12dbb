import { queryOptions } from '@tanstack/react-query';
import type { DraftPage } from '#api';
import type { CompileFacts } from '#recipe';
import { reading } from '../../lib/query-client.ts';

export const draftsReading = reading('drafts.list', {});
export const recipesReading = reading('recipes.list', {});
export const peopleReading = reading('people.list', {});

/** A draft is read when its page opens and never behind the back of who is typing; nothing of it outlives the page. */
export function draftReading(id: string) {
  return queryOptions({
    ...reading('drafts.read', { params: { id } }),
    staleTime: Number.POSITIVE_INFINITY,
    gcTime: 0,
    refetchOnWindowFocus: false,
    refetchOnReconnect: false,
  });
}

export function savesReading(id: string) {
  return queryOptions({ ...reading('drafts.saves', { params: { id } }), staleTime: 0 });
}

export function saveReading(id: string, saveId: string) {
  return queryOptions({
    ...reading('drafts.readSave', { params: { id, saveId } }),
    staleTime: Number.POSITIVE_INFINITY,
  });
}

/** What the compiler needs to know, from what the server sent with the draft. */
export function factsOf({ facts }: DraftPage): CompileFacts {
  const { fixedSlug, ...others } = facts;
  return fixedSlug === undefined ? others : { ...others, fixedSlug };
}
