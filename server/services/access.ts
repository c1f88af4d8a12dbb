import { mayDo } from '#api';
import type { Person } from '../http/context.ts';

/**
 * What depends on the object and not on the role alone. The table of actions has let the person through before any of these is asked.
 * Nothing here reads the database: callers bring the facts.
 */

/** E-mail addresses and last visits of others. */
export function maySeeAddresses(person: Person): boolean {
  return mayDo(person.role, 'run the team');
}

export interface DraftFacts {
  readonly ownerId: string;
  /** People invited to write and not taken off since. */
  readonly authorIds: readonly string[];
  readonly state: 'draft' | 'in-review' | 'published' | 'discarded';
}

/** Drafts: owner, invited authors, editors, admins; in review also all authors. */
export function maySeeDraft(person: Person, draft: DraftFacts): boolean {
  if (!mayDo(person.role, 'write drafts')) return false;
  if (isAuthor(person, draft) || mayDo(person.role, 'decide reviews')) return true;
  return draft.state === 'in-review';
}

/** Whether this is one of the draft's writers, whatever state the draft is in. */
export function mayWriteDraft(person: Person, draft: DraftFacts): boolean {
  return mayDo(person.role, 'write drafts') && isAuthor(person, draft);
}

/** Taken off the draft, or no longer an author of the team: late words of theirs are kept, but go no further. */
export function couldOnceWrite(
  person: Person,
  draft: DraftFacts & { readonly removedIds: readonly string[] },
): boolean {
  return isAuthor(person, draft) || draft.removedIds.includes(person.id);
}

/** Inviting authors and putting a draft aside: its owner, and editors, so that nobody's leaving blocks a recipe. */
export function mayManageDraft(person: Person, draft: DraftFacts): boolean {
  return mayDo(person.role, 'decide reviews') || (mayDo(person.role, 'write drafts') && draft.ownerId === person.id);
}

export interface ReviewFacts {
  readonly writerIds: readonly string[];
  readonly allowSelfSignOff: boolean;
}

/**
 * The second-person rule. Gives null when the person may sign off or send back, else the reason in words.
 * Owning a draft is not writing it: an owner who wrote nothing may decide.
 */
export function whyNotDecide(person: Person, review: ReviewFacts): string | null {
  if (!mayDo(person.role, 'decide reviews')) return 'An editor decides this.';
  if (!review.writerIds.includes(person.id) || review.allowSelfSignOff) return null;
  return 'You wrote a part of this text, so it needs a second person to decide.';
}

export interface DesignFacts {
  readonly ownerId: string;
  readonly visibility: 'team' | 'only me';
}

/** An "only me" design does not exist for anybody but its owner. */
export function maySeeDesign(person: Person, design: DesignFacts): boolean {
  return design.visibility === 'team' || design.ownerId === person.id;
}

export function mayChangeDesign(person: Person, design: DesignFacts): boolean {
  return design.ownerId === person.id;
}

function isAuthor(person: Person, draft: DraftFacts): boolean {
  return draft.ownerId === person.id || draft.authorIds.includes(person.id);
}
