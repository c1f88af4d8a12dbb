import { and, eq, sql } from 'drizzle-orm';
import { type Answer, type Failure, mayDo } from '#api';
import { fail, ok, type Result } from '#text';
import type { Db } from '../database/open.ts';
import { rows } from '../database/rows.ts';
import { draftSave } from '../database/schema.ts';
import type { Input, Person, Service, SignedInContext } from '../http/context.ts';
import { couldOnceWrite, maySeeDraft, mayWriteDraft } from './access.ts';
import { draftNow, textAt } from './draft-conflict.ts';
import { type LoadedDraft, loadDraft, lockDraft, noDraft } from './draft-rows.ts';
import { frontKey, hashText } from './recipe-text.ts';

type Save = Input<'drafts.saveText'>;

/**
 * Saves the text of a draft. The saved text is the only copy the server has of what was typed, so whoever could ever write this draft never
 * loses a word: what cannot go on the draft is stored to the side and answered `stale` with both texts. The frame commits that answer too.
 *
 * Cost: one statement when it goes on the draft, which is nearly always.
 */
export const saveText: Service<'drafts.saveText'> = async (context, input) => {
  const { db, person, now } = context;
  const first = await putOnDraft(db, person, input, now);
  if (first !== null) return ok(saved(input.text, first, now));
  await lockDraft(db, input.id);
  const repeated = await earlierSave(db, input.saveId);
  if (repeated !== null) return repeatAnswer(context, input, repeated);
  // The draft may have come free between the first try and the lock.
  const second = await putOnDraft(db, person, input, now);
  if (second !== null) return ok(saved(input.text, second, now));
  return putAside(context, input);
};

function saved(text: string, revision: number, at: Date): Answer<'drafts.saveText'> {
  return { revision, hash: hashText(text), at: at.toISOString() };
}

/**
 * Puts a text on the draft if its state, its revision and the person allow it; gives the new revision or null.
 * Whoever changed the text counts as its writer; so does whoever's text, once stored to the side, is hereby taken back in.
 * The first change by a person is one line of the audit log.
 */
async function putOnDraft(db: Db, person: Person, input: Save, now: Date): Promise<number | null> {
  if (!mayDo(person.role, 'write drafts')) return null;
  const title = frontKey(input.text, 'title');
  const [moved] = await rows<{ revision: number }>(
    db,
    sql`
    with given as (
      select ${input.id}::uuid as draft_id, ${input.saveId}::text as save_id, ${person.id}::text as person,
        ${input.baseRevision}::int as base, ${input.text}::text as text, ${now.toISOString()}::timestamptz as at),
    before as (select d.text from draft d, given g where d.id = g.draft_id),
    moved as (
      update draft d set text = g.text, revision = d.revision + 1, updated_at = g.at
      from given g
      where d.id = g.draft_id and d.state = 'draft' and d.revision = g.base
        and (d.owner_id = g.person or exists (
          select 1 from draft_author a where a.draft_id = d.id and a.user_id = g.person and a.removed_at is null))
        and not exists (select 1 from draft_save s where s.id = g.save_id)
      returning d.revision),
    kept as (
      insert into draft_save (id, draft_id, user_id, base_revision, revision, text, created_at)
      select g.save_id, g.draft_id, g.person, g.base, m.revision, g.text, g.at from given g, moved m),
    wrote as (
      insert into draft_writer (draft_id, user_id)
      select g.draft_id, w.user_id from given g, moved m, lateral (
        select g.person as user_id
        union select s.user_id from draft_save s where s.draft_id = g.draft_id and s.aside is not null and s.text = g.text) w
      where g.text <> (select b.text from before b)
      on conflict do nothing returning user_id),
    noted as (
      insert into audit_event (at, user_id, by_name, act, about)
      select g.at, w.user_id, u.name, 'edit a draft', ${title || 'a draft without a title'}::text
      from wrote w join "user" u on u.id = w.user_id, given g)
    select revision from moved`,
  );
  return moved?.revision ?? null;
}

interface EarlierSave {
  readonly draftId: string;
  readonly userId: string;
  readonly baseRevision: number;
  readonly revision: number | null;
  readonly text: string;
  readonly createdAt: Date;
}

async function earlierSave(db: Db, saveId: string): Promise<EarlierSave | null> {
  const [found] = await db.select().from(draftSave).where(eq(draftSave.id, saveId));
  return found ?? null;
}

/** A repeat gets what was stored, even if the person may no longer write. */
async function repeatAnswer(
  context: SignedInContext,
  input: Save,
  earlier: EarlierSave,
): Promise<Result<Answer<'drafts.saveText'>, Failure>> {
  if (earlier.userId !== context.person.id || earlier.draftId !== input.id) {
    const message = 'This id was used for another save; each save needs its own.';
    return fail({ kind: 'invalid', detail: 'One field needs another value.', fields: [{ field: 'saveId', message }] });
  }
  if (earlier.revision !== null) return ok(saved(earlier.text, earlier.revision, earlier.createdAt));
  const draft = await loadDraft(context.db, input.id);
  return draft === null ? fail(noDraft) : conflict(context, input, draft);
}

/** Stores a text to the side with its parent, both kept for good, for who may write this draft or ever could. */
async function putAside(context: SignedInContext, input: Save): Promise<Result<Answer<'drafts.saveText'>, Failure>> {
  const { db, person, now } = context;
  const draft = await loadDraft(db, input.id);
  if (draft === null) return fail(noDraft);
  const mayWrite = mayWriteDraft(person, draft);
  if (!mayWrite && !couldOnceWrite(person, draft)) return fail(maySeeDraft(person, draft) ? notAnAuthor : noDraft);
  const aside = !mayWrite ? 'not-allowed' : draft.state === 'draft' ? 'stale' : draft.state;
  await db.insert(draftSave).values({
    id: input.saveId,
    draftId: draft.id,
    userId: person.id,
    baseRevision: input.baseRevision,
    aside,
    text: input.text,
    pinned: true,
    createdAt: now,
  });
  await db
    .update(draftSave)
    .set({ pinned: true })
    .where(and(eq(draftSave.draftId, draft.id), eq(draftSave.revision, input.baseRevision)));
  return conflict(context, input, draft);
}

/** Both texts; who may no longer see the draft gets back only the text they started from. */
async function conflict(
  { db, person }: SignedInContext,
  { saveId, baseRevision }: Save,
  draft: LoadedDraft,
): Promise<Result<never, Failure>> {
  if (maySeeDraft(person, draft)) {
    const detail =
      draft.state === 'draft'
        ? 'The draft has moved on; your text is kept beside it.'
        : 'The draft can no longer be written; your text is kept beside it.';
    return fail({ kind: 'stale', detail, extra: { saveId, ...(await draftNow(db, draft, baseRevision)) } });
  }
  const text = await textAt(db, draft.id, baseRevision);
  const own = { state: draft.state, revision: baseRevision, text, baseText: text, savedBy: '' };
  const detail = 'You can no longer write this draft; your text is kept and stays open to you.';
  return fail({ kind: 'stale', detail, extra: { saveId, ...own } });
}

const notAnAuthor: Failure = {
  kind: 'forbidden',
  detail: 'Its owner and the people they invite write this draft. Ask to be invited.',
};
