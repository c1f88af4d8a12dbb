import { queryOptions } from '@tanstack/react-query';
import { reading } from '../../lib/query-client.ts';

export const designsReading = reading('designs.list', {});

/** Read at each visit and then left alone: what is typed on the page belongs to what was read. */
export function designReading(id: string) {
  return queryOptions({
    ...reading('designs.read', { params: { id } }),
    staleTime: Number.POSITIVE_INFINITY,
    gcTime: 0,
    refetchOnWindowFocus: false,
    refetchOnReconnect: false,
  });
}
