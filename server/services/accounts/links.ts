import { createHash } from 'node:crypto';
import { and, eq, gt, isNull } from 'drizzle-orm';
import { type Failure, LINK_PATHS } from '#api';
import type { Db } from '../../database/open.ts';
import { link } from '../../database/schema.ts';
import type { Context } from '../../http/context.ts';

export type LinkRow = typeof link.$inferSelect;
export type LinkKind = LinkRow['kind'];

/** Where each kind of link leads; the token stands in the fragment, so that it reaches no log. */
const PATHS = {
  'set-up': LINK_PATHS.setUp,
  invitation: LINK_PATHS.invitation,
  password: LINK_PATHS.password,
} as const satisfies Record<LinkKind, string>;

export interface NewLink {
  readonly kind: LinkKind;
  readonly expiresAt: Date;
  readonly invitationId?: string;
  readonly userId?: string;
  readonly madeBy?: string | null;
}

export interface MadeLink {
  readonly url: string;
  readonly expiresAt: Date;
}

/** What everybody who brings a link that does not work is told, whatever the reason: nothing can be learned by trying. */
export const DEAD_LINK: Failure = {
  kind: 'gone',
  detail: 'This link was used, replaced or has run out, or it was not copied whole. Ask for a new one.',
};

/** Makes a link. Only the SHA-256 of its 256-bit token is stored; the token leaves with the answer. */
export async function makeLink(
  { db, ids, now, settings }: Pick<Context, 'db' | 'ids' | 'now' | 'settings'>,
  { kind, expiresAt, ...about }: NewLink,
): Promise<MadeLink> {
  const token = ids.token();
  await db
    .insert(link)
    .values({ id: ids.uuid(), kind, tokenHash: hashToken(token), expiresAt, createdAt: now, ...about });
  return { url: `${settings.publicUrl}${PATHS[kind]}#token=${token}`, expiresAt };
}

/** Finds a link that still works. */
export async function findLink(db: Db, kind: LinkKind, token: string, now: Date): Promise<LinkRow | undefined> {
  const [found] = await db
    .select()
    .from(link)
    .where(working(kind, token, now));
  return found;
}

/** Uses a link up, in the transaction of the act that it allows: of two that try at once, one gets the row. */
export async function useLink(db: Db, kind: LinkKind, token: string, now: Date): Promise<LinkRow | undefined> {
  const [used] = await db
    .update(link)
    .set({ usedAt: now })
    .where(working(kind, token, now))
    .returning();
  return used;
}

function working(kind: LinkKind, token: string, now: Date) {
  return and(eq(link.kind, kind), eq(link.tokenHash, hashToken(token)), isNull(link.usedAt), gt(link.expiresAt, now));
}

/** SHA-256 in hex. Tokens are 256 random bits, so a plain hash cannot be guessed back. */
export function hashToken(token: string): string {
  return createHash('sha256').update(token).digest('hex');
}
