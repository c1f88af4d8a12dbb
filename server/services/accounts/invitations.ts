import { and, asc, eq, isNull } from 'drizzle-orm';
import type { Failure, Invitation } from '#api';
import { fail, ok, type Result } from '#text';
import type { Db } from '../../database/open.ts';
import { invitation, link, signInFailure, user } from '../../database/schema.ts';
import type { Context, Service, SignedInContext } from '../../http/context.ts';
import { queueMail } from '../../mail/outbox.ts';
import { writeAudit } from '../audit.ts';
import { DEAD_LINK, findLink, type MadeLink, makeLink, useLink } from './links.ts';
import { passwordProblem, scryptHash } from './passwords.ts';
import { accountKey } from './pauses.ts';
import { addPerson, findByEmail, foldEmail } from './people-rows.ts';
import { refusedField } from './refusals.ts';

const INVITATION_LIFE_MS = 7 * 24 * 3600 * 1000;

export type InvitationRow = typeof invitation.$inferSelect;

const CLOSED: Failure = {
  kind: 'gone',
  detail: 'This invitation was accepted or revoked. Reload the page to see how it stands.',
};

export const listInvitations: Service<'invitations.list'> = async ({ db, now }) => {
  const rows = await db
    .select({ row: invitation, invitedBy: user.name })
    .from(invitation)
    .innerJoin(user, eq(invitation.invitedBy, user.id))
    .where(stillOpen())
    .orderBy(asc(invitation.sentAt), asc(invitation.id));
  return ok({ invitations: rows.map(({ row, invitedBy }) => shown(row, invitedBy, now)) });
};

/** Invites a person. When it cannot: `invalid` at `email`, if the address has an account or an open invitation. */
export const createInvitation: Service<'invitations.create'> = async (context, input) => {
  const { db, now, ids, person } = context;
  const email = foldEmail(input.email);
  const known = await findByEmail(db, email);
  if (known) return fail(refusedField('email', alreadyHere(known.name, known.deactivatedAt !== null)));
  const [row] = await db
    .insert(invitation)
    .values({ id: ids.uuid(), email, role: input.role, invitedBy: person.id, ...sentNow(now), createdAt: now })
    .onConflictDoNothing()
    .returning();
  if (!row) return fail(refusedField('email', 'This address is invited already; send that invitation again.'));
  await mailInvitation(context, row);
  await writeAudit(context, { act: 'invite', about: email, detail: `as ${row.role}` });
  return ok(shown(row, person.name, now));
};

function alreadyHere(name: string, deactivated: boolean): string {
  return deactivated
    ? `This address belongs to ${name}, who is deactivated; activate that account again.`
    : `This address belongs to ${name}, who is in the team already.`;
}

/** Sends an invitation again: it lives 7 more days, and links made for it before stop working. */
export const resendInvitation: Service<'invitations.resend'> = async (context, { id }) => {
  const { db, now, person } = context;
  const [row] = await db
    .update(invitation)
    .set({ ...sentNow(now), invitedBy: person.id })
    .where(and(eq(invitation.id, id), stillOpen()))
    .returning();
  if (!row) return fail(await whyNotOpen(db, id));
  await db.delete(link).where(eq(link.invitationId, id));
  await mailInvitation(context, row);
  await writeAudit(context, { act: 'invite again', about: row.email, detail: `as ${row.role}` });
  return ok(shown(row, person.name, now));
};

export const revokeInvitation: Service<'invitations.revoke'> = async (context, { id }) => {
  const { db, now } = context;
  const [row] = await db
    .update(invitation)
    .set({ revokedAt: now })
    .where(and(eq(invitation.id, id), stillOpen()))
    .returning();
  if (!row) return fail(await whyNotOpen(db, id));
  await db.delete(link).where(eq(link.invitationId, id));
  await writeAudit(context, { act: 'revoke an invitation', about: row.email });
  return ok({});
};

