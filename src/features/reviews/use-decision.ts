import { useState } from 'react';
import type { ReviewPage } from '#api';
import { tellOfDraft } from '../../lib/draft-channel.ts';
import type { ClientFailure } from '../../lib/failure.ts';
import { usePerson } from '../../lib/session.ts';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { type MovedDraft, movedDraft } from './moved-draft.ts';

export type Decided =
  | { readonly kind: 'signed-off'; readonly slug: string; readonly version: number }
  | { readonly kind: 'sent-back' };

export interface Decision {
  readonly note: string;
  readonly setNote: (note: string) => void;
  readonly noteError: string | undefined;
  readonly isTicked: (tick: string) => boolean;
  /** Ticked for a text that was read before this one: it needs a new look. */
  readonly wasTicked: (tick: string) => boolean;
  readonly tick: (tick: string, isTicked: boolean) => void;
  readonly ticksLeft: number;
  readonly signOff: () => Promise<void>;
  /** Gives false when there is no reason yet. */
  readonly sendBack: () => Promise<boolean>;
  readonly isSigning: boolean;
  readonly isSendingBack: boolean;
  readonly refusal: { readonly lead: string; readonly message: string } | null;
  readonly moved: MovedDraft | null;
  /** The draft is read anew: note and ticks stay, the notice goes. */
  readonly readAnew: () => void;
  readonly decided: Decided | null;
}

/** Readings that are out of date once a review is decided; not the review itself, which stays as it was read. */
const OUT_OF_DATE = ['reviews.list', 'me.read', 'drafts.list', 'recipes.list', 'recipes.read', 'designs.list'] as const;

const NOTHING_DONE = { signOff: 'Not signed off.', sendBack: 'Not sent back.' } as const;

/** One decision about one draft. Note and ticks live as long as the page, whatever the server answers. */
export function useDecision({ review, hash, ticks }: ReviewPage): Decision {
  const { id, revision } = review.draft;
  const signing = useAct('reviews.signOff', OUT_OF_DATE);
  const sending = useAct('reviews.sendBack', OUT_OF_DATE);
  const person = usePerson();
  const [note, setNote] = useState('');
  const [noteError, setNoteError] = useState<string | undefined>(undefined);
  // Each tick with the hash of the text that it was made for.
  const [ticked, setTicked] = useState<ReadonlyMap<string, string>>(new Map());
  const [refusal, setRefusal] = useState<Decision['refusal']>(null);
  const [moved, setMoved] = useState<MovedDraft | null>(null);
  const [decided, setDecided] = useState<Decided | null>(null);
  const isTicked = (tick: string) => ticked.get(tick) === hash;
  const left = ticks.filter((tick) => !isTicked(tick)).length;

  const decide = (how: Decided) => {
    setDecided(how);
    tellOfDraft(person.id, id, { kind: 'state' });
  };
  const refuse = (lead: string, failure: ClientFailure) => {
    const of = failure.fields.find((one) => one.field === 'note' || one.field === 'reason');
    setNoteError(of?.message);
    setMoved(movedDraft(failure));
    setRefusal({ lead, message: failure.message });
    announce(`${lead} ${failure.message}`, 'assertive');
  };
  const signOff = async () => {
    setRefusal(null);
    const body = { revision, hash, ticks: ticks.filter(isTicked), note };
    const signed = await signing.act({ params: { id }, body });
    if (!signed.ok) return refuse(NOTHING_DONE.signOff, signed.error);
    decide({ kind: 'signed-off', ...signed.value });
  };
  const sendBack = async () => {
    if (note.trim() === '') {
      setNoteError('Say what should change.');
      announce('Not sent back. Say what should change.', 'assertive');
      return false;
    }
    setRefusal(null);
    const sent = await sending.act({ params: { id }, body: { revision, hash, reason: note } });
    if (sent.ok) decide({ kind: 'sent-back' });
    else refuse(NOTHING_DONE.sendBack, sent.error);
    return true;
  };
  return {
    note,
    setNote: (text) => {
      setNote(text);
      setNoteError(undefined);
    },
    noteError,
    isTicked,
    wasTicked: (tick) => ticked.has(tick) && !isTicked(tick),
    tick: (tick, on) => {
      const next = new Map(ticked);
      if (on) next.set(tick, hash);
      else next.delete(tick);
      setTicked(next);
    },
    ticksLeft: left,
    signOff,
    sendBack,
    isSigning: signing.isActing,
    isSendingBack: sending.isActing,
    refusal,
    moved,
    readAnew: () => {
      setMoved(null);
      setRefusal(null);
    },
    decided,
  };
}
