import { and, eq, inArray, isNotNull, isNull, sql } from 'drizzle-orm';
import { type Failure, mayDo } from '#api';
import { fail, ok, type Result } from '#text';
import type { Db } from '../database/open.ts';
import {
  draft,
  draftAuthor,
  draftSave,
  draftWriter,
  recipe,
  recipeOwner,
  recipeVersion,
  user,
} from '../database/schema.ts';
import type { Input, Service, SignedInContext } from '../http/context.ts';
import { mayManageDraft, maySeeDraft, mayWriteDraft } from './access.ts';
import { writeAudit } from './audit.ts';
import { compileFacts } from './compile-facts.ts';
import { seenText } from './draft-conflict.ts';
import { findDraft, type LoadedDraft, loadDraft, loadDrafts, lockDraft, readDraftText } from './draft-rows.ts';
import { releaseNames } from './recipe-names.ts';
import { frontKey, hashText } from './recipe-text.ts';

/** Lists open drafts that this person may see. */
export const listDrafts: Service<'drafts.list'> = async ({ db, person }) => {
  const open = await loadDrafts(db, inArray(draft.state, ['draft', 'in-review']));
  return ok({ drafts: open.filter((d) => maySeeDraft(person, d)).map((d) => d.row) });
};

/** Starts a recipe, or the one open change of a recipe; who brings a text of their own counts as its writer. */
export const startDraft: Service<'drafts.start'> = async (context, input) => {
  const origin = input.changes === undefined ? await newRecipe(context) : await changedRecipe(context, input.changes);
  if (!origin.ok) return origin;
  const { recipeId, base } = origin.value;
  const text = input.text ?? base?.text ?? '';
  const made = await insertDraft(context, { recipeId, fromVersion: base?.version ?? null, text });
  if (made === null) return openDraft(context, recipeId);
  if (input.text !== undefined && input.text !== '' && input.text !== base?.text)
    await countWriters(context, made, input.text);
  await writeAudit(context, {
    act: base === null ? 'start a recipe' : 'start a change',
    about: frontKey(text, 'title') || 'a draft without a title',
  });
  return ok({ id: made, already: false });
};

interface Origin {
  readonly recipeId: string;
  readonly base: { readonly version: number; readonly text: string } | null;
}

async function newRecipe({ db, ids, person, now }: SignedInContext): Promise<Result<Origin, Failure>> {
  const recipeId = ids.uuid();
  await db.insert(recipe).values({ id: recipeId, createdAt: now });
  await db.insert(recipeOwner).values({ recipeId, userId: person.id });
  return ok({ recipeId, base: null });
}

async function changedRecipe({ db }: SignedInContext, slug: string): Promise<Result<Origin, Failure>> {
  const [found] = await db
    .select({ recipeId: recipe.id, version: recipeVersion.version, text: recipeVersion.text })
    .from(recipe)
    .innerJoin(recipeVersion, eq(recipeVersion.recipeId, recipe.id))
    .where(eq(recipe.slug, slug))
    .orderBy(sql`${recipeVersion.state} = 'published' desc`, sql`${recipeVersion.version} desc`)
    .limit(1);
  if (found === undefined) return fail({ kind: 'not-found', detail: `There is no recipe "${slug}".` });
  return ok({ recipeId: found.recipeId, base: { version: found.version, text: found.text } });
}

/** Gives null when the recipe has an open draft already. The text stands as revision 0, the parent of the first saves. */
async function insertDraft(
  { db, ids, person, now }: SignedInContext,
  { recipeId, fromVersion, text }: { recipeId: string; fromVersion: number | null; text: string },
): Promise<string | null> {
  const [made] = await db
    .insert(draft)
    .values({ id: ids.uuid(), recipeId, fromVersion, text, ownerId: person.id, createdAt: now, updatedAt: now })
    .onConflictDoNothing()
    .returning({ id: draft.id });
  if (made === undefined) return null;
  await db.insert(draftSave).values({
    id: ids.uuid(),
    draftId: made.id,
    userId: person.id,
    baseRevision: 0,
    revision: 0,
    text,
    pinned: true,
    createdAt: now,
  });
  return made.id;
}

async function openDraft({ db, person }: SignedInContext, recipeId: string) {
  const [open] = await loadDrafts(db, and(eq(draft.recipeId, recipeId), inArray(draft.state, ['draft', 'in-review'])));
  if (open === undefined) throw new Error(`recipe ${recipeId} refused a draft but has none open`);
  if (maySeeDraft(person, open)) return ok({ id: open.id, already: true });
  const detail = `${open.row.owner.name} is changing this recipe, and a recipe has one open change. Ask to be invited.`;
  return fail<Failure>({ kind: 'forbidden', detail });
}

/** The starting person, and whoever's text this is: a text that was stored to the side or put aside with its draft. */
async function countWriters({ db, person }: SignedInContext, draftId: string, text: string): Promise<void> {
  const earlier = await db
    .selectDistinct({ userId: draftSave.userId })
    .from(draftSave)
    .innerJoin(draft, eq(draft.id, draftSave.draftId))
    .where(and(eq(draftSave.text, text), sql`(${isNotNull(draftSave.aside)} or ${draft.state} = 'discarded')`));
  const writers = new Set([person.id, ...earlier.map((save) => save.userId)]);
  await db.insert(draftWriter).values([...writers].map((userId) => ({ draftId, userId })));
}

