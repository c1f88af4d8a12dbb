import type { DraftPage, SaveConflict } from '#api';
import type { Merge, Timing } from '../../lib/autosave.ts';
import type { Kept } from '../../lib/autosave-driver.ts';
import { request } from '../../lib/client.ts';
import type { ClientFailure } from '../../lib/failure.ts';

/** What the server last acknowledged. The hash is the server's own: browsers make none over plain http. */
export interface DraftBase {
  readonly revision: number;
  /** Null after a conflict, until a save or a reading brings it. */
  readonly hash: string | null;
}

/** Why a text could not go on the draft, and where it is instead. */
export type DraftConflict =
  /** The draft moved on: both texts are here. */
  | { readonly kind: 'moved'; readonly saved: SaveConflict; readonly hash: string | null }
  /** It can no longer be written by this person, because of its state or because they were taken off. */
  | { readonly kind: 'closed'; readonly saved: SaveConflict };

export const DRAFT_TIMING: Timing = { quietMs: 1000, longestMs: 5000 };
/** Of two unsent texts the newer holds everything. */
export const newerText: Merge<string> = (_older, newer) => newer;

export interface DraftSave {
  readonly saveId: string;
  readonly payload: string;
  readonly base: DraftBase;
  readonly keepalive: boolean;
}

/** Sends one save by the draft protocol. A 409 is looked into, so that the page knows whether this person may still write. */
export async function sendDraftText(id: string, save: DraftSave): Promise<Kept<DraftBase, DraftConflict>> {
  const { saveId, payload: text, base, keepalive } = save;
  const answer = await request(
    'drafts.saveText',
    { params: { id }, body: { saveId, baseRevision: base.revision, text } },
    { keepalive },
  );
  if (answer.ok) return { kind: 'kept', base: { revision: answer.value.revision, hash: answer.value.hash } };
  const saved = saveConflictOf(answer.error);
  if (saved === null) return { kind: 'failed', failure: answer.error };
  const now = await request('drafts.read', { params: { id } });
  return { kind: 'conflict', conflict: conflictOf(saved, now.ok ? now.value : null, now.ok ? null : now.error) };
}

/** The newest reading decides; where it could not be had, the 409 itself does. */
export function conflictOf(saved: SaveConflict, now: DraftPage | null, failure: ClientFailure | null): DraftConflict {
  if (now === null) {
    const isShut = failure?.kind === 'refused' && (failure.status === 403 || failure.status === 404);
    return isShut || saved.state !== 'draft' ? { kind: 'closed', saved } : { kind: 'moved', saved, hash: null };
  }
  const { draft, text, hash, mayWrite } = now;
  const newest = { ...saved, state: draft.state, revision: draft.revision, text };
  return mayWrite ? { kind: 'moved', saved: newest, hash } : { kind: 'closed', saved: newest };
}

/** Reads the members that a 409 of `drafts.saveText` carries beside the standard ones; null for any other failure. */
export function saveConflictOf(failure: ClientFailure): SaveConflict | null {
  if (failure.kind !== 'refused' || failure.status !== 409) return null;
  const { saveId, state, revision, text, baseText, savedBy } = failure.problem;
  if (typeof saveId !== 'string' || typeof revision !== 'number') return null;
  if (typeof text !== 'string' || typeof baseText !== 'string' || typeof savedBy !== 'string') return null;
  const known = STATES.find((each) => each === state);
  return known === undefined ? null : { saveId, state: known, revision, text, baseText, savedBy };
}

const STATES = ['draft', 'in-review', 'published', 'discarded'] as const satisfies readonly SaveConflict['state'][];
