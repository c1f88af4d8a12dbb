import { useEffect, useState } from 'react';

/** Longer than a press takes, in milliseconds. Source: common practice, no source. */
const LINGER_MS = 300;

/**
 * Keeps a line a moment after its reason is gone. A line that goes when a field is left would move everything beneath it
 * between the press and the release of the pointer, and the press would miss.
 */
export function useLingering(line: string | null): string | null {
  const [last, setLast] = useState(line);
  useEffect(() => {
    if (line === last) return;
    const timer = setTimeout(() => setLast(line), line === null ? LINGER_MS : 0);
    return () => clearTimeout(timer);
  }, [line, last]);
  return line ?? last;
}
