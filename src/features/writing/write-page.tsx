import { useQuery } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import { Failure, Loading } from '../../ui/blocks.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { PageHead, Sheet } from '../../ui/sheet.tsx';
import { FrozenDraft } from './frozen-draft.tsx';
import { draftReading } from './queries.ts';
import './writing.css';
import { WritingDraft } from './writing-draft.tsx';

export function WritePage() {
  const { id = '' } = useParams();
  const page = useQuery(draftReading(id));
  if (page.data !== undefined) {
    return page.data.mayWrite ? (
      <WritingDraft key={id} page={page.data} />
    ) : (
      <FrozenDraft
        key={`${id} ${page.data.draft.revision}`}
        page={page.data}
        onNews={() => void page.refetch({ cancelRefetch: false })}
      />
    );
  }
  return page.isError ? (
    <Unread message={page.error.message} onAgain={() => void page.refetch()} />
  ) : (
    <Sheet className="pt-8">
      <Loading label="Reading the draft" lines={6} />
    </Sheet>
  );
}

function Unread({ message, onAgain }: { message: string; onAgain: () => void }) {
  usePageTitle('Draft not read');
  return (
    <Sheet>
      <PageHead title="This draft was not read" />
      <Failure lead="Not opened." onAgain={onAgain}>
        {message}
      </Failure>
    </Sheet>
  );
}
