import { and, desc, eq, inArray, isNotNull, sql } from 'drizzle-orm';
import { fail, ok } from '#text';
import type { Db } from '../database/open.ts';
import { draftSave, user } from '../database/schema.ts';
import type { Service } from '../http/context.ts';
import { maySeeDraft } from './access.ts';
import { loadDraft, noDraft } from './draft-rows.ts';

const MINUTE = 60_000;
const HOUR = 60 * MINUTE;
const DAY = 24 * HOUR;
/** A longer pause between two saves of one person ends a sitting. Common practice, no source. */
const SITTING_GAP = 30 * MINUTE;

/** What the keeping rule looks at. */
export interface KeptSave {
  readonly id: string;
  readonly userId: string;
  readonly at: Date;
  /** Null when it was kept to the side. */
  readonly revision: number | null;
  /** Sent, lost a conflict, or the parent of one. */
  readonly pinned: boolean;
}

/**
 * Names the saves of one draft that may go: all of the last hour stay, then the last of every five minutes for 7 days, and the last of every
 * sitting for 90; pinned ones and the newest always. Each person's saves are judged on their own. Running it again later never drops
 * a save that one later run alone would have kept.
 * Cost: linear in the saves, after sorting.
 */
export function savesToDrop(saves: readonly KeptSave[], now: Date): readonly string[] {
  const newestFirst = [...saves].sort(newestFirstOrder);
  const buckets = new Set<string>();
  const earliestSeen = new Map<string, number>();
  const dropped: string[] = [];
  for (const [index, save] of newestFirst.entries()) {
    const time = save.at.getTime();
    const age = now.getTime() - time;
    const bucket = `${save.userId} ${Math.floor(time / (5 * MINUTE))}`;
    const later = earliestSeen.get(save.userId);
    const lastOfFive = !buckets.has(bucket);
    const lastOfSitting = later === undefined || later - time > SITTING_GAP;
    buckets.add(bucket);
    earliestSeen.set(save.userId, time);
    const stays =
      index === 0 || save.pinned || age <= HOUR || (age <= 7 * DAY && lastOfFive) || (age <= 90 * DAY && lastOfSitting);
    if (!stays) dropped.push(save.id);
  }
  return dropped;
}

/** Of two saves within one millisecond the one with the higher revision is the newer. */
function newestFirstOrder(a: KeptSave, b: KeptSave): number {
  return b.at.getTime() - a.at.getTime() || (b.revision ?? -1) - (a.revision ?? -1);
}

/** Drops what the keeping rule lets go, draft by draft. Gives how many went. Run by a job, not by a save. */
export async function pruneDraftSaves(db: Db, now: Date): Promise<number> {
  const drafts = await db.selectDistinct({ id: draftSave.draftId }).from(draftSave);
  let count = 0;
  for (const { id } of drafts) {
    const saves = await db
      .select({
        id: draftSave.id,
        userId: draftSave.userId,
        at: draftSave.createdAt,
        revision: draftSave.revision,
        pinned: draftSave.pinned,
      })
      .from(draftSave)
      .where(eq(draftSave.draftId, id));
    const gone = savesToDrop(saves, now);
    // A save may have been pinned since it was read: its parent's conflict came in between.
    if (gone.length > 0) {
      await db.delete(draftSave).where(and(inArray(draftSave.id, [...gone]), eq(draftSave.pinned, false)));
    }
    count += gone.length;
  }
  return count;
}

/** Lists saves, newest first: all of them for who may see the draft, their own for who no longer may. */
export const listSaves: Service<'drafts.saves'> = async ({ db, person }, { id }) => {
  const draft = await loadDraft(db, id);
  if (draft === null) return fail(noDraft);
  const seesAll = maySeeDraft(person, draft);
  const found = await db
    .select({
      saveId: draftSave.id,
      at: draftSave.createdAt,
      userId: draftSave.userId,
      name: user.name,
      revision: draftSave.revision,
    })
    .from(draftSave)
    .innerJoin(user, eq(user.id, draftSave.userId))
    .where(and(eq(draftSave.draftId, id), seesAll ? undefined : eq(draftSave.userId, person.id)))
    .orderBy(desc(draftSave.createdAt), sql`${draftSave.revision} desc nulls last`);
  if (!seesAll && found.length === 0) return fail(noDraft);
  return ok({
    saves: found.map((save) => ({
      saveId: save.saveId,
      at: save.at.toISOString(),
      by: { id: save.userId, name: save.name },
      revision: save.revision,
      kept: save.revision === null ? ('to the side' as const) : ('on the draft' as const),
    })),
  });
};

export const readSave: Service<'drafts.readSave'> = async ({ db, person }, { id, saveId }) => {
  const draft = await loadDraft(db, id);
  const [save] = await db
    .select()
    .from(draftSave)
    .where(and(eq(draftSave.id, saveId), eq(draftSave.draftId, id)));
  if (draft === null || save === undefined) return fail(noSave);
  if (!maySeeDraft(person, draft) && save.userId !== person.id) return fail(noSave);
  return ok({ text: save.text, at: save.createdAt.toISOString() });
};

const noSave = { kind: 'not-found', detail: 'There is no such save, or it is not open to you.' } as const;

/** Keeps the save of a revision for good, because somebody sent it. */
export async function pinRevision(db: Db, draftId: string, revision: number): Promise<void> {
  await db
    .update(draftSave)
    .set({ pinned: true })
    .where(and(eq(draftSave.draftId, draftId), eq(draftSave.revision, revision), isNotNull(draftSave.revision)));
}
