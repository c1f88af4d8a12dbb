import { and, eq, inArray, isNull, ne } from 'drizzle-orm';
import { type Failure, mayDo, ROLES } from '#api';
import type { Compiled } from '#recipe';
import { fail, ok } from '#text';
import type { Db } from '../database/open.ts';
import { draft, review, user } from '../database/schema.ts';
import type { Service, ServiceRow, SignedInContext } from '../http/context.ts';
import { queueMail } from '../mail/outbox.ts';
import { mayWriteDraft, whyNotDecide } from './access.ts';
import { writeAudit } from './audit.ts';
import { compileFacts, documentToPublish } from './compile-facts.ts';
import { type Seen, seenText } from './draft-conflict.ts';
import { findDraft, type LoadedDraft, loadDraft, lockDraft, readDraftText } from './draft-rows.ts';
import { pinRevision } from './draft-saves.ts';
import { nameOf, requireDraft } from './drafts.ts';
import { reserveNames } from './recipe-names.ts';
import { hashText } from './recipe-text.ts';
import { readTeam } from './team.ts';

/** Compiles a draft's text with today's facts. Asked for in `before` as well, so that the transaction finds the answer ready. */
export async function compileDraft(context: SignedInContext, draft: LoadedDraft, text: string): Promise<Compiled> {
  return context.compile(text, await compileFacts(context.db, draft.fixedSlug));
}

/** Compiles outside the transaction what the act will compile inside it. */
export async function compileAhead(context: SignedInContext, { id }: { readonly id: string }): Promise<void> {
  const found = await loadDraft(context.db, id);
  if (found !== null) await compileDraft(context, found, await readDraftText(context.db, id));
}

const send: Service<'drafts.send'> = async (context, input) => {
  const { db, person, now } = context;
  await lockDraft(db, input.id);
  const found = await findDraft(db, person, input.id);
  if (!found.ok) return found;
  const before = found.value;
  if (!mayWriteDraft(person, before))
    return fail({ kind: 'forbidden', detail: 'The people who write a draft send it.' });
  const seen = await seenText(db, before, input, 'draft');
  if (!seen.ok) return seen;
  const document = documentToPublish(await compileDraft(context, before, seen.value));
  if (!document.ok) return document;
  const names = await reserveNames(db, before.recipeId, seen.value, document.value.front);
  if (!names.ok) return names;
  await db
    .update(draft)
    .set({
      state: 'in-review',
      sentBy: person.id,
      sentAt: now,
      sentHash: hashText(seen.value),
      note: input.note,
      updatedAt: now,
    })
    .where(eq(draft.id, input.id));
  await pinRevision(db, input.id, before.revision);
  await recordAct(context, input, 'sent', input.note);
  const after = await requireDraft(db, input.id);
  await writeAudit(context, { act: 'send for review', about: nameOf(after), detail: `revision ${after.revision}` });
  for (const editor of await whoMayDecide(db, after, person.id)) {
    const facts = { kind: 'review-asked', by: person.name, recipe: nameOf(after), note: input.note } as const;
    await queueMail(context, { recipient: editor.email, userId: editor.id }, facts);
  }
  return ok(after.row);
};
export const sendDraft: ServiceRow<'drafts.send'> = { act: send, before: compileAhead };

export const takeBack: Service<'drafts.takeBack'> = async (context, input) => {
  const { db, person } = context;
  await lockDraft(db, input.id);
  const found = await findDraft(db, person, input.id);
  if (!found.ok) return found;
  const seen = await seenText(db, found.value, input, 'in-review');
  if (!seen.ok) return seen;
  if (found.value.sentById !== person.id) {
    const sender = found.value.row.sentBy?.name ?? 'Somebody else';
    return fail({ kind: 'forbidden', detail: `${sender} sent this draft, and the sender takes it back.` });
  }
  await backToWriting(context, input, 'taken-back', '');
  await writeAudit(context, { act: 'take back from review', about: nameOf(found.value) });
  return ok((await requireDraft(db, input.id)).row);
};

export const sendBack: Service<'reviews.sendBack'> = async (context, input) => {
  const { db, person } = context;
  await lockDraft(db, input.id);
  const found = await findDraft(db, person, input.id);
  if (!found.ok) return found;
  const refused = await refuseDecision(context, found.value);
  if (refused !== null) return fail(refused);
  const seen = await seenText(db, found.value, input, 'in-review');
  if (!seen.ok) return seen;
  await backToWriting(context, input, 'sent-back', input.reason);
  await writeAudit(context, { act: 'send back', about: nameOf(found.value), detail: input.reason });
  for (const writer of await whoWrites(db, found.value, person.id)) {
    const facts = { kind: 'sent-back', by: person.name, recipe: nameOf(found.value), reason: input.reason } as const;
    await queueMail(context, { recipient: writer.email, userId: writer.id }, facts);
  }
  return ok((await requireDraft(db, input.id)).row);
};

/** Tells why a person may not decide on this draft; null for who may. */
export async function refuseDecision({ db, person }: SignedInContext, found: LoadedDraft): Promise<Failure | null> {
  const { allowSelfSignOff } = await readTeam(db);
  const detail = whyNotDecide(person, { writerIds: found.row.writtenBy.map((p) => p.id), allowSelfSignOff });
  return detail === null ? null : { kind: 'forbidden', detail };
}

async function backToWriting(
  context: SignedInContext,
  input: Seen & { readonly id: string },
  act: 'taken-back' | 'sent-back',
  note: string,
): Promise<void> {
  await context.db
    .update(draft)
    .set({ state: 'draft', sentBy: null, sentAt: null, sentHash: null, updatedAt: context.now })
    .where(eq(draft.id, input.id));
  await recordAct(context, input, act, note);
}

/** One row for each sending and each decision. */
export async function recordAct(
  { db, ids, person, now }: SignedInContext,
  { id, revision, hash }: Seen & { readonly id: string },
  act: (typeof review.$inferInsert)['act'],
  note: string,
): Promise<void> {
  await db
    .insert(review)
    .values({ id: ids.uuid(), draftId: id, act, userId: person.id, revision, textHash: hash, note, at: now });
}

interface Addressee {
  readonly id: string;
  readonly email: string;
}

/** Editors who could sign this off: active, not the sender, and not a writer of it. */
async function whoMayDecide(db: Db, found: LoadedDraft, senderId: string): Promise<readonly Addressee[]> {
  const editors = ROLES.filter((role) => mayDo(role, 'decide reviews'));
  const active = await db
    .select({ id: user.id, email: user.email })
    .from(user)
    .where(and(inArray(user.role, editors), isNull(user.deactivatedAt), ne(user.id, senderId)));
  return active.filter((p) => !found.row.writtenBy.some((writer) => writer.id === p.id));
}

/** Everybody whose work this is: owner, sender, writers; active, and not the acting person. */
export async function whoWrites(db: Db, found: LoadedDraft, actingId: string): Promise<readonly Addressee[]> {
  const writers = [
    found.ownerId,
    ...(found.sentById === null ? [] : [found.sentById]),
    ...found.row.writtenBy.map((p) => p.id),
  ];
  return db
    .select({ id: user.id, email: user.email })
    .from(user)
    .where(and(inArray(user.id, [...new Set(writers)]), isNull(user.deactivatedAt), ne(user.id, actingId)));
}
