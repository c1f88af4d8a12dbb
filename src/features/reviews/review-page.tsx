import { useQuery } from '@tanstack/react-query';
import { Link, useParams } from 'react-router-dom';
import { paths } from '../../lib/paths.ts';
import type { RequestError } from '../../lib/query-client.ts';
import { Failure, Loading } from '../../ui/blocks.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { PageHead, Sheet } from '../../ui/sheet.tsx';
import { reviewReading } from './queries.ts';
import { ReviewSheet } from './review-sheet.tsx';

export function ReviewPage() {
  const { id = '' } = useParams();
  const page = useQuery(reviewReading(id));
  usePageTitle(page.data ? `Review of ${page.data.review.draft.title}` : null);
  if (page.data) {
    return (
      <ReviewSheet
        key={id}
        page={page.data}
        isReading={page.isFetching}
        onRead={async () => void (await page.refetch())}
      />
    );
  }
  if (page.isError) return <NotRead error={page.error} onAgain={() => void page.refetch()} />;
  return (
    <Sheet className="pt-6">
      <Loading label="Gathering what the decision needs" lines={6} />
    </Sheet>
  );
}

function NotRead({ error: { failure }, onAgain }: { error: RequestError; onAgain: () => void }) {
  const isMissing = failure.kind === 'refused' && (failure.status === 404 || failure.status === 400);
  const title = isMissing ? 'There is no such review' : 'The review was not read';
  usePageTitle(title);
  return (
    <Sheet className="pb-4">
      <PageHead title={title}>
        {isMissing && (
          <>
            {failure.message} <Link to={paths.reviews()}>All reviews</Link>
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
