import { useState } from 'react';
import { momentText } from '../../lib/locale.ts';
import { Button } from '../../ui/button.tsx';
import { CopyButton } from '../../ui/copy-button.tsx';
import { ChangesDialog } from './changes-dialog.tsx';
import type { UnsentText } from './unsent-text.ts';

export interface UnsentOfferProps {
  readonly offered: UnsentText;
  readonly current: string;
  readonly onEnd: (isTaken: boolean) => void;
}

/** A text that never reached the server, found in this browser: offered, never sent by itself. */
export function UnsentOffer({ offered, current, onEnd }: UnsentOfferProps) {
  const [isCompared, setCompared] = useState(false);
  const moment = momentText(new Date(offered.at).toISOString());
  return (
    <section className="write-news" aria-label="Text not sent">
      <p>
        <b>This browser holds a text that was not sent</b>, typed {moment} on revision {offered.revision}. The draft
        below is the one the server has.
      </p>
      <span className="flex flex-wrap items-center gap-3">
        <Button small onClick={() => setCompared(true)}>
          Compare
        </Button>
        <Button small onClick={() => onEnd(true)}>
          Use that text
        </Button>
        <CopyButton small text={offered.text} label="Copy it" />
        <Button small kind="hard" onClick={() => onEnd(false)}>
          Drop it
        </Button>
      </span>
      {isCompared && (
        <ChangesDialog
          title="The text that was not sent"
          left="The draft"
          leftText={current}
          right="Not sent"
          rightText={offered.text}
          onClose={() => setCompared(false)}
        />
      )}
    </section>
  );
}
