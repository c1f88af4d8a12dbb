import { betterAuth } from 'better-auth';
import { drizzleAdapter } from 'better-auth/adapters/drizzle';
import { eq } from 'drizzle-orm';
import type { Logger } from 'pino';
import type { Db } from '../database/open.ts';
import { account, session, user, verification } from '../database/schema.ts';
import type { PasswordHash } from '../services/accounts/passwords.ts';
import type { Settings } from './context.ts';

/** The header in which better-auth is told the client's address; whatever a client sends in it is overwritten. */
export const ADDRESS_HEADER = 'x-client-ip';
const SESSION_DAYS = 30;

export interface AuthDeps {
  readonly db: Db;
  readonly settings: Settings;
  readonly origins: readonly string[];
  readonly password: PasswordHash;
  readonly log: Logger;
}

/**
 * better-auth keeps the sessions and checks passwords at sign-in. Making accounts and every change of a password are our own services, since
 * each needs its audit line in the same transaction; the paths for them are off here.
 */
export function makeAuth({ db, settings, origins, password, log }: AuthDeps) {
  return betterAuth({
    appName: 'Quadrille',
    baseURL: settings.publicUrl,
    basePath: '/api/auth',
    secret: settings.secret,
    trustedOrigins: [...origins],
    database: drizzleAdapter(db, {
      provider: 'pg',
      schema: { user, session, account, verification },
      transaction: true,
    }),
    telemetry: { enabled: false },
    // Its messages at lower levels speak of what a person typed.
    logger: { level: 'error', log: (_level, message) => log.error({ from: 'better-auth' }, message) },
    emailAndPassword: { enabled: true, disableSignUp: true, minPasswordLength: 12, maxPasswordLength: 128, password },
    user: {
      additionalFields: {
        role: { type: 'string', required: true, defaultValue: 'reader', input: false },
        deactivatedAt: { type: 'date', required: false, input: false },
      },
    },
    session: { expiresIn: SESSION_DAYS * 86_400, updateAge: 86_400, cookieCache: { enabled: false } },
    verification: { storeIdentifier: 'hashed' },
    // Ours slows failures only, and remembers them in the database.
    rateLimit: { enabled: false },
    databaseHooks: { session: { create: { before: ({ userId }) => refuseDeactivated(db, userId) } } },
    advanced: {
      cookiePrefix: 'quadrille',
      useSecureCookies: settings.publicUrl.startsWith('https:'),
      // Said out loud: better-auth would otherwise switch both off where NODE_ENV says test.
      disableOriginCheck: false,
      disableCSRFCheck: false,
      ipAddress: { ipAddressHeaders: [ADDRESS_HEADER] },
      defaultCookieAttributes: { sameSite: 'lax', httpOnly: true },
    },
    disabledPaths: [
      '/sign-up/email',
      '/update-user',
      '/delete-user',
      '/change-email',
      '/change-password',
      '/request-password-reset',
      '/reset-password',
    ],
  });
}
export type Auth = ReturnType<typeof makeAuth>;

/** A session for a deactivated person is not made; `false` is better-auth's way to say so. */
async function refuseDeactivated(db: Db, userId: string): Promise<false | undefined> {
  const [row] = await db.select({ at: user.deactivatedAt }).from(user).where(eq(user.id, userId));
  return row && row.at === null ? undefined : false;
}
