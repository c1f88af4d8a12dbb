import { and, eq } from 'drizzle-orm';
import type { Role } from '#api';
import type { Db } from '../../database/open.ts';
import { account, user } from '../../database/schema.ts';
import type { Context } from '../../http/context.ts';

export type UserRow = typeof user.$inferSelect;

export interface NewPerson {
  readonly email: string;
  readonly name: string;
  readonly role: Role;
  readonly passwordHash: string;
}

/** better-auth's name for accounts that sign in with a password. */
const WITH_PASSWORD = 'credential';

/** The form in which addresses are stored and compared. */
export function foldEmail(email: string): string {
  return email.trim().toLowerCase();
}

export async function findByEmail(db: Db, email: string): Promise<UserRow | undefined> {
  const [found] = await db
    .select()
    .from(user)
    .where(eq(user.email, foldEmail(email)));
  return found;
}

/** Adds a person who can sign in with a password. When it cannot: undefined, if the address has an account already. */
export async function addPerson(
  { db, ids, now }: Pick<Context, 'db' | 'ids' | 'now'>,
  { email, name, role, passwordHash }: NewPerson,
): Promise<UserRow | undefined> {
  const [added] = await db
    .insert(user)
    .values({
      id: ids.uuid(),
      email: foldEmail(email),
      name,
      role,
      emailVerified: true,
      createdAt: now,
      updatedAt: now,
    })
    .onConflictDoNothing()
    .returning();
  if (added) await storePassword({ db, ids, now }, added.id, passwordHash);
  return added;
}

export async function storedPassword(db: Db, userId: string): Promise<string | undefined> {
  const [row] = await db.select({ password: account.password }).from(account).where(passwordOf(userId));
  return row?.password ?? undefined;
}

/** Sets the stored hash, adding the account row for a person who never had a password. */
export async function storePassword(
  { db, ids, now }: Pick<Context, 'db' | 'ids' | 'now'>,
  userId: string,
  passwordHash: string,
): Promise<void> {
  const set = { password: passwordHash, updatedAt: now };
  const changed = await db.update(account).set(set).where(passwordOf(userId)).returning({ id: account.id });
  if (changed.length > 0) return;
  const row = { id: ids.uuid(), accountId: userId, providerId: WITH_PASSWORD, userId, createdAt: now };
  await db.insert(account).values({ ...row, ...set });
}

function passwordOf(userId: string) {
  return and(eq(account.userId, userId), eq(account.providerId, WITH_PASSWORD));
}
