import { useSyncExternalStore } from 'react';

/** What answers tell about the server besides their contents. */
export interface ServerNews {
  /** The server runs another release than the page was made by: nothing typed is lost, a reload is due. */
  readonly isUpdated: boolean;
  /** A request was refused because nobody is signed in any more. */
  readonly isSignedOut: boolean;
}

let news: ServerNews = { isUpdated: false, isSignedOut: false };
const listeners = new Set<() => void>();

export function tellNews(change: Partial<ServerNews>): void {
  const next = { ...news, ...change };
  if (next.isUpdated === news.isUpdated && next.isSignedOut === news.isSignedOut) return;
  news = next;
  for (const listener of listeners) listener();
}

export function serverNews(): ServerNews {
  return news;
}

export function useServerNews(): ServerNews {
  return useSyncExternalStore((listener) => {
    listeners.add(listener);
    return () => listeners.delete(listener);
  }, serverNews);
}

/** Compares an answer's release with the one the server wrote into the page; a page without one compares nothing. */
export function hearRelease(release: string | null): void {
  const own = document.querySelector('meta[name="release"]')?.getAttribute('content') ?? '';
  if (release === null || own === '') return;
  if (release !== own) tellNews({ isUpdated: true });
}
