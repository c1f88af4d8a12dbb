import type { ClientFailure } from '../../lib/failure.ts';

/** What a 409 tells of a draft that moved since it was read. */
export interface MovedDraft {
  readonly message: string;
  readonly state: string;
  readonly text: string;
  readonly savedBy: string;
}

/** Null for every refusal but that of a draft which moved. */
export function movedDraft(failure: ClientFailure): MovedDraft | null {
  if (failure.kind !== 'refused' || failure.status !== 409) return null;
  const { state, text, savedBy } = failure.problem;
  if (typeof state !== 'string' || typeof text !== 'string' || typeof savedBy !== 'string') return null;
  return { message: failure.message, state, text, savedBy };
}
