import { lazy, Suspense, useEffect, useRef } from 'react';
import { Button } from '../../ui/button.tsx';
import type { MovedDraft } from './moved-draft.ts';

const WordsThatChange = lazy(async () => ({ default: (await import('./words-that-change.tsx')).WordsThatChange }));

export interface MovedNoticeProps {
  readonly moved: MovedDraft;
  readonly lead: string;
  /** The text that the person had before them. */
  readonly seen: string;
  readonly isReading: boolean;
  readonly onRead: () => void;
}

/** The draft moved while it was read: nothing was done, here is what changed. */
export function MovedNotice({ moved, lead, seen, isReading, onRead }: MovedNoticeProps) {
  const heading = useRef<HTMLHeadingElement>(null);
  useEffect(() => heading.current?.focus(), []);
  const isSame = moved.text === seen;
  return (
    <section className="moved" aria-label="The draft has moved">
      <h2 ref={heading} tabIndex={-1}>
        {lead} The draft has moved.
      </h2>
      <p>
        {moved.message} Nothing was signed and nothing was sent back. Your note and your ticks are still here; the ticks
        were for the text that you read.
      </p>
      {!isSame && (
        <>
          <h3 className="mt-2">What changed since you read it, last saved by {moved.savedBy}</h3>
          <Suspense fallback={<p className="note">Comparing</p>}>
            <WordsThatChange before={seen} after={moved.text} />
          </Suspense>
        </>
      )}
      <p className="mt-3">
        <Button kind="main" acting="Reading" isActing={isReading} onClick={onRead}>
          Read it as it is now
        </Button>
      </p>
    </section>
  );
}
