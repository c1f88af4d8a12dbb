import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { DraftRow } from '#api';
import { momentText } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';
import { usePerson } from '../../lib/session.ts';
import { Failure, Loading } from '../../ui/blocks.tsx';
import { StateMark } from '../../ui/marks.tsx';
import { RegisterTable } from '../../ui/register-table.tsx';
import { draftsReading } from './queries.ts';

/** Open drafts: those this person writes first, then the others they may see. */
export function DraftsRegister() {
  const drafts = useQuery({ ...draftsReading, staleTime: 0 });
  const person = usePerson();
  if (drafts.data === undefined) {
    return drafts.isError ? (
      <Failure lead="The drafts were not read." onAgain={() => void drafts.refetch()}>
        {drafts.error.message}
      </Failure>
    ) : (
      <Loading label="Reading the drafts" />
    );
  }
  const isMine = (draft: DraftRow) =>
    draft.owner.id === person.id || draft.authors.some((author) => author.id === person.id);
  const mine = drafts.data.drafts.filter(isMine);
  const others = drafts.data.drafts.filter((draft) => !isMine(draft));
  return (
    <>
      {mine.length === 0 ? (
        <p className="border-ink border-t py-3 text-ink-2">You write no draft at the moment.</p>
      ) : (
        <DraftTable caption="Drafts you write" drafts={mine} />
      )}
      {others.length > 0 && (
        <>
          <h3 className="pt-6 pb-2">Others’ drafts that you may see</h3>
          <DraftTable caption="Others’ drafts that you may see" drafts={others} />
        </>
      )}
    </>
  );
}

function DraftTable({ caption, drafts }: { caption: string; drafts: readonly DraftRow[] }) {
  return (
    <RegisterTable
      caption={caption}
      heads={[{ label: 'Draft' }, { label: 'State' }, { label: 'Written by' }, { label: 'Last changed' }]}
    >
      {drafts.map((draft) => (
        <tr key={draft.id}>
          <th scope="row" className="name">
            <Link to={paths.write(draft.id)}>
              {draft.number} {draft.title || 'A draft without a title'}
            </Link>
            <small>{draft.from === null ? 'a new recipe' : `a change of version ${draft.from}`}</small>
          </th>
          <td data-head="State">
            {(draft.state === 'draft' || draft.state === 'in-review') && <StateMark state={draft.state} />}
            {draft.sentBack !== null && <small>sent back by {draft.sentBack.by}</small>}
          </td>
          <td data-head="Written by">{[draft.owner, ...draft.authors].map((each) => each.name).join(', ')}</td>
          <td data-head="Last changed">{momentText(draft.updatedAt)}</td>
        </tr>
      ))}
    </RegisterTable>
  );
}
