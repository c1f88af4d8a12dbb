import { and, eq, isNull } from 'drizzle-orm';
import type { Db } from '../../database/open.ts';
import { team, user } from '../../database/schema.ts';

/**
 * Lets one transaction at a time change who the admins are: takes the row of the team until the transaction ends. Without it, two admins who
 * demote each other at once would each still count the other.
 */
export async function lockAdmins(db: Db): Promise<void> {
  await db.select({ id: team.id }).from(team).where(eq(team.id, 1)).for('update');
}

/** How many admins may sign in. */
export function countActiveAdmins(db: Db): Promise<number> {
  return db.$count(user, and(eq(user.role, 'admin'), isNull(user.deactivatedAt)));
}