/** Makes a link for an invitation, to hand over by other means; earlier ones stop working. */
export const makeInvitationLink: Service<'invitations.makeLink'> = async (context, { id }) => {
  const [row] = await context.db
    .select()
    .from(invitation)
    .where(and(eq(invitation.id, id), stillOpen()))
    .for('update');
  if (!row) return fail(await whyNotOpen(context.db, id));
  const made = await linkFor(context, row);
  if (!made.ok) return made;
  await writeAudit(context, { act: 'make a link for an invitation', about: row.email });
  return ok({ url: made.value.url, expiresAt: made.value.expiresAt.toISOString() });
};

/** Makes the one working link of an open invitation. When it cannot: `gone`, if its days have run out. */
export async function linkFor(
  context: Pick<Context, 'db' | 'ids' | 'now' | 'settings' | 'person'>,
  { id, expiresAt }: InvitationRow,
): Promise<Result<MadeLink, Failure>> {
  if (expiresAt <= context.now) {
    return fail({ kind: 'gone', detail: 'This invitation has run out. Send it again, then make the link.' });
  }
  await context.db.delete(link).where(eq(link.invitationId, id));
  const madeBy = context.person?.id ?? null;
  return ok(await makeLink(context, { kind: 'invitation', invitationId: id, expiresAt, madeBy }));
}

/** The invitation that an address could still accept, run out or not. */
export async function openInvitationOf(db: Db, email: string): Promise<InvitationRow | undefined> {
  const [row] = await db
    .select()
    .from(invitation)
    .where(and(eq(invitation.email, foldEmail(email)), stillOpen()));
  return row;
}

export const checkInvitation: Service<'invitations.check'> = async ({ db, now }, { token }) => {
  const found = await findLink(db, 'invitation', token, now);
  if (!found?.invitationId) return fail(DEAD_LINK);
  const [row] = await db
    .select()
    .from(invitation)
    .where(and(eq(invitation.id, found.invitationId), stillOpen()));
  if (!row) return fail(DEAD_LINK);
  return ok({ email: row.email, role: row.role, expiresAt: found.expiresAt.toISOString() });
};

/** Makes the account that an invitation promises. Nobody is signed in or out by it. */
export const acceptInvitation: Service<'invitations.accept'> = async (context, { token, name, password }) => {
  const { db, now } = context;
  const used = await useLink(db, 'invitation', token, now);
  if (!used?.invitationId) return fail(DEAD_LINK);
  const [row] = await db
    .update(invitation)
    .set({ acceptedAt: now })
    .where(and(eq(invitation.id, used.invitationId), stillOpen()))
    .returning();
  if (!row) return fail(DEAD_LINK);
  const problem = passwordProblem(password, { email: row.email, name });
  if (problem) return fail(refusedField('password', problem));
  const passwordHash = await scryptHash.hash(password);
  const added = await addPerson(context, { email: row.email, name, role: row.role, passwordHash });
  if (!added) return fail(DEAD_LINK);
  // Somebody may have guessed at this address before the account was there.
  await db.delete(signInFailure).where(eq(signInFailure.key, accountKey(row.email)));
  await writeAudit(context, { act: 'accept an invitation', about: row.email, detail: `as ${row.role}` }, added);
  return ok({ email: row.email });
};

function stillOpen() {
  return and(isNull(invitation.acceptedAt), isNull(invitation.revokedAt));
}

function sentNow(now: Date) {
  return { sentAt: now, expiresAt: new Date(now.getTime() + INVITATION_LIFE_MS) };
}

async function whyNotOpen(db: Db, id: string): Promise<Failure> {
  const found = await db.select({ id: invitation.id }).from(invitation).where(eq(invitation.id, id));
  return found.length > 0 ? CLOSED : { kind: 'not-found', detail: 'There is no such invitation.' };
}

function mailInvitation(context: SignedInContext, { id, email, role }: InvitationRow): Promise<void> {
  const facts = { kind: 'invitation', invitedBy: context.person.name, role } as const;
  return queueMail(context, { recipient: email, invitationId: id }, facts);
}

function shown(row: InvitationRow, invitedBy: string, now: Date): Invitation {
  return {
    id: row.id,
    email: row.email,
    role: row.role,
    state: row.expiresAt > now ? 'pending' : 'expired',
    invitedBy,
    sentAt: row.sentAt.toISOString(),
    expiresAt: row.expiresAt.toISOString(),
  };
}
