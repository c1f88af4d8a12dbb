import type { UseQueryResult } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import type { RequestError } from '../../lib/query-client.ts';
import { Failure, Loading } from '../../ui/blocks.tsx';

export interface ReadSectionProps<T> {
  readonly query: UseQueryResult<T, RequestError>;
  readonly label: string;
  readonly children: (data: T) => ReactNode;
}

/** A part of the page that is read from the server: ticks, a failure with a way on, or what was read. */
export function ReadSection<T>({ query, label, children }: ReadSectionProps<T>) {
  if (query.data !== undefined) return children(query.data);
  if (query.isError) {
    return (
      <Failure lead="Not read." onAgain={() => void query.refetch()}>
        {query.error.message}
      </Failure>
    );
  }
  return <Loading label={label} />;
}
