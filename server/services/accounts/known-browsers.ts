import { and, eq, lt, ne } from 'drizzle-orm';
import type { Db } from '../../database/open.ts';
import { knownBrowser, user } from '../../database/schema.ts';
import type { Context } from '../../http/context.ts';
import { hashToken } from './links.ts';
import { foldEmail } from './people-rows.ts';

/** How long a browser is known after its last sign-in: as long as browsers keep a cookie. Source: RFC 6265bis, section 5.5 (400 days). */
export const KNOWN_FOR_MS = 400 * 24 * 3600 * 1000;

/** The hash of a browser's token, if it signed in to this account before; null otherwise. */
export async function knownBrowserOf(db: Db, token: string | undefined, email: string): Promise<string | null> {
  if (token === undefined) return null;
  const [row] = await db
    .select({ tokenHash: knownBrowser.tokenHash })
    .from(knownBrowser)
    .innerJoin(user, eq(knownBrowser.userId, user.id))
    .where(and(eq(knownBrowser.tokenHash, hashToken(token)), eq(user.email, foldEmail(email))));
  return row?.tokenHash ?? null;
}

/** Remembers that a browser signed in to an account. Gives the token it is to keep: a token that was not made here is replaced. */
export async function rememberBrowser(
  { db, now, ids }: Pick<Context, 'db' | 'now' | 'ids'>,
  presented: string | undefined,
  userId: string,
): Promise<string> {
  await db.delete(knownBrowser).where(lt(knownBrowser.lastAt, new Date(now.getTime() - KNOWN_FOR_MS)));
  const token = presented !== undefined && (await isOurs(db, presented)) ? presented : ids.token();
  await db
    .insert(knownBrowser)
    .values({ tokenHash: hashToken(token), userId, lastAt: now })
    .onConflictDoUpdate({ target: [knownBrowser.tokenHash, knownBrowser.userId], set: { lastAt: now } });
  return token;
}

async function isOurs(db: Db, token: string): Promise<boolean> {
  return (await db.$count(knownBrowser, eq(knownBrowser.tokenHash, hashToken(token)))) > 0;
}

/** Forgets the browsers of a person, but for the one at hand: whoever knew the old password may have used them. */
export async function forgetBrowsers(db: Db, userId: string, kept?: string): Promise<void> {
  const others = kept === undefined ? undefined : ne(knownBrowser.tokenHash, hashToken(kept));
  await db.delete(knownBrowser).where(and(eq(knownBrowser.userId, userId), others));
}
