import { useSyncExternalStore } from 'react';

type Urgency = 'polite' | 'assertive';
type Said = Readonly<Record<Urgency, string>>;

let said: Said = { polite: '', assertive: '' };
const listeners = new Set<() => void>();

function subscribe(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

/** Speaks through the page's live regions: polite waits for a pause, assertive (a failure, refused fields) does not. */
export function announce(text: string, urgency: Urgency = 'polite'): void {
  // The same words twice would change nothing in the region, and nothing would be read.
  const repeated = said[urgency] === text;
  said = { ...said, [urgency]: repeated ? `${text}\u00a0` : text };
  for (const listener of listeners) listener();
}

/** The one polite and the one assertive region of a page; mounted once, by the shell. */
export function LiveRegions() {
  const now = useSyncExternalStore(subscribe, () => said);
  return (
    <>
      <div className="sr-only" aria-live="polite" aria-atomic="true">
        {now.polite}
      </div>
      <div className="sr-only" role="alert" aria-live="assertive" aria-atomic="true">
        {now.assertive}
      </div>
    </>
  );
}
