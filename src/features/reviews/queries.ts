import { queryOptions } from '@tanstack/react-query';
import { reading } from '../../lib/query-client.ts';

export const reviewsReading = reading('reviews.list', {});

/** Read when the page opens, and again only when the person asks: what is decided is what was read. */
export function reviewReading(id: string) {
  return queryOptions({
    ...reading('reviews.read', { params: { id } }),
    staleTime: Number.POSITIVE_INFINITY,
    gcTime: 0,
    refetchOnWindowFocus: false,
    refetchOnReconnect: false,
  });
}
