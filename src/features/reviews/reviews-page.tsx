import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { Answer } from '#api';
import { momentText } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';
import { EmptyLines, Failure, Loading } from '../../ui/blocks.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { RegisterTable } from '../../ui/register-table.tsx';
import { MarginNote, PageHead, Sheet } from '../../ui/sheet.tsx';
import { reviewsReading } from './queries.ts';
import './reviews.css';

type ReviewRow = Answer<'reviews.list'>['reviews'][number];

export function ReviewsPage() {
  usePageTitle('Reviews');
  const reviews = useQuery(reviewsReading);
  const rows = reviews.data?.reviews;
  const count = rows?.length;
  return (
    <Sheet
      margin={
        <div className="pt-8">
          <MarginNote label={count === undefined ? 'Reviews' : count === 1 ? '1 draft waits' : `${count} drafts wait`}>
            Nobody signs off what they wrote a part of.
          </MarginNote>
        </div>
      }
    >
      <PageHead title="Reviews" />
      {reviews.isPending && <Loading label="Reading what waits" lines={4} />}
      {reviews.isError && rows === undefined && (
        <Failure lead="The list was not read." onAgain={() => void reviews.refetch()}>
          {reviews.error.message}
        </Failure>
      )}
      {rows && <Waiting rows={rows} />}
    </Sheet>
  );
}

/** What has waited longest comes first. */
function Waiting({ rows }: { rows: readonly ReviewRow[] }) {
  if (rows.length === 0) {
    return (
      <EmptyLines>
        <span>Nothing is in review.</span>
        <Link to={paths.start()}>Write a recipe, or go on with a draft</Link>
      </EmptyLines>
    );
  }
  const waiting = rows.toSorted((a, b) => (a.draft.sentAt ?? '').localeCompare(b.draft.sentAt ?? ''));
  const yours = waiting.filter((row) => row.mayDecide);
  const others = waiting.filter((row) => !row.mayDecide);
  return (
    <>
      {yours.length > 0 && <Group title="Waiting for you" rows={yours} />}
      {others.length > 0 && <Group title="Waiting for somebody else" rows={others} />}
    </>
  );
}

const HEADS = [
  { label: 'Draft' },
  { label: 'Change' },
  { label: 'Sent by' },
  { label: 'Sent' },
  { label: 'Who decides' },
];

function Group({ title, rows }: { title: string; rows: readonly ReviewRow[] }) {
  return (
    <section className="mb-8">
      <h2 className="mb-2">{title}</h2>
      <RegisterTable caption={title} heads={HEADS}>
        {rows.map(({ draft, whyNot }) => (
          <tr key={draft.id}>
            <th scope="row" className="name">
              <Link to={paths.review(draft.id)}>{draft.title === '' ? 'Untitled draft' : draft.title}</Link>
              <small className="review-what">
                {draft.number !== '' && `${draft.number}, `}
                {draft.from === null ? 'a new recipe' : `from version ${draft.from}`}
              </small>
            </th>
            <td data-head="Change">{draft.note === '' ? 'nothing said' : draft.note}</td>
            <td data-head="Sent by">{(draft.sentBy ?? draft.owner).name}</td>
            <td data-head="Sent">{draft.sentAt === null ? '' : momentText(draft.sentAt)}</td>
            <td data-head="Who decides">{whyNot ?? 'You may decide.'}</td>
          </tr>
        ))}
      </RegisterTable>
    </section>
  );
}
