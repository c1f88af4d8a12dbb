import { and, asc, eq, isNull, notExists, sql } from 'drizzle-orm';
import { type Me, mayDo } from '#api';
import { fail, ok } from '#text';
import type { Db } from '../database/open.ts';
import { draft, draftWriter, notice } from '../database/schema.ts';
import type { Person, Service } from '../http/context.ts';
import { countActiveAdmins } from './accounts/admins.ts';
import { readTeam } from './team.ts';

/** Tells who is signed in and what every page needs; answers the same to everybody who is not. */
export const readMe: Service<'me.read'> = async ({ db, person, settings }) => {
  const { name, timeZone, allowSelfSignOff } = await readTeam(db);
  const needsSetUp = person === null && (await countActiveAdmins(db)) === 0;
  return ok({
    person: person && { id: person.id, name: person.name, email: person.email, role: person.role },
    team: { name, timeZone, allowSelfSignOff, publicUrl: settings.publicUrl, needsSetUp },
    notices: person ? await unseenNotices(db, person) : [],
    reviewsWaiting: person ? await reviewsWaiting(db, person, allowSelfSignOff) : 0,
    release: settings.release,
  });
};

async function unseenNotices(db: Db, person: Person): Promise<Me['notices']> {
  const rows = await db
    .select()
    .from(notice)
    .where(and(eq(notice.userId, person.id), isNull(notice.seenAt)))
    .orderBy(asc(notice.createdAt), asc(notice.id));
  return rows.map(({ id, kind, text, createdAt }) => ({ id, kind, text, at: createdAt.toISOString() }));
}

/** How many drafts this person could decide now: in review and, unless the team allows it, with no word of their own. */
async function reviewsWaiting(db: Db, person: Person, allowSelfSignOff: boolean): Promise<number> {
  if (!mayDo(person.role, 'decide reviews')) return 0;
  const own = db
    .select({ one: sql`1` })
    .from(draftWriter)
    .where(and(eq(draftWriter.draftId, draft.id), eq(draftWriter.userId, person.id)));
  return db.$count(draft, and(eq(draft.state, 'in-review'), allowSelfSignOff ? undefined : notExists(own)));
}

export const dismissNotice: Service<'me.dismissNotice'> = async ({ db, person, now }, { id }) => {
  const seen = await db
    .update(notice)
    .set({ seenAt: now })
    .where(and(eq(notice.id, id), eq(notice.userId, person.id)))
    .returning({ id: notice.id });
  return seen.length > 0 ? ok({}) : fail({ kind: 'not-found', detail: 'There is no such notice for you.' });
};
