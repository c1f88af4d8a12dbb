import { and, asc, eq, isNull, sql } from 'drizzle-orm';
import type { Failure, Role, Person as ShownPerson } from '#api';
import { fail, ok, type Result } from '#text';
import type { Db } from '../../database/open.ts';
import { knownBrowser, link, notice, session, user } from '../../database/schema.ts';
import type { Context, Service, SignedInContext } from '../../http/context.ts';
import { maySeeAddresses } from '../access.ts';
import { type Actor, OPERATOR, writeAudit } from '../audit.ts';
import { countActiveAdmins, lockAdmins } from './admins.ts';
import { linkFor, openInvitationOf } from './invitations.ts';
import { type MadeLink, makeLink } from './links.ts';
import { findByEmail, type UserRow } from './people-rows.ts';
import { refusedField } from './refusals.ts';

const LINK_LIFE_MS = 24 * 3600 * 1000;
const NOBODY: Failure = { kind: 'not-found', detail: 'There is no such person.' };

/** Everybody who has or had an account: the work of deactivated people stays, signed with their name. */
export const listPeople: Service<'people.list'> = async ({ db, person }) => {
  const rows = await db
    .select({ row: user, lastSeen: lastSeen() })
    .from(user)
    .orderBy(asc(sql`lower(${user.name})`), asc(user.id));
  return ok({ people: rows.map(({ row, lastSeen: at }) => shown(row, at, maySeeAddresses(person))) });
};

/** The last sign-in, or the last day on which a session was prolonged. */
function lastSeen() {
  return sql<Date | string | null>`greatest(
    (select max(${session.updatedAt}) from ${session} where ${session.userId} = ${user.id}),
    (select max(${knownBrowser.lastAt}) from ${knownBrowser} where ${knownBrowser.userId} = ${user.id}))`;
}

/**
 * Changes a role, deactivates or activates again. Deactivating ends the person's sessions and links.
 * When it cannot: `invalid` at `role` or `active`, if nobody who is active would be left as admin.
 */
export const updatePerson: Service<'people.update'> = async (context, { id, role, active }) => {
  const { db, now } = context;
  await lockAdmins(db);
  const [before] = await db.select().from(user).where(eq(user.id, id)).for('update');
  if (!before) return fail(NOBODY);
  const after = {
    role: role ?? before.role,
    deactivatedAt: active === undefined ? before.deactivatedAt : active ? null : (before.deactivatedAt ?? now),
  };
  const wasAdmin = isActiveAdmin(before);
  if (wasAdmin && !isActiveAdmin(after) && (await countActiveAdmins(db)) === 1) {
    const field = after.deactivatedAt ? 'active' : 'role';
    return fail(refusedField(field, `${before.name} is the last active admin; make somebody else admin first.`));
  }
  const [row] = await db
    .update(user)
    .set({ ...after, updatedAt: now })
    .where(eq(user.id, id))
    .returning();
  if (!row) return fail(NOBODY);
  if ((before.deactivatedAt === null) !== (row.deactivatedAt === null)) await endAccess(db, id);
  await auditChange(context, before, row);
  context.afterCommit(() => context.forgetSessions(id));
  const [seen] = await db.select({ lastSeen: lastSeen() }).from(user).where(eq(user.id, id));
  return ok(shown(row, seen?.lastSeen ?? null, true));
};

function isActiveAdmin({ role, deactivatedAt }: { role: Role; deactivatedAt: Date | null }): boolean {
  return role === 'admin' && deactivatedAt === null;
}

/** Ends sessions and links; done at activating too, so that a session which began in the same instant cannot come back. */
async function endAccess(db: Db, userId: string): Promise<void> {
  await db.delete(session).where(eq(session.userId, userId));
  await db.delete(link).where(eq(link.userId, userId));
}

async function auditChange(context: SignedInContext, before: UserRow, after: UserRow): Promise<void> {
  const about = after.name;
  if (before.role !== after.role) {
    await writeAudit(context, { act: 'change a role', about, detail: `from ${before.role} to ${after.role}` });
  }
  if ((before.deactivatedAt === null) === (after.deactivatedAt === null)) return;
  await writeAudit(context, { act: after.deactivatedAt ? 'deactivate' : 'activate again', about });
}

/** Makes a password link for a person; earlier ones stop working. The person is told, and using it ends their sessions. */
export const makePersonLink: Service<'people.makeLink'> = async (context, { id }) => {
  const [row] = await context.db.select().from(user).where(eq(user.id, id)).for('update');
  if (!row) return fail(NOBODY);
  const made = await passwordLink(context, row, context.person);
  return made.ok ? ok({ url: made.value.url, expiresAt: made.value.expiresAt.toISOString() }) : made;
};

/**
 * Makes a link for whoever owns an address, from the server's own machine when nobody can sign in: a password link, or the link of an open
 * invitation. Call it inside a transaction. When it cannot: `not-found` for an address that is neither, `gone` for an invitation that ran out.
 */
export async function makeLinkByCommand(context: Context, email: string): Promise<Result<MadeLink, Failure>> {
  const row = await findByEmail(context.db, email);
  if (row) return passwordLink(context, row, OPERATOR);
  const invited = await openInvitationOf(context.db, email);
  if (!invited) {
    return fail({
      kind: 'not-found',
      detail: `Nobody in the team has the address ${email}, and nobody is invited there.`,
    });
  }
  const made = await linkFor(context, invited);
  if (made.ok) await writeAudit(context, { act: 'make a link for an invitation', about: invited.email }, OPERATOR);
  return made;
}

async function passwordLink(context: Context, row: UserRow, by: Actor): Promise<Result<MadeLink, Failure>> {
  const { db, ids, now } = context;
  if (row.deactivatedAt) {
    return fail({
      kind: 'gone',
      detail: `${row.name} is deactivated; activate the account again, then make the link.`,
    });
  }
  await db.delete(link).where(and(eq(link.userId, row.id), eq(link.kind, 'password'), isNull(link.usedAt)));
  const expiresAt = new Date(now.getTime() + LINK_LIFE_MS);
  const made = await makeLink(context, { kind: 'password', userId: row.id, madeBy: by.id, expiresAt });
  const text = `A link that sets a new password for you was made by ${by.name}. If you did not ask for it, speak to an admin.`;
  await db.insert(notice).values({ id: ids.uuid(), userId: row.id, kind: 'password-link', text, createdAt: now });
  await writeAudit(context, { act: 'make a link for a person', about: row.name }, by);
  return ok(made);
}

function shown(row: UserRow, lastSeenAt: Date | string | null, all: boolean): ShownPerson {
  const seenByAll = {
    id: row.id,
    name: row.name,
    role: row.role,
    active: row.deactivatedAt === null,
    since: row.createdAt.toISOString(),
  };
  if (!all) return seenByAll;
  // A computed column comes from the driver as text.
  return { ...seenByAll, email: row.email, lastSeen: lastSeenAt ? new Date(lastSeenAt).toISOString() : null };
}
