import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { type DraftRow, mayDo } from '#api';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure, Loading } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';
import { Checkbox } from '../../ui/field.tsx';
import { peopleReading } from './queries.ts';

/** Says who writes a draft beside its owner. */
export function AuthorsDialog({ draft, onClose }: { draft: DraftRow; onClose: () => void }) {
  const people = useQuery(peopleReading);
  const setAuthors = useAct('drafts.setAuthors', ['drafts.list', 'drafts.read']);
  const [ticked, setTicked] = useState<ReadonlySet<string>>(() => new Set(draft.authors.map((author) => author.id)));
  const [failure, setFailure] = useState<string | null>(null);
  const writers = people.data?.people.filter(
    (person) => person.active && mayDo(person.role, 'write drafts') && person.id !== draft.owner.id,
  );
  const tick = (id: string, isTicked: boolean) => {
    const next = new Set(ticked);
    if (isTicked) next.add(id);
    else next.delete(id);
    setTicked(next);
  };
  const keep = async () => {
    setFailure(null);
    const answer = await setAuthors.act({ params: { id: draft.id }, body: { personIds: [...ticked] } });
    if (answer.ok) {
      announce('The authors are set');
      onClose();
      return;
    }
    setFailure(answer.error.fields[0]?.message ?? answer.error.message);
    announce(`Not set. ${answer.error.message}`, 'assertive');
  };
  return (
    <Dialog
      title="Who writes this draft"
      description={`${draft.owner.name} owns it. Whoever writes a part of it cannot sign it off.`}
      isOpen
      onClose={onClose}
    >
      {people.isPending && <Loading label="Reading the list of people" />}
      {people.isError && (
        <Failure lead="The list was not read." onAgain={() => void people.refetch()}>
          {people.error.message}
        </Failure>
      )}
      {writers?.length === 0 && <p>Nobody else in the team may write yet. An admin invites authors under Team.</p>}
      {writers?.map((person) => (
        <Checkbox
          key={person.id}
          label={`${person.name}, ${person.role}`}
          checked={ticked.has(person.id)}
          onChange={(event) => tick(person.id, event.target.checked)}
        />
      ))}
      {failure !== null && <Failure lead="Not set.">{failure}</Failure>}
      <DialogActions>
        <Button kind="main" acting="Setting" isActing={setAuthors.isActing} onClick={() => void keep()}>
          Set the authors
        </Button>
        <Button onClick={onClose}>Leave it</Button>
      </DialogActions>
    </Dialog>
  );
}
