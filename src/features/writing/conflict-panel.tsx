import { useMemo, useState } from 'react';
import { usePerson } from '../../lib/session.ts';
import { announce } from '../../ui/announce.tsx';
import { Button } from '../../ui/button.tsx';
import { CopyButton } from '../../ui/copy-button.tsx';
import { Segments } from '../../ui/field.tsx';
import type { DraftBase, DraftConflict } from './draft-save.ts';
import { likelySides, mergedText, type Side, textRows } from './text-rows.ts';
import { TwoTexts } from './two-texts.tsx';

export interface ConflictPanelProps {
  readonly conflict: DraftConflict & { readonly kind: 'moved' };
  readonly mine: string;
  readonly onEnd: (base: DraftBase, text: string, isServers: boolean) => void;
}

/** The draft moved while this person typed: both texts side by side, and neither is lost whatever is chosen. */
export function ConflictPanel({ conflict, mine, onEnd }: ConflictPanelProps) {
  const { saved, hash } = conflict;
  const isOwn = usePerson().name === saved.savedBy;
  const rows = useMemo(() => textRows(saved.text, mine), [saved.text, mine]);
  const [chosen, setChosen] = useState<ReadonlyMap<number, Side>>(() => likelySides(rows ?? [], saved.baseText));
  const base: DraftBase = { revision: saved.revision, hash };
  const end = (text: string, words: string) => {
    onEnd(base, text, text === saved.text);
    announce(words);
  };
  const choice = (index: number) => (
    <Segments<Side>
      label="Use here"
      options={[
        { value: 'left', label: 'what was saved' },
        { value: 'right', label: 'what I typed' },
        { value: 'both', label: 'both' },
      ]}
      value={chosen.get(index) ?? 'both'}
      onChange={(side) => setChosen(new Map(chosen).set(index, side))}
    />
  );
  return (
    <section className="conflict" aria-labelledby="conflict-head">
      <h2 id="conflict-head">
        {isOwn ? 'You saved this draft elsewhere' : `${saved.savedBy} saved this draft`} while you were typing here
      </h2>
      <p>
        Nothing is lost: both texts are here, and yours is also kept under “Earlier saves”. Choose at each difference,
        or take one text whole.
      </p>
      <div className="conflict-acts">
        {rows !== null && (
          <Button kind="main" onClick={() => end(mergedText(rows, chosen), 'What you chose is in the editor.')}>
            Use what is chosen below
          </Button>
        )}
        <Button onClick={() => end(saved.text, 'What was saved is in the editor.')}>Use what was saved, whole</Button>
        <Button onClick={() => end(mine, 'What you typed is kept.')}>Use what I typed, whole</Button>
        <CopyButton text={mine} label="Copy what I typed" />
      </div>
      {rows === null ? (
        <div className="two-texts">
          <p className="two-head">Saved</p>
          <p className="two-head">Typed here</p>
          <pre className="two-left">{saved.text}</pre>
          <pre className="two-right">{mine}</pre>
        </div>
      ) : (
        <TwoTexts rows={rows} left="Saved" right="Typed here" choice={choice} />
      )}
    </section>
  );
}
