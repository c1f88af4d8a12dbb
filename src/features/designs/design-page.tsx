import { useQuery } from '@tanstack/react-query';
import { Link, useParams } from 'react-router-dom';
import { paths } from '../../lib/paths.ts';
import type { RequestError } from '../../lib/query-client.ts';
import { Failure, Loading } from '../../ui/blocks.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { PageHead, Sheet } from '../../ui/sheet.tsx';
import { DesignSheet } from './design-sheet.tsx';
import { designReading } from './queries.ts';

export function DesignPage() {
  const { id = '' } = useParams();
  const page = useQuery(designReading(id));
  usePageTitle(page.data?.design.name ?? null);
  if (page.data) return <DesignSheet key={id} page={page.data} />;
  if (page.isError) return <NotRead error={page.error} onAgain={() => void page.refetch()} />;
  return (
    <Sheet className="pt-6">
      <Loading label="Opening the design" lines={6} />
    </Sheet>
  );
}

function NotRead({ error: { failure }, onAgain }: { error: RequestError; onAgain: () => void }) {
  const isMissing = failure.kind === 'refused' && (failure.status === 404 || failure.status === 400);
  const title = isMissing ? 'There is no such design' : 'The design was not read';
  usePageTitle(title);
  return (
    <Sheet className="pb-4">
      <PageHead title={title}>
        {isMissing && (
          <>
            {failure.message} <Link to={paths.designs()}>My designs</Link>
          </>
        )}
      </PageHead>
      {!isMissing && (
        <Failure lead="Not read." onAgain={onAgain}>
          {failure.message}
        </Failure>
      )}
    </Sheet>
  );
}
