import { and, eq, gt, isNull, notExists, sql } from 'drizzle-orm';
import type { Failure } from '#api';
import { fail, ok, type Result } from '#text';
import type { Db } from '../../database/open.ts';
import { link, mail, session, signInFailure, user } from '../../database/schema.ts';
import type { Context } from '../../http/context.ts';
import { mailText } from '../../mail/texts.ts';
import { writeAudit } from '../audit.ts';
import { forgetBrowsers } from './known-browsers.ts';
import { DEAD_LINK, findLink, useLink } from './links.ts';
import { type PasswordHash, passwordProblem } from './passwords.ts';
import { accountKey } from './pauses.ts';
import { foldEmail, storePassword, type UserRow } from './people-rows.ts';
import { refusedField } from './refusals.ts';

/** Within this time, asking again for the same person queues no second mail. */
const ONE_MAIL_IN_MS = 10 * 60 * 1000;

/**
 * Queues the mail about a new password, if the address belongs to somebody active. It is one statement either way, so that neither the answer
 * nor its time tells who has an account. No token is made here: that happens when the mail goes out, or by an admin's named act.
 */
export async function askForPassword(
  { db, now, settings }: Pick<Context, 'db' | 'now' | 'settings'>,
  email: string,
): Promise<void> {
  const { subject, body } = mailText({ kind: 'password-reset' }, settings.publicUrl);
  const at = sql`${now.toISOString()}::timestamptz`;
  const lately = db
    .select({ one: sql`1` })
    .from(mail)
    .where(
      and(
        eq(mail.userId, user.id),
        eq(mail.kind, 'password-reset'),
        gt(mail.createdAt, new Date(now.getTime() - ONE_MAIL_IN_MS)),
      ),
    );
  const rows = db
    .select({
      id: sql`gen_random_uuid()`.as('id'),
      kind: sql`'password-reset'`.as('kind'),
      recipient: sql`${user.email}`.as('recipient'),
      subject: sql`${subject}::text`.as('subject'),
      body: sql`${body}::text`.as('body'),
      invitationId: sql`null::uuid`.as('invitation_id'),
      userId: sql`${user.id}`.as('user_id'),
      state: sql`'captured'`.as('state'),
      createdAt: at.as('created_at'),
    })
    .from(user)
    .where(and(eq(user.email, foldEmail(email)), isNull(user.deactivatedAt), notExists(lately)));
  await db.insert(mail).select(rows);
}

/**
 * Sets a password by a link that was made for a person; ends all their sessions and forgets their browsers. Opens its own transaction, after
 * the slow hash. When it cannot: `gone` for a link that does not work, `invalid` at `newPassword`.
 */
export async function resetPassword(
  { db, ids, now }: Pick<Context, 'db' | 'ids' | 'now'>,
  password: PasswordHash,
  { token, newPassword }: { readonly token: string; readonly newPassword: string },
): Promise<Result<UserRow, Failure>> {
  const owner = await ownerOf(db, token, now);
  if (!owner) return fail(DEAD_LINK);
  const problem = passwordProblem(newPassword, owner);
  if (problem) return fail(refusedField('newPassword', problem));
  const passwordHash = await password.hash(newPassword);
  return db.transaction(async (tx) => {
    const used = await useLink(tx, 'password', token, now);
    if (!used) return fail(DEAD_LINK);
    await storePassword({ db: tx, ids, now }, owner.id, passwordHash);
    await tx.delete(session).where(eq(session.userId, owner.id));
    await tx.delete(link).where(and(eq(link.userId, owner.id), isNull(link.usedAt)));
    await forgetBrowsers(tx, owner.id);
    await tx.delete(signInFailure).where(eq(signInFailure.key, accountKey(owner.email)));
    const line = { act: 'set a password by a link', about: owner.name, detail: 'all sessions ended' };
    await writeAudit({ db: tx, ids, now, person: null }, line, owner);
    return ok(owner);
  });
}

async function ownerOf(db: Db, token: string, now: Date): Promise<UserRow | undefined> {
  const found = await findLink(db, 'password', token, now);
  if (!found?.userId) return undefined;
  const [owner] = await db
    .select()
    .from(user)
    .where(and(eq(user.id, found.userId), isNull(user.deactivatedAt)));
  return owner;
}
