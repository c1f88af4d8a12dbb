import { useQueryClient } from '@tanstack/react-query';
import { useEffect, useRef, useState } from 'react';
import type { Answer, KeptInputs } from '#api';
import type { Standing } from '../../lib/autosave.ts';
import type { Kept } from '../../lib/autosave-driver.ts';
import { browserStore } from '../../lib/browser-store.ts';
import { type Channel, openChannel } from '../../lib/channel.ts';
import { request } from '../../lib/client.ts';
import { useAutosave } from '../../lib/use-autosave.ts';
import {
  hasField,
  isTextOrNull,
  type KeptFields,
  mergeFields,
  oneField,
  partUnsent,
  textAt,
  withFields,
  withText,
} from './kept-fields.ts';
import { inputsReading } from './queries.ts';

/** Architecture, "Kept inputs": 800 ms after the last key and at the latest every 2 s. */
const TIMING = { quietMs: 800, longestMs: 2000 };

export interface KeptInputsState {
  /** What stands in the fields. */
  readonly texts: KeptInputs;
  readonly onText: (calculator: string, name: string, text: string | null, kept: string | null) => void;
  readonly standing: Standing;
  /** Fields that had been changed elsewhere when they were kept from here; what was typed here won. */
  readonly moved: readonly { readonly calculator: string; readonly name: string }[];
  /** Typed in this browser, never acknowledged, and changed elsewhere since: to be used or left. */
  readonly offered: KeptFields;
  readonly answerOffer: (uses: boolean) => void;
}

export interface KeptInputsSettings {
  readonly personId: string;
  readonly slug: string;
  /** As the server has them. */
  readonly initial: KeptInputs;
  /** Typed in this browser and never acknowledged; sent at once, unless it was changed elsewhere since. */
  readonly unsent: KeptFields | null;
  /** The recipe in words, for the list of what is not sent. */
  readonly label: string;
}

export function inputsKey(slug: string): string {
  return `inputs/${slug}`;
}

/** Keeps what is typed on a recipe, per person and field, without asking; tells and hears the person's other tabs. */
export function useKeptInputs({ personId, slug, initial, unsent, label }: KeptInputsSettings): KeptInputsState {
  const [left] = useState(() => partUnsent(unsent ?? {}, initial));
  const [texts, setTexts] = useState(() => withFields(initial, left.going));
  const [offered, setOffered] = useState(left.offered);
  const [moved, setMoved] = useState<KeptInputsState['moved']>([]);
  // What the server, or another tab, is known to have: the base of the next change.
  const seen = useRef(initial);
  const channel = useRef<Channel<FieldNews> | null>(null);
  const [store] = useState(() => browserStore(personId));
  const queries = useQueryClient();

  const saver = useAutosave<KeptFields, null, never>({
    base: null,
    timing: TIMING,
    merge: mergeFields,
    mayOverlap: true,
    remember: (payload) => {
      const key = inputsKey(slug);
      void (payload === null
        ? store.forget(key)
        : store.keep(key, { label: `numbers typed on “${label}”`, at: Date.now(), payload }));
    },
    send: async ({ saveId, payload, keepalive }) => {
      const sent = await sendFields(slug, saveId, payload, keepalive);
      if (sent.kind === 'failed') return sent;
      for (const { calculator, fields } of sent.answers) seen.current = { ...seen.current, [calculator]: fields };
      setMoved(sent.answers.flatMap((answer) => answer.moved.map((name) => ({ calculator: answer.calculator, name }))));
      return { kind: 'kept', base: null };
    },
  });
  const waiting = useRef<KeptFields | null>(null);
  waiting.current = saver.state.pending?.payload ?? null;

  useEffect(() => {
    if (Object.keys(left.going).length > 0) saver.change(left.going);
    else if (unsent && Object.keys(left.offered).length === 0) void store.forget(inputsKey(slug));
    // Once: all of these live as long as this page.
  }, [saver.change, left, unsent, store, slug]);

  useEffect(() => {
    const open = openChannel(`inputs/${personId}/${slug}`, readNews, ({ calculator, name, text }) => {
      if (hasFocus(calculator, name) || hasField(waiting.current, calculator, name)) return;
      seen.current = withText(seen.current, calculator, name, text);
      setTexts((now) => withText(now, calculator, name, text));
    });
    channel.current = open;
    return () => {
      channel.current = null;
      open.close();
    };
  }, [personId, slug]);

  const onText: KeptInputsState['onText'] = (calculator, name, text, kept) => {
    setTexts((now) => withText(now, calculator, name, text));
    const flying = saver.state.flight?.payload;
    const base = flying && hasField(flying, calculator, name) ? flying[calculator]?.[name]?.text : undefined;
    const field = { text: kept, base: base === undefined ? textAt(seen.current, calculator, name) : base };
    saver.change(oneField(calculator, name, field));
    channel.current?.tell({ calculator, name, text: kept });
    // Whoever opens the page again, without its being read anew, starts from here.
    queries.setQueryData<Answer<'inputs.read'>>(inputsReading(slug).queryKey, (now) => ({
      calculators: withText(now?.calculators ?? {}, calculator, name, kept),
    }));
  };
  const answerOffer = (uses: boolean) => {
    setOffered({});
    if (uses) {
      setTexts((now) => withFields(now, offered));
      saver.change(offered);
    } else if (saver.state.pending === null && saver.state.flight === null) void store.forget(inputsKey(slug));
  };
  return { texts, onText, standing: saver.standing, moved, offered, answerOffer };
}

interface FieldNews {
  readonly calculator: string;
  readonly name: string;
  readonly text: string | null;
}

function readNews(message: unknown): FieldNews | null {
  const { calculator, name, text } = Object(message);
  return typeof calculator === 'string' && typeof name === 'string' && isTextOrNull(text)
    ? { calculator, name, text }
    : null;
}

function hasFocus(calculator: string, name: string): boolean {
  const active = document.activeElement;
  if (!(active instanceof HTMLElement) || active.dataset.name !== name) return false;
  return document.getElementById(`calculator-${calculator}`)?.contains(active) ?? false;
}

interface Answered {
  readonly calculator: string;
  readonly fields: Record<string, string>;
  readonly moved: readonly string[];
}

/** One request per calculator, each under an id of its own that a repeat of this save uses again. */
async function sendFields(
  slug: string,
  saveId: string,
  payload: KeptFields,
  keepalive: boolean,
): Promise<{ kind: 'answered'; answers: readonly Answered[] } | Extract<Kept<null, never>, { kind: 'failed' }>> {
  const answers: Answered[] = [];
  for (const [i, [calculator, fields]] of Object.entries(payload).entries()) {
    const id = i === 0 ? saveId : `${saveId}-${i}`;
    const answer = await request(
      'inputs.keep',
      { params: { slug, calculator }, body: { saveId: id, fields: mutable(fields) } },
      { keepalive },
    );
    if (!answer.ok) return { kind: 'failed', failure: answer.error };
    answers.push({ calculator, fields: answer.value.fields, moved: answer.value.moved });
  }
  return { kind: 'answered', answers };
}

function mutable(fields: KeptFields[string]): Record<string, { text: string | null; base: string | null }> {
  return Object.fromEntries(Object.entries(fields).map(([name, field]) => [name, { ...field }]));
}
