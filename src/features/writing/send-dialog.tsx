import { useState } from 'react';
import type { DraftRow } from '#api';
import type { ShownDiagnostic } from '#text';
import { request } from '../../lib/client.ts';
import { tellOfDraft } from '../../lib/draft-channel.ts';
import type { ClientFailure } from '../../lib/failure.ts';
import { usePerson } from '../../lib/session.ts';
import { useAct } from '../../lib/use-act.ts';
import type { UsedAutosave } from '../../lib/use-autosave.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';
import { TextArea } from '../../ui/field.tsx';
import type { DraftBase, DraftConflict } from './draft-save.ts';
import type { LiveCompiled } from './use-compiled.ts';
import type { DraftText } from './use-draft-text.ts';
import { whyNotSend } from './why-not-send.ts';

const LONGEST_NOTE = 500;

export interface SendDialogProps {
  readonly draft: DraftRow;
  readonly written: DraftText;
  readonly live: LiveCompiled;
  readonly onRefused: (diagnostics: readonly ShownDiagnostic[]) => void;
  readonly onClose: () => void;
}

export function SendDialog({ draft, written, live, onRefused, onClose }: SendDialogProps) {
  const send = useAct('drafts.send', ['drafts.list', 'drafts.read', 'reviews.list', 'me.read']);
  const person = usePerson();
  const [note, setNote] = useState('');
  const [failure, setFailure] = useState<string | null>(null);
  const [isSending, setSending] = useState(false);
  const isIdle = written.saver.standing.kind === 'kept';
  const cannot = isIdle && live.isFresh ? whyNotSend(live) : 'Waits until your text is kept and checked.';

  const refuse = (words: string) => {
    setFailure(words);
    announce(`Not sent. ${words}`, 'assertive');
  };
  const go = async () => {
    setFailure(null);
    onRefused([]);
    setSending(true);
    const seen = await settledBase(draft.id, written.text, written.saver);
    if (typeof seen === 'string') refuse(seen);
    else {
      const sent = await send.act({ params: { id: draft.id }, body: { ...seen, note } });
      if (sent.ok) {
        announce('Sent for review');
        tellOfDraft(person.id, draft.id, { kind: 'state' });
        onClose();
        return;
      }
      refuse(sent.error.message);
      const found = diagnosticsOf(sent.error);
      onRefused(found);
      if (found.length > 0) onClose();
    }
    setSending(false);
  };
  return (
    <Dialog
      title="Send for review"
      description={`Revision ${written.saver.state.base.revision} is what the editors will see.`}
      isOpen
      onClose={onClose}
    >
      <TextArea
        label="What changed, in a sentence or two"
        optional
        maxLength={LONGEST_NOTE}
        value={note}
        onChange={(event) => setNote(event.target.value)}
      />
      {failure !== null && <Failure lead="Not sent.">{failure} Your text is kept.</Failure>}
      <DialogActions>
        <Button kind="main" acting="Sending" isActing={isSending} cannot={cannot} onClick={() => void go()}>
          Send for review
        </Button>
        <Button onClick={onClose}>Go on writing</Button>
      </DialogActions>
    </Dialog>
  );
}

/** Waits for the save in flight; gives the revision and hash that the server has of this very text, or why there are none. */
export async function settledBase(
  id: string,
  text: string,
  saver: Pick<UsedAutosave<string, DraftBase, DraftConflict>, 'settle'>,
): Promise<{ readonly revision: number; readonly hash: string } | string> {
  const { base, conflict, failure } = await saver.settle();
  if (conflict !== null) return 'The draft was changed elsewhere.';
  if (failure !== null) return failure.message;
  if (base.hash !== null) return { revision: base.revision, hash: base.hash };
  const read = await request('drafts.read', { params: { id } });
  if (!read.ok) return read.error.message;
  const { draft, hash } = read.value;
  return draft.revision === base.revision && read.value.text === text
    ? { revision: draft.revision, hash }
    : 'The draft was changed elsewhere. Reload the page to see how.';
}

/** What a refusal for failed checks carries; empty for any other. */
export function diagnosticsOf(failure: ClientFailure): readonly ShownDiagnostic[] {
  if (failure.kind !== 'refused' || failure.code !== 'checks-failed') return [];
  const { diagnostics } = failure.problem;
  return Array.isArray(diagnostics) ? diagnostics.filter(isError) : [];
}

function isError(each: unknown): each is ShownDiagnostic {
  return typeof each === 'object' && each !== null && Reflect.get(each, 'severity') === 'error' && 'start' in each;
}
