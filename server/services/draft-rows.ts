import { desc, eq, type SQL, sql } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import type { DraftRow, Failure, PersonRef } from '#api';
import { fail, ok, type Result } from '#text';
import type { Db } from '../database/open.ts';
import { draft, recipe, user } from '../database/schema.ts';
import type { Person } from '../http/context.ts';
import { type DraftFacts, maySeeDraft } from './access.ts';
import { frontKey, HEAD_LENGTH } from './recipe-text.ts';

/** A draft with what decides who may do what to it; the text comes by `readDraftText`. */
export interface LoadedDraft extends DraftFacts {
  readonly id: string;
  readonly recipeId: string;
  readonly slugFixed: boolean;
  readonly fixedSlug: string | null;
  readonly revision: number;
  readonly sentById: string | null;
  /** Invited once and taken off again. */
  readonly removedIds: readonly string[];
  readonly row: DraftRow;
}

const owner = alias(user, 'owner');
const sender = alias(user, 'sender');

const people = (table: SQL, more: SQL) =>
  sql<
    readonly PersonRef[]
  >`coalesce((select jsonb_agg(jsonb_build_object('id', p.id, 'name', p.name) order by p.name, p.id)
    from ${table} x join "user" p on p.id = x.user_id where x.draft_id = ${draft.id} ${more}), '[]'::jsonb)`;

/** Loads drafts that fit a condition, last changed first. Reads the head of each text only. */
export async function loadDrafts(db: Db, where: SQL | undefined): Promise<readonly LoadedDraft[]> {
  const found = await db
    .select({
      id: draft.id,
      recipeId: draft.recipeId,
      state: draft.state,
      revision: draft.revision,
      from: draft.fromVersion,
      ownerId: draft.ownerId,
      ownerName: owner.name,
      note: draft.note,
      sentById: draft.sentBy,
      sentByName: sender.name,
      sentAt: draft.sentAt,
      updatedAt: draft.updatedAt,
      head: sql<string>`left(${draft.text}, ${HEAD_LENGTH})`,
      slug: recipe.slug,
      slugFixed: recipe.slugFixed,
      number: recipe.number,
      authors: people(sql`draft_author`, sql`and x.removed_at is null`),
      removed: people(sql`draft_author`, sql`and x.removed_at is not null`),
      writers: people(sql`draft_writer`, sql``),
      // Of a draft that is being written the last act was not a sending, so that two acts within one millisecond keep their order.
      lastAct: sql<{ by: string; at: string; reason: string; act: string } | null>`(
        select jsonb_build_object('by', p.name, 'at', x.at, 'reason', x.note, 'act', x.act)
        from review x join "user" p on p.id = x.user_id where x.draft_id = ${draft.id} and x.act <> 'sent'
        order by x.at desc, x.id limit 1)`,
    })
    .from(draft)
    .innerJoin(recipe, eq(recipe.id, draft.recipeId))
    .innerJoin(owner, eq(owner.id, draft.ownerId))
    .leftJoin(sender, eq(sender.id, draft.sentBy))
    .where(where)
    .orderBy(desc(draft.updatedAt), draft.id);
  return found.map((d) => ({
    id: d.id,
    recipeId: d.recipeId,
    state: d.state,
    slugFixed: d.slugFixed,
    fixedSlug: d.slugFixed ? d.slug : null,
    revision: d.revision,
    ownerId: d.ownerId,
    authorIds: d.authors.map((p) => p.id),
    removedIds: d.removed.map((p) => p.id),
    sentById: d.sentById,
    row: {
      id: d.id,
      title: frontKey(d.head, 'title'),
      number: d.number ?? '',
      slug: d.slug ?? frontKey(d.head, 'slug'),
      state: d.state,
      revision: d.revision,
      from: d.from,
      owner: { id: d.ownerId, name: d.ownerName },
      authors: [...d.authors],
      writtenBy: [...d.writers],
      updatedAt: d.updatedAt.toISOString(),
      sentBy: d.sentById === null ? null : { id: d.sentById, name: d.sentByName ?? '' },
      sentAt: d.sentAt?.toISOString() ?? null,
      note: d.note,
      sentBack: d.state === 'draft' && d.lastAct?.act === 'sent-back' ? sentBack(d.lastAct) : null,
    },
  }));
}

function sentBack(act: { by: string; at: string; reason: string }): DraftRow['sentBack'] {
  return { by: act.by, at: new Date(act.at).toISOString(), reason: act.reason };
}

/** Loads one draft; null when there is none. */
export async function loadDraft(db: Db, id: string): Promise<LoadedDraft | null> {
  const [found] = await loadDrafts(db, eq(draft.id, id));
  return found ?? null;
}

/** Takes the draft's row for the rest of the transaction, so that of two acts at once the second sees what the first did. */
export async function lockDraft(db: Db, id: string): Promise<void> {
  await db.select({ id: draft.id }).from(draft).where(eq(draft.id, id)).for('update');
}

/** Loads a draft for somebody; one that the person may not see is not found, like one that does not exist. */
export async function findDraft(db: Db, person: Person, id: string): Promise<Result<LoadedDraft, Failure>> {
  const found = await loadDraft(db, id);
  return found !== null && maySeeDraft(person, found) ? ok(found) : fail(noDraft);
}

export async function readDraftText(db: Db, id: string): Promise<string> {
  const [found] = await db.select({ text: draft.text }).from(draft).where(eq(draft.id, id));
  return found?.text ?? '';
}

export const noDraft: Failure = { kind: 'not-found', detail: 'There is no such draft, or it is not open to you.' };
