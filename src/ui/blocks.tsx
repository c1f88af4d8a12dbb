import type { ReactNode } from 'react';
import { Button, Ticks } from './button.tsx';

/** A caution: amber bar, triangle, words. It is never folded away. */
export function Caution({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section className="caution" aria-label={`Caution: ${title}`}>
      <p className="caution-head">
        <svg width="18" height="16" viewBox="0 0 18 16" aria-hidden="true">
          <path d="M9 1.5L17 15H1z" fill="none" stroke="currentColor" strokeWidth="1.75" strokeLinejoin="round" />
          <path d="M9 6v4.5M9 12v1.6" stroke="currentColor" strokeWidth="1.75" />
        </svg>
        {title}
      </p>
      {children}
    </section>
  );
}

/** The red block of a withdrawn version and of what must not be built from. */
export function StopBlock({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section className="stop" aria-label={title}>
      <p className="stop-head">{title}</p>
      {children}
    </section>
  );
}

export interface FailureProps {
  /** What did not happen: "Not kept." */
  readonly lead: string;
  /** Why, and what is safe: "The server did not answer. Your numbers are still here." */
  readonly children: ReactNode;
  readonly onAgain?: () => void;
  readonly againLabel?: string;
}

/** What failed first, what is safe second, the way on third. Live regions are told by who raises it. */
export function Failure({ lead, children, onAgain, againLabel = 'Try again' }: FailureProps) {
  return (
    <div className="failure">
      <p>
        <b>{lead}</b> {children}
      </p>
      {onAgain !== undefined && (
        <Button kind="text" onClick={onAgain}>
          {againLabel}
        </Button>
      )}
    </div>
  );
}

/** Numbers of the ruled lines; no list is drawn empty with more. */
const RULED = [1, 2, 3, 4, 5, 6, 7, 8];

/** Ruled lines with ticks while a list is read. */
export function Loading({ label, lines = 3 }: { label: string; lines?: number }) {
  return (
    <div role="status" className="border-ink border-t">
      {RULED.slice(0, lines).map((line) => (
        <div key={line} className="flex min-h-16 items-center gap-3 border-rule border-b text-ink-3">
          {line === 1 && (
            <>
              {label} <Ticks />
            </>
          )}
        </div>
      ))}
    </div>
  );
}

/** Ruled blank lines: an empty list with the next useful action on the first of them. */
export function EmptyLines({ children, lines = 5 }: { children: ReactNode; lines?: number }) {
  return (
    <ul className="empty-lines">
      <li>{children}</li>
      {RULED.slice(1, lines).map((line) => (
        <li key={line} aria-hidden="true" />
      ))}
    </ul>
  );
}

/** The title block's frame: what it is on the left, cells of facts on the right. */
export function TitleBlock({ children, cells }: { children: ReactNode; cells: ReactNode }) {
  return (
    <div className="title-block">
      <div className="title-main">{children}</div>
      <dl className="title-cells">{cells}</dl>
    </div>
  );
}

export function TitleCell({ label, children, note }: { label: string; children: ReactNode; note?: ReactNode }) {
  return (
    <div className="title-cell">
      <dt className="lab">{label}</dt>
      <dd className="[font-weight:var(--w-mid)]">
        {children}
        {note !== undefined && <span className="note block [font-weight:var(--w-ui)]">{note}</span>}
      </dd>
    </div>
  );
}
