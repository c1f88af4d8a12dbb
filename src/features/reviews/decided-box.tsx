import { useEffect, useRef } from 'react';
import { Link } from 'react-router-dom';
import type { DraftRow } from '#api';
import { paths } from '../../lib/paths.ts';
import { announce } from '../../ui/announce.tsx';
import type { Decided } from './use-decision.ts';

/** What came of the decision; the focus goes to it. */
export function DecidedBox({ decided, draft }: { decided: Decided; draft: DraftRow }) {
  const heading = useRef<HTMLHeadingElement>(null);
  const isSigned = decided.kind === 'signed-off';
  const words = isSigned ? `Signed off: version ${decided.version} is published` : 'Sent back';
  useEffect(() => {
    heading.current?.focus();
    announce(words);
  }, [words]);
  return (
    <section className="decision" aria-label="What came of it">
      <h2 ref={heading} tabIndex={-1}>
        {words}
      </h2>
      <div className="decision-part grid gap-2">
        {isSigned ? (
          <>
            <p>
              Your name stands in its title block.
              {decided.version > 1 && ' The version before is superseded.'}
            </p>
            <Link to={paths.recipe(decided.slug)}>Open {draft.title}</Link>
          </>
        ) : (
          <p>The writers have your words and can go on writing.</p>
        )}
        <Link to={paths.reviews()}>All reviews</Link>
      </div>
    </section>
  );
}
