import { useState } from 'react';
import type { DraftRow } from '#api';
import type { ShownDiagnostic } from '#text';
import { Button } from '../../ui/button.tsx';
import { SendDialog } from './send-dialog.tsx';
import type { LiveCompiled } from './use-compiled.ts';
import type { DraftText } from './use-draft-text.ts';
import { whyNotSend } from './why-not-send.ts';

export interface SendPanelProps {
  readonly draft: DraftRow;
  readonly written: DraftText;
  readonly live: LiveCompiled;
  readonly onGoTo: (diagnostic: ShownDiagnostic) => void;
}

/** The way to review, under the checks. The button says what it waits for. */
export function SendPanel({ draft, written, live, onGoTo }: SendPanelProps) {
  const [isAsking, setAsking] = useState(false);
  const [refused, setRefused] = useState<readonly ShownDiagnostic[]>([]);
  const { standing } = written.saver;
  const trouble = standing.kind === 'not-yet' || standing.kind === 'not-kept' || standing.kind === 'conflict';
  const cannot = trouble
    ? 'Waits until your text is kept.'
    : live.isFresh || !live.isRead
      ? whyNotSend(live)
      : undefined;
  return (
    <div className="send-panel">
      <p className="note">An editor who wrote no part of it signs it off. While it is in review the text is frozen.</p>
      <Button kind="main" cannot={cannot} onClick={() => setAsking(true)}>
        Send for review…
      </Button>
      {refused.length > 0 && (
        <div role="status">
          <p className="field-error">The server found what this page did not:</p>
          <ul>
            {refused.map((each) => (
              <li key={`${each.code} ${each.start.offset}`}>
                <button type="button" className="btn-text" onClick={() => onGoTo(each)}>
                  Line {each.start.line}
                </button>{' '}
                {each.message} {each.hint}
              </li>
            ))}
          </ul>
        </div>
      )}
      {isAsking && (
        <SendDialog
          draft={draft}
          written={written}
          live={live}
          onRefused={setRefused}
          onClose={() => setAsking(false)}
        />
      )}
    </div>
  );
}
