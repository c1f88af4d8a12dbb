import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import type { DraftRow } from '#api';
import { paths } from '../../lib/paths.ts';
import { buttonClass } from '../../ui/button.tsx';
import { StateMark } from '../../ui/marks.tsx';

export interface WriteBarProps {
  readonly draft: DraftRow;
  readonly title: string;
  readonly standing: ReactNode;
  readonly acts: ReactNode;
}

/** What is written, its state, whether it is kept, and what can be done. */
export function WriteBar({ draft, title, standing, acts }: WriteBarProps) {
  return (
    <div className="write-bar">
      <h1 tabIndex={-1}>
        {draft.number} {title || 'A draft without a title'}
      </h1>
      {draft.state === 'draft' || draft.state === 'in-review' ? (
        <span className="state-line">
          <StateMark state={draft.state} />
          <span className="note">{draft.from === null ? 'of a new recipe' : `from version ${draft.from}`}</span>
        </span>
      ) : (
        <span className="note">{draft.state === 'published' ? 'published' : 'put aside'}</span>
      )}
      {standing}
      <span className="write-acts">
        {acts}
        <Link to={paths.start()} className={buttonClass('plain', true)}>
          Stop writing
        </Link>
      </span>
    </div>
  );
}
