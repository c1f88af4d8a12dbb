import { eq } from 'drizzle-orm';
import type { Request, Response } from 'express';
import * as z from 'zod';
import { type AUTH_ROUTES, email, type Failure, linkToken, newPassword } from '#api';
import { fail, ok, type Result } from '#text';
import { session } from '../database/schema.ts';
import { knownBrowserOf, rememberBrowser } from '../services/accounts/known-browsers.ts';
import {
  changePassword,
  checkPasswordChange,
  endOtherSessions,
  type OwnContext,
  type ThisBrowser,
} from '../services/accounts/own-account.ts';
import { askForPassword, resetPassword } from '../services/accounts/password-reset.ts';
import { admit, type Key, personKeys, signInKeys, succeeded } from '../services/accounts/pauses.ts';
import type { Auth, AuthDeps } from './auth.ts';
import { passOn, signedInHere } from './auth-requests.ts';
import { browserToken, keepBrowserToken } from './browser-cookie.ts';
import type { Ids } from './ids.ts';
import { parseBody } from './input.ts';
import type { SessionCache } from './session-cache.ts';

/** What the acts work with, for as long as the server runs. */
export interface Desk extends AuthDeps {
  readonly clock: () => Date;
  readonly ids: Ids;
  readonly auth: Auth;
  readonly sessions: SessionCache;
}

/** One act; a success is answered with an empty object, whatever cookies it has set. */
export type AccountAct = (desk: Desk, req: Request, res: Response) => Promise<Result<null, Failure>>;

// A current password may be shorter than a new one: it was set under the rules of its day.
const givenPassword = z.string().min(1, 'Write your password.').max(128, 'Use at most 128 characters.');
const signInBody = z.strictObject({ email, password: givenPassword, rememberMe: z.boolean().default(true) });
const askBody = z.strictObject({ email });
const resetBody = z.strictObject({ token: linkToken, newPassword });
const changeBody = z.strictObject({
  currentPassword: givenPassword,
  newPassword,
  revokeOtherSessions: z.boolean().default(true),
});

const signIn: AccountAct = async (desk, req, res) => {
  const body = parseBody(signInBody, req.body);
  if (!body.ok) return body;
  const { db, clock, ids } = desk;
  const presented = browserToken(desk, req);
  const browser = await knownBrowserOf(db, presented, body.value.email);
  const keys = signInKeys({ email: body.value.email, address: req.ip ?? '', browser });
  const refused = await slowDown(desk, keys);
  if (refused) return fail(refused);
  const passed = await passOn(desk, req, '/sign-in/email', { ...body.value, email: body.value.email.toLowerCase() });
  if (!passed.ok) return passed;
  const token = await db.transaction(async (tx) => {
    await succeeded(tx, keys);
    return rememberBrowser({ db: tx, now: clock(), ids }, presented, passed.value.userId);
  });
  passed.value.setCookies(res);
  keepBrowserToken(desk, res, token);
  return ok(null);
};

const signOut: AccountAct = async (desk, req, res) => {
  const here = await signedInHere(desk, req);
  // Before better-auth, which would answer that all is well even if the row could not be deleted.
  if (here) await desk.db.delete(session).where(eq(session.id, here.sessionId));
  const passed = await passOn(desk, req, '/sign-out', {});
  if (!passed.ok) return passed;
  await desk.sessions.forgetOne(req.headers);
  passed.value.setCookies(res);
  return ok(null);
};

const askForNewPassword: AccountAct = async ({ db, clock, settings }, req) => {
  const body = parseBody(askBody, req.body);
  if (!body.ok) return body;
  await askForPassword({ db, now: clock(), settings }, body.value.email);
  return ok(null);
};

const setNewPassword: AccountAct = async (desk, req, res) => {
  const body = parseBody(resetBody, req.body);
  if (!body.ok) return body;
  const { db, clock, ids, sessions } = desk;
  const reset = await resetPassword({ db, ids, now: clock() }, desk.password, body.value);
  if (!reset.ok) return reset;
  sessions.forget(reset.value.id);
  const token = await rememberBrowser({ db, now: clock(), ids }, browserToken(desk, req), reset.value.id);
  keepBrowserToken(desk, res, token);
  return ok(null);
};

const changeOwnPassword: AccountAct = async (desk, req) => {
  const body = parseBody(changeBody, req.body);
  if (!body.ok) return body;
  const own = await ownContext(desk, req);
  if (!own) return fail({ kind: 'not-signed-in' });
  const keys = personKeys(own.context.person.id);
  const refused = await slowDown(desk, keys);
  if (refused) return fail(refused);
  const checked = await checkPasswordChange(own.context, desk.password, body.value);
  if (!checked.ok) return checked;
  const newHash = await desk.password.hash(body.value.newPassword);
  await desk.db.transaction(async (tx) => {
    await succeeded(tx, keys);
    await changePassword({ ...own.context, db: tx }, newHash, body.value.revokeOtherSessions, own.browser);
  });
  desk.sessions.forget(own.context.person.id);
  return ok(null);
};

const endSessionsElsewhere: AccountAct = async (desk, req) => {
  const own = await ownContext(desk, req);
  if (!own) return fail({ kind: 'not-signed-in' });
  await desk.db.transaction((tx) => endOtherSessions({ ...own.context, db: tx }, own.browser));
  desk.sessions.forget(own.context.person.id);
  return ok(null);
};

export const ACCOUNT_ACTS = {
  '/api/auth/sign-in/email': signIn,
  '/api/auth/sign-out': signOut,
  '/api/auth/request-password-reset': askForNewPassword,
  '/api/auth/reset-password': setNewPassword,
  '/api/auth/change-password': changeOwnPassword,
  '/api/auth/revoke-other-sessions': endSessionsElsewhere,
} as const satisfies Record<keyof typeof AUTH_ROUTES, AccountAct>;

async function slowDown({ db, clock }: Desk, keys: readonly Key[]): Promise<Failure | null> {
  const wait = await admit(db, keys, clock());
  if (wait === 0) return null;
  const time = wait < 120 ? `${wait} s` : `${Math.ceil(wait / 60)} min`;
  return {
    kind: 'too-many',
    detail: `The last passwords tried here were not right. Try again in ${time}.`,
    retryAfterSeconds: wait,
  };
}

/** Who asks, read from the database and not from memory: what follows changes their account. */
async function ownContext(desk: Desk, req: Request): Promise<{ context: OwnContext; browser: ThisBrowser } | null> {
  const here = await signedInHere(desk, req);
  if (!here || !req.person) return null;
  const { db, clock, ids } = desk;
  const context = { db, now: clock(), ids, person: req.person };
  return { context, browser: { sessionId: here.sessionId, browserToken: browserToken(desk, req) } };
}
