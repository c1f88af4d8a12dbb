import type { ReactElement, ReactNode } from 'react';
import type { VersionState } from '#api';
import type { LimitState } from '#calculator';

export type AnyState = VersionState | 'draft' | 'in-review';

const SQUARE = <rect x="1" y="1" width="10" height="10" fill="none" stroke="currentColor" strokeWidth="1.5" />;

const STATES = {
  draft: {
    word: 'draft',
    shape: (
      <rect
        x="1"
        y="1"
        width="10"
        height="10"
        fill="none"
        stroke="currentColor"
        strokeWidth="1.5"
        strokeDasharray="2.5 2"
      />
    ),
  },
  'in-review': {
    word: 'in review',
    shape: (
      <>
        {SQUARE}
        <path d="M1 11V1h5v10z" fill="currentColor" />
      </>
    ),
  },
  published: { word: 'published', shape: <rect x=".5" y=".5" width="11" height="11" fill="currentColor" /> },
  superseded: {
    word: 'superseded',
    shape: (
      <>
        {SQUARE}
        <path d="M1 11L11 1" stroke="currentColor" strokeWidth="1.5" />
      </>
    ),
  },
  withdrawn: {
    word: 'withdrawn',
    shape: (
      <>
        {SQUARE}
        <path d="M2 2l8 8m0-8l-8 8" stroke="currentColor" strokeWidth="2" />
      </>
    ),
  },
} as const satisfies Record<AnyState, { word: string; shape: ReactElement }>;

/** The state of a version: its shape, then its word. */
export function StateMark({ state }: { state: AnyState }) {
  const { word, shape } = STATES[state];
  return (
    <span className={`state state-${state}`}>
      <svg viewBox="0 0 12 12" aria-hidden="true">
        {shape}
      </svg>
      {word}
    </span>
  );
}

const LINE = <path d="M18 0v12" stroke="currentColor" strokeWidth="2" />;
const TO_LINE = <path d="M1 6h16" stroke="currentColor" strokeWidth="1.5" opacity=".55" />;

/** A dot left of the line, an open dot on it, an open dot past it, a cross past it. */
const LIMITS = {
  within: {
    word: 'within',
    shape: (
      <>
        {TO_LINE}
        {LINE}
        <circle cx="7" cy="6" r="3.5" fill="currentColor" />
      </>
    ),
  },
  close: {
    word: 'close',
    shape: (
      <>
        {TO_LINE}
        {LINE}
        <circle cx="13.5" cy="6" r="3.5" fill="none" stroke="currentColor" strokeWidth="2" />
      </>
    ),
  },
  'only-nominally': {
    word: 'only nominally',
    shape: (
      <>
        <path d="M1 6h15" stroke="currentColor" strokeWidth="1.5" opacity=".55" />
        <path d="M12 0v12" stroke="currentColor" strokeWidth="2" />
        <circle cx="19.5" cy="6" r="3.5" fill="none" stroke="currentColor" strokeWidth="2" />
      </>
    ),
  },
  exceeded: {
    word: 'exceeded',
    shape: (
      <>
        <path d="M1 6h19" stroke="currentColor" strokeWidth="1.5" opacity=".55" />
        <path d="M12 0v12" stroke="currentColor" strokeWidth="2" />
        <path d="M16.5 2.5l7 7m0-7l-7 7" stroke="currentColor" strokeWidth="2.4" />
      </>
    ),
  },
  'no-value': { word: 'no value', shape: LINE },
  waiting: {
    word: 'waiting',
    shape: (
      <>
        {LINE}
        <path d="M1 6h5M9 6h5" stroke="currentColor" strokeWidth="1.5" />
      </>
    ),
  },
} as const satisfies Record<LimitState | 'waiting', { word: string; shape: ReactElement }>;

/** How a limit stands. `children` replaces the word where a sentence says more ("all 4 within"). */
export function LimitMark({ state, children }: { state: LimitState | 'waiting'; children?: ReactNode }) {
  const { word, shape } = LIMITS[state];
  return (
    <span className={`limit limit-${state}`}>
      <svg viewBox="0 0 24 12" aria-hidden="true">
        {shape}
      </svg>
      {children ?? word}
    </span>
  );
}

/** The program's sign: a squared sheet with one square worked out. */
export function QuadrilleMark({ className = 'size-5' }: { className?: string }) {
  return (
    <svg viewBox="0 0 20 20" aria-hidden="true" className={className}>
      <path
        d="M.75 .75h18.5v18.5H.75zM.75 6.9h18.5M.75 13.1h18.5M6.9 .75v18.5M13.1 .75v18.5"
        fill="none"
        stroke="currentColor"
        strokeWidth="1.3"
      />
      <rect x="13.1" y="6.9" width="6.2" height="6.2" fill="var(--green)" />
    </svg>
  );
}