export const readDraft: Service<'drafts.read'> = async ({ db, person }, { id }) => {
  const found = await findDraft(db, person, id);
  if (!found.ok) return found;
  const text = await readDraftText(db, id);
  const { topics, ...facts } = await compileFacts(db, found.value.fixedSlug);
  return ok({
    draft: found.value.row,
    text,
    hash: hashText(text),
    mayWrite: found.value.state === 'draft' && mayWriteDraft(person, found.value),
    mayTakeBack: found.value.state === 'in-review' && found.value.sentById === person.id,
    base: await baseOf(db, found.value),
    facts: { ...facts, recipes: mutable(facts.recipes), topics: [...topics] },
  });
};

function mutable(recipes: Readonly<Record<string, readonly number[]>>): Record<string, number[]> {
  return Object.fromEntries(Object.entries(recipes).map(([slug, versions]) => [slug, [...versions]]));
}

async function baseOf(db: Db, { recipeId, row }: LoadedDraft) {
  if (row.from === null) return null;
  const [base] = await db
    .select({ version: recipeVersion.version, text: recipeVersion.text })
    .from(recipeVersion)
    .where(and(eq(recipeVersion.recipeId, recipeId), eq(recipeVersion.version, row.from)));
  return base ?? null;
}

/** Says who writes beside the owner. Whoever is taken off keeps their place in the list as removed: late saves are kept to the side. */
export const setAuthors: Service<'drafts.setAuthors'> = async (context, input) => {
  const { db, person, now } = context;
  await lockDraft(db, input.id);
  const found = await findDraft(db, person, input.id);
  if (!found.ok) return found;
  if (!mayManageDraft(person, found.value))
    return fail({ kind: 'forbidden', detail: 'The owner of a draft invites its authors.' });
  if (found.value.state !== 'draft' && found.value.state !== 'in-review') {
    const detail = 'This draft is closed, so nobody can be invited to it any more.';
    return fail({ kind: 'stale', detail, extra: { state: found.value.state } });
  }
  const wanted = [...new Set(input.personIds)].filter((id) => id !== found.value.ownerId);
  const refused = await refuseAuthors(db, wanted);
  if (refused !== null) return fail(refused);
  const gone = found.value.authorIds.filter((id) => !wanted.includes(id));
  if (gone.length > 0) {
    const whose = and(
      eq(draftAuthor.draftId, input.id),
      inArray(draftAuthor.userId, gone),
      isNull(draftAuthor.removedAt),
    );
    await db.update(draftAuthor).set({ removedAt: now }).where(whose);
  }
  if (wanted.length > 0) {
    await db
      .insert(draftAuthor)
      .values(wanted.map((userId) => ({ draftId: input.id, userId })))
      .onConflictDoUpdate({ target: [draftAuthor.draftId, draftAuthor.userId], set: { removedAt: null } });
  }
  const after = await requireDraft(db, input.id);
  const names = after.row.authors.map((author) => author.name).join(', ');
  await writeAudit(context, {
    act: 'set the authors of a draft',
    about: nameOf(after),
    detail: names || 'nobody beside the owner',
  });
  return ok(after.row);
};

async function refuseAuthors(db: Db, wanted: readonly string[]): Promise<Failure | null> {
  const found = await db
    .select({ id: user.id, name: user.name, role: user.role })
    .from(user)
    .where(and(inArray(user.id, [...wanted]), isNull(user.deactivatedAt)));
  const fields = wanted.flatMap((id, index) => {
    const someone = found.find((p) => p.id === id);
    if (someone !== undefined && mayDo(someone.role, 'write drafts')) return [];
    const message = someone
      ? `${someone.name} is a reader, but writing needs an author.`
      : 'There is no such person in the team.';
    return [{ field: `personIds.${index}`, message }];
  });
  return fields.length === 0 ? null : { kind: 'invalid', detail: 'Not everybody named can write.', fields };
}

/** Puts a draft aside. Its saves stay by the keeping rule; names that it reserved and never published under are free again. */
export const discardDraft: Service<'drafts.discard'> = async (context, input: Input<'drafts.discard'>) => {
  const { db, person, now } = context;
  await lockDraft(db, input.id);
  const found = await findDraft(db, person, input.id);
  if (!found.ok) return found;
  if (!mayManageDraft(person, found.value))
    return fail({ kind: 'forbidden', detail: 'The owner of a draft or an editor puts it aside.' });
  const seen = await seenText(db, found.value, input, 'draft');
  if (!seen.ok) return seen;
  await db.update(draft).set({ state: 'discarded', updatedAt: now }).where(eq(draft.id, input.id));
  await releaseNames(db, found.value.recipeId);
  await writeAudit(context, {
    act: 'put a draft aside',
    about: nameOf(found.value),
    detail: `revision ${found.value.revision}`,
  });
  return ok({});
};

/** What a draft is called in the audit log and in mails. */
export function nameOf({ row }: LoadedDraft): string {
  const title = row.title || 'a draft without a title';
  return row.number === '' ? title : `${row.number} ${title}`;
}

export async function requireDraft(db: Db, id: string): Promise<LoadedDraft> {
  const found = await loadDraft(db, id);
  if (found === null) throw new Error(`draft ${id} is gone inside its own transaction`);
  return found;
}
