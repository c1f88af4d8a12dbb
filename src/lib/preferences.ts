import { useSyncExternalStore } from 'react';

export type Theme = 'system' | 'light' | 'dark';

export interface Preferences {
  readonly theme: Theme;
  /** Whether single keys (`/`, `?`) act; WCAG 2.2, 2.1.4 asks for a way to switch them off. */
  readonly singleKeys: boolean;
}

const DEFAULTS: Preferences = { theme: 'system', singleKeys: true };
/** The sheet shown before anybody is signed in takes what was last chosen on this browser. */
const LAST = 'quadrille:preferences';

let owner: string | null = null;
let current: Preferences = DEFAULTS;
const listeners = new Set<() => void>();

function read(key: string): Preferences | null {
  try {
    const kept: unknown = JSON.parse(localStorage.getItem(key) ?? 'null');
    if (typeof kept !== 'object' || kept === null) return null;
    const theme: unknown = Reflect.get(kept, 'theme');
    return {
      theme: theme === 'light' || theme === 'dark' ? theme : 'system',
      singleKeys: Reflect.get(kept, 'singleKeys') !== false,
    };
  } catch {
    // storage is shut, or holds what we did not write: the defaults serve
    return null;
  }
}

function take(next: Preferences): void {
  current = next;
  if (next.theme === 'system') delete document.documentElement.dataset.theme;
  else document.documentElement.dataset.theme = next.theme;
  for (const listener of listeners) listener();
}

/** Takes the preferences of a person, or those last used on this browser while nobody is signed in. */
export function openPreferences(personId: string | null): void {
  owner = personId;
  take((personId === null ? null : read(`${LAST}:${personId}`)) ?? read(LAST) ?? DEFAULTS);
}

/** Changes a preference and keeps it in this browser; without storage it lasts until the page goes. */
export function prefer(change: Partial<Preferences>): void {
  take({ ...current, ...change });
  try {
    localStorage.setItem(LAST, JSON.stringify(current));
    if (owner !== null) localStorage.setItem(`${LAST}:${owner}`, JSON.stringify(current));
  } catch {
    // storage is shut: the choice holds for this page only
  }
}

export function usePreferences(): Preferences {
  return useSyncExternalStore(
    (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    () => current,
  );
}
