import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { tellOfDraft } from '../../lib/draft-channel.ts';
import { paths } from '../../lib/paths.ts';
import { usePerson } from '../../lib/session.ts';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';
import { settledBase } from './send-dialog.tsx';
import type { DraftText } from './use-draft-text.ts';

export interface DiscardDialogProps {
  readonly draftId: string;
  readonly written: DraftText;
  readonly title: string;
  readonly onClose: () => void;
}

/** The question before a draft is put aside. */
export function DiscardDialog({ draftId, written, title, onClose }: DiscardDialogProps) {
  const discard = useAct('drafts.discard', ['drafts.list']);
  const [failure, setFailure] = useState<string | null>(null);
  const navigate = useNavigate();
  const person = usePerson();
  const go = async () => {
    setFailure(null);
    const seen = await settledBase(draftId, written.text, written.saver);
    const answer = typeof seen === 'string' ? null : await discard.act({ params: { id: draftId }, body: { ...seen } });
    if (answer?.ok) {
      announce('The draft is put aside');
      await navigate(paths.start());
      tellOfDraft(person.id, draftId, { kind: 'state' });
      return;
    }
    const words = typeof seen === 'string' ? seen : (answer?.error.message ?? '');
    setFailure(words);
    announce(`Not put aside. ${words}`, 'assertive');
  };
  return (
    <Dialog
      title={`Put ${title === '' ? 'this draft' : `“${title}”`} aside?`}
      description="It goes from the list of drafts for everybody. Its saves are kept for 90 days; published versions stay as they are."
      isOpen
      onClose={onClose}
    >
      {failure !== null && <Failure lead="Not put aside.">{failure}</Failure>}
      <DialogActions>
        <Button kind="hard" acting="Putting aside" isActing={discard.isActing} onClick={() => void go()}>
          Put it aside
        </Button>
        <Button onClick={onClose}>Keep it</Button>
      </DialogActions>
    </Dialog>
  );
}
