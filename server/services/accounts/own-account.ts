import { and, eq, ne } from 'drizzle-orm';
import type { Failure } from '#api';
import { fail, ok, type Result } from '#text';
import { session } from '../../database/schema.ts';
import type { SignedInContext } from '../../http/context.ts';
import { writeAudit } from '../audit.ts';
import { forgetBrowsers } from './known-browsers.ts';
import { type PasswordHash, passwordProblem } from './passwords.ts';
import { storedPassword, storePassword } from './people-rows.ts';
import { refusedField } from './refusals.ts';

/** What an act on one's own account works with. */
export type OwnContext = Pick<SignedInContext, 'db' | 'now' | 'ids' | 'person'>;

/** The browser that asks: it stays signed in and known. */
export interface ThisBrowser {
  readonly sessionId: string;
  readonly browserToken: string | undefined;
}

export interface PasswordChange {
  readonly currentPassword: string;
  readonly newPassword: string;
  readonly revokeOtherSessions: boolean;
}

/**
 * Tells whether somebody signed in knows their present password and may take the new one.
 * When it cannot: `invalid` at the field concerned.
 */
export async function checkPasswordChange(
  { db, person }: OwnContext,
  password: PasswordHash,
  { currentPassword, newPassword }: PasswordChange,
): Promise<Result<null, Failure>> {
  const hash = await storedPassword(db, person.id);
  if (hash === undefined || !(await password.verify({ hash, password: currentPassword }))) {
    return fail(refusedField('currentPassword', 'This is not your present password.'));
  }
  const problem = passwordProblem(newPassword, person);
  return problem ? fail(refusedField('newPassword', problem)) : ok(null);
}

/** Stores a new password that was checked; in a transaction. */
export async function changePassword(
  context: OwnContext,
  newHash: string,
  endOthers: boolean,
  browser: ThisBrowser,
): Promise<void> {
  await storePassword(context, context.person.id, newHash);
  await forgetBrowsers(context.db, context.person.id, browser.browserToken);
  await writeAudit(context, { act: 'change own password', about: context.person.name });
  if (endOthers) await endOtherSessions(context, browser);
}

/** Ends the person's sessions in all other browsers; in a transaction. */
export async function endOtherSessions(context: OwnContext, { sessionId }: ThisBrowser): Promise<void> {
  const { db, person } = context;
  const ended = await db
    .delete(session)
    .where(and(eq(session.userId, person.id), ne(session.id, sessionId)))
    .returning({ id: session.id });
  await writeAudit(context, { act: 'end other sessions', about: person.name, detail: `${ended.length} ended` });
}
