import { and, desc, eq, lte, sql } from 'drizzle-orm';
import type { Failure, SaveConflict } from '#api';
import { fail, ok, type Result } from '#text';
import type { Db } from '../database/open.ts';
import { draftSave, user } from '../database/schema.ts';
import { type LoadedDraft, readDraftText } from './draft-rows.ts';
import { hashText } from './recipe-text.ts';

/** What a person saw when they decided: sent with every act on a draft. */
export interface Seen {
  readonly revision: number;
  readonly hash: string;
}

/** What the draft says now and what it said at the revision that the sender knew. */
export type DraftNow = Omit<SaveConflict, 'saveId'>;

/** Both texts of a conflict. The base is the nearest earlier save that is still kept. */
export async function draftNow(db: Db, draft: LoadedDraft, baseRevision: number): Promise<DraftNow> {
  const [text, baseText, savedBy] = [
    await readDraftText(db, draft.id),
    await textAt(db, draft.id, baseRevision),
    await savedByName(db, draft),
  ];
  return { state: draft.state, revision: draft.revision, text, baseText, savedBy };
}

export async function textAt(db: Db, draftId: string, revision: number): Promise<string> {
  const [found] = await db
    .select({ text: draftSave.text })
    .from(draftSave)
    .where(and(eq(draftSave.draftId, draftId), lte(draftSave.revision, revision)))
    .orderBy(desc(draftSave.revision))
    .limit(1);
  return found?.text ?? '';
}

async function savedByName(db: Db, draft: LoadedDraft): Promise<string> {
  const [found] = await db
    .select({ name: user.name })
    .from(draftSave)
    .innerJoin(user, eq(user.id, draftSave.userId))
    .where(and(eq(draftSave.draftId, draft.id), sql`${draftSave.revision} is not null`))
    .orderBy(desc(draftSave.revision))
    .limit(1);
  return found?.name ?? draft.row.owner.name;
}

/**
 * Gives the draft's text if it is the one that was seen and the draft is in a state that the act needs.
 * When it cannot: `stale` with what the draft says now, what it said then, and its state; nothing was done.
 */
export async function seenText(
  db: Db,
  draft: LoadedDraft,
  seen: Seen,
  needs: LoadedDraft['state'],
): Promise<Result<string, Failure>> {
  const text = await readDraftText(db, draft.id);
  const hash = hashText(text);
  if (draft.state === needs && draft.revision === seen.revision && hash === seen.hash) return ok(text);
  const now = await draftNow(db, draft, seen.revision);
  return fail({ kind: 'stale', detail: whatMoved(draft, seen, needs), extra: { ...now, hash } });
}

const STATE_WORDS = {
  draft: 'being written',
  'in-review': 'in review',
  published: 'published',
  discarded: 'put aside',
} as const satisfies Record<LoadedDraft['state'], string>;

function whatMoved(draft: LoadedDraft, seen: Seen, needs: LoadedDraft['state']): string {
  if (draft.state !== needs)
    return `This draft is ${STATE_WORDS[draft.state]}, but this needs one that is ${STATE_WORDS[needs]}.`;
  if (draft.revision !== seen.revision) {
    return `This draft is at revision ${draft.revision}, but you saw revision ${seen.revision}. Nothing was done.`;
  }
  return 'The text that you saw is not the text of this revision. Nothing was done.';
}
