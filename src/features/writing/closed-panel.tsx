import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import type { DraftRow } from '#api';
import { paths } from '../../lib/paths.ts';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { CopyButton } from '../../ui/copy-button.tsx';
import type { DraftConflict } from './draft-save.ts';

export interface ClosedPanelProps {
  readonly conflict: DraftConflict & { readonly kind: 'closed' };
  readonly mine: string;
  readonly draft: DraftRow;
  /** The text is safe elsewhere: this tab lets go of it. */
  readonly onLeave: () => void;
  /** Shows the draft as the server has it; gives the words of a failure, else null. */
  readonly onShow: () => Promise<string | null>;
}

/** The draft can no longer be written: says why, where the text is kept, and how to go on with it. */
export function ClosedPanel({ conflict, mine, draft, onLeave, onShow }: ClosedPanelProps) {
  const { saved } = conflict;
  const start = useAct('drafts.start', ['drafts.list']);
  const navigate = useNavigate();
  const [failed, setFailed] = useState<{ readonly lead: string; readonly words: string } | null>(null);
  const fail = (lead: string, words: string) => {
    setFailed({ lead, words });
    announce(`${lead} ${words}`, 'assertive');
  };
  const openAsNew = async () => {
    setFailed(null);
    const isChange = saved.state === 'published' && draft.slug !== '';
    const answer = await start.act({ body: isChange ? { changes: draft.slug, text: mine } : { text: mine } });
    if (!answer.ok) {
      return fail('Not opened.', answer.error.message);
    }
    if (answer.value.already) {
      return fail(
        'Not opened.',
        'Somebody has opened the next change of this recipe already. Copy your text, then bring it in there.',
      );
    }
    onLeave();
    await navigate(paths.write(answer.value.id));
  };
  const seeDraft = async () => {
    setFailed(null);
    const words = await onShow();
    if (words !== null) fail('Not shown.', words);
  };
  return (
    <section className="conflict" aria-labelledby="closed-head">
      <h2 id="closed-head">{WHY[saved.state]}</h2>
      <p>
        Your text is not on the draft. It is kept beside it on the server, under “Earlier saves”, and in this browser.
        Nobody else’s text was changed.
      </p>
      <div className="conflict-acts">
        <Button kind="main" acting="Opening" isActing={start.isActing} onClick={() => void openAsNew()}>
          Open as a new draft
        </Button>
        <CopyButton text={mine} label="Copy" />
        <Button onClick={() => void seeDraft()}>Show the draft as it is</Button>
      </div>
      {failed !== null && <Failure lead={failed.lead}>{failed.words} Your text is still here.</Failure>}
      <pre className="conflict-text">{mine}</pre>
    </section>
  );
}

const WHY = {
  draft: 'You can no longer write this draft',
  'in-review': 'This draft is in review, and its text is frozen',
  published: 'This draft was published while you were typing',
  discarded: 'This draft was put aside while you were typing',
} as const satisfies Record<DraftRow['state'], string>;
