import type { ReactNode } from 'react';

/** A wide table scrolls by itself, also by the keyboard. */
export function WideTable({ label, children }: { label: string; children: ReactNode }) {
  return (
    // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reached by the keyboard (WCAG 2.1.1)
    <section className="wide-table" aria-label={label} tabIndex={0}>
      {children}
    </section>
  );
}
