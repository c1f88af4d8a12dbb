import { useQuery } from '@tanstack/react-query';
import { lazy, Suspense, useState } from 'react';
import { Link } from 'react-router-dom';
import type { DraftRow, ReviewPage } from '#api';
import { momentText } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';
import { announce } from '../../ui/announce.tsx';
import { Loading } from '../../ui/blocks.tsx';
import { type AnyState, StateMark } from '../../ui/marks.tsx';
import { MarginNote, Sheet } from '../../ui/sheet.tsx';
import { Tabs } from '../../ui/tabs.tsx';
import { ChecksList } from './checks-list.tsx';
import { DecidedBox } from './decided-box.tsx';
import { DecisionBox } from './decision-box.tsx';
import { MovedNotice } from './moved-notice.tsx';
import { NumbersThatMove } from './numbers-that-move.tsx';
import { reviewsReading } from './queries.ts';
import { type Decided, useDecision } from './use-decision.ts';
import './reviews.css';

const WordsThatChange = lazy(async () => ({ default: (await import('./words-that-change.tsx')).WordsThatChange }));
const NewPage = lazy(async () => ({ default: (await import('./new-page.tsx')).NewPage }));

export interface ReviewSheetProps {
  readonly page: ReviewPage;
  readonly isReading: boolean;
  readonly onRead: () => Promise<void>;
}

/** Everything one decision needs, and the box to decide in. */
export function ReviewSheet({ page, isReading, onRead }: ReviewSheetProps) {
  const decision = useDecision(page);
  const readAnew = async () => {
    await onRead();
    decision.readAnew();
    announce('Read as it is now. Your note is still here.');
  };
  const { moved, decided } = decision;
  return (
    <Sheet className="review-sheet" margin={<OthersWaiting id={page.review.draft.id} />}>
      <ReviewHead page={page} decided={decided} />
      {moved !== null && (
        <MovedNotice
          moved={moved}
          lead={decision.refusal?.lead ?? 'Nothing was done.'}
          seen={page.text}
          isReading={isReading}
          onRead={() => void readAnew()}
        />
      )}
      <div className="review-two">
        <Matter page={page} />
        <aside className="review-side" aria-label="Decision">
          {decided === null ? (
            <DecisionBox page={page} decision={decision} />
          ) : (
            <DecidedBox decided={decided} draft={page.review.draft} />
          )}
        </aside>
      </div>
    </Sheet>
  );
}

function ReviewHead({ page: { review, base }, decided }: { page: ReviewPage; decided: Decided | null }) {
  const { draft } = review;
  const who = (draft.sentBy ?? draft.owner).name;
  const writers = draft.writtenBy.map((writer) => writer.name).join(', ');
  return (
    <header className="review-head">
      <div>
        <p className="text-ink-2">
          {draft.number !== '' && `${draft.number}, `}
          {base === null ? 'a new recipe' : `a change of version ${base.version}`}
          {draft.sentAt === null ? `, by ${who}` : `, sent by ${who} on ${momentText(draft.sentAt)}`}
        </p>
        <h1 tabIndex={-1}>{draft.title === '' ? 'Untitled draft' : draft.title}</h1>
        {draft.note !== '' && <p className="review-lead">{draft.note}</p>}
        {writers !== '' && <p className="note">Written by {writers}</p>}
      </div>
      <p className="review-versions">
        {base !== null && (
          <>
            <Link to={paths.recipe(draft.slug, base.version)}>version {base.version}</Link>
            <span aria-hidden="true">→</span>
            <span className="sr-only">becomes </span>
          </>
        )}
        <span>revision {draft.revision}</span>
        <StateMark state={stateAfter(draft.state, decided)} />
      </p>
    </header>
  );
}

/** The review stays as it was read; what was decided since is said at once. */
function stateAfter(state: DraftRow['state'], decided: Decided | null): AnyState {
  if (decided !== null) return decided.kind === 'signed-off' ? 'published' : 'draft';
  return state === 'discarded' ? 'withdrawn' : state;
}

type View = 'changes' | 'page';

function Matter({ page }: { page: ReviewPage }) {
  const { base, document, text } = page;
  // Of a new recipe there is nothing to compare: the page itself comes first.
  const [view, setView] = useState<View>(base === null && document !== null ? 'page' : 'changes');
  const changes = (
    <>
      <section className="mb-8">
        <h2>Numbers that move</h2>
        {base === null ? (
          <p className="note">This is the first version: there are no numbers to move, and no designs yet.</p>
        ) : (
          <NumbersThatMove page={page} />
        )}
      </section>
      <section className="mb-8">
        <h2>Words and formulas that change</h2>
        {base === null ? (
          <p className="note">This is the first version: all of its text is new. Read the page itself.</p>
        ) : (
          <Suspense fallback={<Loading label="Comparing the texts" lines={2} />}>
            <WordsThatChange before={base.text} after={text} />
          </Suspense>
        )}
      </section>
      <section className="mb-8">
        <h2>What was proven and what not</h2>
        <ChecksList page={page} />
      </section>
    </>
  );
  const newPage =
    document === null ? (
      <p>The text does not compile, so there is no page to show.</p>
    ) : (
      <Suspense fallback={<Loading label="Drawing the page" lines={4} />}>
        <NewPage key={page.hash} document={document} />
      </Suspense>
    );
  return (
    <div className="review-matter">
      <Tabs
        label="What to look at"
        value={view}
        onChange={(value) => setView(value === 'page' ? 'page' : 'changes')}
        tabs={[
          { value: 'changes', label: 'What changes', content: changes },
          { value: 'page', label: 'The page as readers will see it', content: newPage },
        ]}
      />
    </div>
  );
}

function OthersWaiting({ id }: { id: string }) {
  const reviews = useQuery(reviewsReading);
  const others = (reviews.data?.reviews ?? []).filter((one) => one.draft.id !== id);
  return (
    <MarginNote label={others.length === 0 ? 'Reviews' : 'Also in review'}>
      <ul className="grid gap-2">
        {others.map(({ draft }) => (
          <li key={draft.id}>
            <Link to={paths.review(draft.id)}>{draft.title === '' ? 'Untitled draft' : draft.title}</Link>
            {draft.number !== '' && `, ${draft.number}`}
          </li>
        ))}
        <li>
          <Link to={paths.reviews()}>All reviews</Link>
        </li>
      </ul>
    </MarginNote>
  );
}
