import './document.css';
import type { ReactNode } from 'react';

/** A check's answer: tick or cross, then the word. */
export function TrueMark({ isTrue, children }: { isTrue: boolean; children: ReactNode }) {
  return (
    <span className={isTrue ? 'true-mark' : 'true-mark true-mark-not'}>
      <svg viewBox="0 0 14 14" aria-hidden="true">
        <path
          d={isTrue ? 'M1.5 7.5l4 4 7-9' : 'M2 2l10 10m0-10L2 12'}
          fill="none"
          stroke="currentColor"
          strokeWidth="2"
        />
      </svg>
      {children}
    </span>
  );
}
