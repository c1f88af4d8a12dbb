import { useQueryClient } from '@tanstack/react-query';
import { useCallback, useEffect, useRef, useState } from 'react';
import type { DraftPage } from '#api';
import type { Channel } from '../../lib/channel.ts';
import { request } from '../../lib/client.ts';
import { type DraftMessage, openDraftChannel, tellOfDraft } from '../../lib/draft-channel.ts';
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

export interface DraftText {
  readonly text: string;
  readonly saver: UsedAutosave<string, DraftBase, DraftConflict>;
  /** The person typed. */
  readonly change: (text: string) => void;
  /** Puts a text into the editor; as an edit it is saved like typing. */
  readonly put: (text: string, asEdit: boolean) => void;
  /** Ends a conflict: goes on from what the server has, with the text that is to stand. */
  readonly goOnWith: (base: DraftBase, text: string, isServers: boolean) => void;
  /** Lets go of what stands here and shows the draft as the server has it; gives the words of a failure, else null. */
  readonly showServers: () => Promise<string | null>;
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
  const [text, setText] = useState(page.text);
  const [offers, setOffers] = useState<readonly UnsentText[]>([]);
  const editor = useRef<MountedEditor | null>(null);
  const newest = useRef(page.text);
  const revision = useRef(page.draft.revision);
  const channel = useRef<Channel<DraftMessage> | null>(null);
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
        const message = { kind: 'kept', revision: kept.base.revision } as const;
        // A save may be acknowledged after its page was left; the page that is open now hears of it all the same.
        if (channel.current === null) tellOfDraft(person.id, id, message);
        else channel.current.tell(message);
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

  const { resolve, settle } = saver;
  const takeServers = useCallback(
    (read: DraftPage) => {
      const { draft, hash, mayWrite } = read;
      if (!mayWrite) announce('This draft changed elsewhere and is not to be written now.');
      const isNewer = draft.revision > revision.current;
      if (isNewer) {
        revision.current = draft.revision;
        resolve({ revision: draft.revision, hash }, null);
      }
      queries.setQueryData(draftReading(id).queryKey, read);
      if (mayWrite && isNewer && read.text !== newest.current) {
        put(read.text, false);
        announce('The text was changed elsewhere; this page shows the newest.');
      }
    },
    [id, queries, resolve, put],
  );
  const catchUp = useCallback(async () => {
    const read = await request('drafts.read', { params: { id } });
    const { flight, pending, conflict } = state.current;
    if (!read.ok || conflict !== null || read.value.draft.revision < revision.current) return;
    if (flight === null && pending === null) takeServers(read.value);
    else if (!read.value.mayWrite) {
      // The save of what is unsent is refused, keeps the text beside the draft, and brings the panel that says so.
      const after = await settle();
      if (after.flight === null && after.pending === null && after.conflict === null) await catchUp();
    }
  }, [id, takeServers, settle]);
  const showServers = async () => {
    const read = await request('drafts.read', { params: { id } });
    if (!read.ok) return read.error.message;
    const { draft, text: standing, hash } = read.value;
    goOnWith({ revision: draft.revision, hash }, standing, true);
    queries.setQueryData(draftReading(id).queryKey, read.value);
    return null;
  };

  useEffect(() => {
    const living = new Set<string>();
    const opened = openDraftChannel(person.id, id, (message) => {
      if (message.kind === 'who') opened.tell({ kind: 'here', key: unsent.key });
      else if (message.kind === 'here') living.add(message.key);
      else if (message.kind === 'state' || message.revision > revision.current) void catchUp();
    });
    channel.current = opened;
    opened.tell({ kind: 'who' });
    const timer = setTimeout(async () => {
      const left = await unsent.leftBehind(newest.current);
      setOffers(left.filter((each) => !living.has(each.key)));
    }, TABS_ANSWER_MS);
    const onVisible = () => document.visibilityState === 'visible' && void catchUp();
    const onFocus = () => void catchUp();
    document.addEventListener('visibilitychange', onVisible);
    window.addEventListener('focus', onFocus);
    return () => {
      clearTimeout(timer);
      document.removeEventListener('visibilitychange', onVisible);
      window.removeEventListener('focus', onFocus);
      channel.current = null;
      opened.close();
    };
  }, [person.id, id, unsent, catchUp]);

  const offered = offers[0] ?? null;
  const endOffer = (isTaken: boolean) => {
    if (offered === null) return;
    if (isTaken) put(offered.text, true);
    setOffers(offers.slice(1));
    void unsent.forget(offered.key);
  };
  return { text, saver, change, put, goOnWith, showServers, offered, endOffer, editor };
}
