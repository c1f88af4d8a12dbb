import { createStore, del, entries, get, set, type UseStore } from 'idb-keyval';

/** Something typed that the server has not acknowledged yet. */
export interface Unsent {
  /** What it is, in words for the person: `the text of "Rail splitter"`. */
  readonly label: string;
  /** Epoch milliseconds of the last key. */
  readonly at: number;
  readonly payload: unknown;
}

export interface BrowserStore {
  /** Tells whether it is on disk; false where the browser keeps IndexedDB shut. */
  readonly keep: (key: string, unsent: Unsent) => Promise<boolean>;
  readonly read: (key: string) => Promise<Unsent | undefined>;
  readonly forget: (key: string) => Promise<void>;
  readonly list: () => Promise<readonly { readonly key: string; readonly unsent: Unsent }[]>;
  readonly clear: () => Promise<void>;
}

let database: UseStore | undefined;

function open(): UseStore {
  database ??= createStore('quadrille', 'unsent');
  return database;
}

/** What this browser keeps for one person. It is never offered to, or sent for, another. */
export function browserStore(personId: string): BrowserStore {
  const prefix = `${personId}/`;
  const mine = async () => {
    const all = await orElse(() => entries<string, Unsent>(open()), []);
    return all.filter(([key]) => key.startsWith(prefix));
  };
  return {
    keep: (key, unsent) =>
      orElse(async () => {
        await set(prefix + key, unsent, open());
        return true;
      }, false),
    read: (key) => orElse(() => get<Unsent>(prefix + key, open()), undefined),
    forget: (key) => orElse(() => del(prefix + key, open()), undefined),
    list: async () => (await mine()).map(([key, unsent]) => ({ key: key.slice(prefix.length), unsent })),
    clear: async () => {
      for (const [key] of await mine()) await orElse(() => del(key, open()), undefined);
    },
  };
}

/** IndexedDB is shut in some private windows and full on some phones; then nothing is kept, and `keep` says so. */
async function orElse<T>(attempt: () => Promise<T>, otherwise: T): Promise<T> {
  try {
    return await attempt();
  } catch {
    return otherwise;
  }
}
