import { useQueryClient } from '@tanstack/react-query';
import { useCallback, useEffect, useRef, useState } from 'react';
import type { DraftPage } from '#api';
import { type Channel, openChannel } from '../../lib/channel.ts';
import { request } from '../../lib/client.ts';
import { usePerson } from '../../lib/session.ts';
import { type UsedAutosave, useAutosave } from '../../lib/use-autosave.ts';
import { announce } from '../../ui/announce.tsx';
import { DRAFT_TIMING, type DraftBase, type DraftConflict, newerText, sendDraftText } from './draft-save.ts';
import type { MountedEditor } from './editor/mount-editor.ts';
import { frontValue } from './front-text.ts';
import { draftReading } from './queries.ts';
import { type UnsentText, unsentTexts } from './unsent-text.ts';

/** Long enough for another tab of this browser to say that it is there, in milliseconds. Common practice, no source. */
const TABS_ANSWER_MS = 250;

type TabMessage =
  | { readonly kind: 'kept'; readonly revision: number }
  | { readonly kind: 'who' }
  | { readonly kind: 'here'; readonly key: string };

function readMessage(message: unknown): TabMessage | null {
  if (typeof message !== 'object' || message === null) return null;
  const kind: unknown = Reflect.get(message, 'kind');
  const revision: unknown = Reflect.get(message, 'revision');
  const key: unknown = Reflect.get(message, 'key');
  if (kind === 'who') return { kind };
  if (kind === 'kept' && typeof revision === 'number') return { kind, revision };
  return kind === 'here' && typeof key === 'string' ? { kind, key } : null;
}

/** A save may be acknowledged after its page was left; the page that is open now hears of it all the same. */
function tellKept(name: string, open: Channel<TabMessage> | null, revision: number): void {
  const channel = open ?? openChannel<TabMessage>(name, readMessage, () => undefined);
  channel.tell({ kind: 'kept', revision });
  if (open === null) channel.close();
}

export interface DraftText {
  readonly text: string;
  readonly saver: UsedAutosave<string, DraftBase, DraftConflict>;
  /** The person typed. */
  readonly change: (text: string) => void;
  /** Puts a text into the editor; as an edit it is saved like typing. */
  readonly put: (text: string, asEdit: boolean) => void;
  /** Ends a conflict: goes on from what the server has, with the text that is to stand. */
  readonly goOnWith: (base: DraftBase, text: string, isServers: boolean) => void;
  /** A text that another tab or an earlier visit left unsent; the person decides. */
  readonly offered: UnsentText | null;
  readonly endOffer: (take: boolean) => void;
  readonly editor: { current: MountedEditor | null };
}

/** The text of one draft while it is written: the editor's copy, its saving, and what other tabs do to it. */
export function useDraftText(page: DraftPage): DraftText {
  const { id } = page.draft;
  const person = usePerson();
  const queries = useQueryClient();
  const channelName = `draft/${person.id}/${id}`;
  const [text, setText] = useState(page.text);
  const [offers, setOffers] = useState<readonly UnsentText[]>([]);
  const editor = useRef<MountedEditor | null>(null);
  const newest = useRef(page.text);
  const revision = useRef(page.draft.revision);
  const channel = useRef<Channel<TabMessage> | null>(null);
  const [unsent] = useState(() =>
    unsentTexts(person.id, id, () => `the text of “${frontValue(newest.current, 'title') || 'a draft'}”`),
  );

  const saver = useAutosave<string, DraftBase, DraftConflict>({
    base: { revision: page.draft.revision, hash: page.hash },
    timing: DRAFT_TIMING,
    merge: newerText,
    mayOverlap: false,
    send: async (save) => {
      const kept = await sendDraftText(id, save);
      if (kept.kind === 'kept') {
        revision.current = kept.base.revision;
        tellKept(channelName, channel.current, kept.base.revision);
      }
      return kept;
    },
    remember: (unsentText) => unsent.remember(unsentText, revision.current),
  });
  const state = useRef(saver.state);
  state.current = saver.state;

  const take = useCallback((next: string) => {
    newest.current = next;
    setText(next);
  }, []);
  const change = (next: string) => {
    take(next);
    saver.change(next);
  };
  const put = useCallback(
    (next: string, asEdit: boolean) => {
      const before = newest.current;
      // As an edit the editor itself tells `change`, unless it is still being loaded or the text is the same.
      if (editor.current !== null) editor.current.replace(next, asEdit);
      take(next);
      if (asEdit && editor.current === null && next !== before) saver.change(next);
    },
    [take, saver.change],
  );
  const goOnWith = (base: DraftBase, next: string, isServers: boolean) => {
    revision.current = base.revision;
    put(next, false);
    saver.resolve(base, isServers ? null : next);
  };

  const { resolve } = saver;
  const catchUp = useCallback(async () => {
    const isIdle = () => {
      const { flight, pending, conflict } = state.current;
      return flight === null && pending === null && conflict === null;
    };
    if (!isIdle()) return;
    const read = await request('drafts.read', { params: { id } });
    if (!read.ok || !isIdle()) return;
    const { draft, hash, mayWrite } = read.value;
    if (!mayWrite) queries.setQueryData(draftReading(id).queryKey, read.value);
    else if (draft.revision > revision.current) {
      revision.current = draft.revision;
      resolve({ revision: draft.revision, hash }, null);
      if (read.value.text !== newest.current) {
        put(read.value.text, false);
        announce('The text was changed elsewhere; this page shows the newest.');
      }
    }
  }, [id, queries, resolve, put]);

  useEffect(() => {
    const living = new Set<string>();
    const opened = openChannel<TabMessage>(channelName, readMessage, (message) => {
      if (message.kind === 'who') opened.tell({ kind: 'here', key: unsent.key });
      else if (message.kind === 'here') living.add(message.key);
      else if (message.revision > revision.current) void catchUp();
    });
    channel.current = opened;
    opened.tell({ kind: 'who' });
    const timer = setTimeout(async () => {
      const left = await unsent.leftBehind(newest.current);
      setOffers(left.filter((each) => !living.has(each.key)));
    }, TABS_ANSWER_MS);
    const onVisible = () => document.visibilityState === 'visible' && void catchUp();
    document.addEventListener('visibilitychange', onVisible);
    return () => {
      clearTimeout(timer);
      document.removeEventListener('visibilitychange', onVisible);
      channel.current = null;
      opened.close();
    };
  }, [channelName, unsent, catchUp]);

  const offered = offers[0] ?? null;
  const endOffer = (isTaken: boolean) => {
    if (offered === null) return;
    if (isTaken) put(offered.text, true);
    setOffers(offers.slice(1));
    void unsent.forget(offered.key);
  };
  return { text, saver, change, put, goOnWith, offered, endOffer, editor };
}
