import { browserStore } from '../../lib/browser-store.ts';
import { newId } from '../../lib/ids.ts';

/** A text that the server had not acknowledged when its tab ended. */
export interface UnsentText {
  readonly key: string;
  readonly text: string;
  /** The revision it was typed on. */
  readonly revision: number;
  /** Epoch milliseconds of the last key. */
  readonly at: number;
}

export interface UnsentTexts {
  /** This tab's place. */
  readonly key: string;
  /** Keeps this tab's unsent text, or forgets it when the server has it (null). */
  readonly remember: (text: string | null, revision: number) => void;
  /** What other tabs left behind, newest first; what the server already has is forgotten on the way. */
  readonly leftBehind: (serverText: string) => Promise<readonly UnsentText[]>;
  readonly forget: (key: string) => Promise<void>;
}

/** Texts of one draft that this browser keeps for one person. Each tab has its own place, so that none overwrites another's. */
export function unsentTexts(personId: string, draftId: string, label: () => string): UnsentTexts {
  const store = browserStore(personId);
  const prefix = `draft/${draftId}/`;
  const own = prefix + newId();
  let last: Promise<unknown> = Promise.resolve();
  const inOrder = (act: () => Promise<unknown>) => {
    last = last.then(act);
  };
  return {
    key: own,
    remember: (text, revision) => {
      if (text === null) inOrder(() => store.forget(own));
      else inOrder(() => store.keep(own, { label: label(), at: Date.now(), payload: { text, revision } }));
    },
    leftBehind: async (serverText) => {
      const found = (await store.list()).flatMap(({ key, unsent }) => {
        const read = key.startsWith(prefix) && key !== own ? textOf(unsent.payload) : null;
        return read === null ? [] : [{ key, at: unsent.at, ...read }];
      });
      const known = found.filter((each) => each.text === serverText);
      for (const each of known) await store.forget(each.key);
      return found.filter((each) => each.text !== serverText).sort((a, b) => b.at - a.at);
    },
    forget: (key) => store.forget(key),
  };
}

function textOf(payload: unknown): { readonly text: string; readonly revision: number } | null {
  if (typeof payload !== 'object' || payload === null) return null;
  const text: unknown = Reflect.get(payload, 'text');
  const revision: unknown = Reflect.get(payload, 'revision');
  return typeof text === 'string' && typeof revision === 'number' ? { text, revision } : null;
}
