import { auditEvent } from '../database/schema.ts';
import type { Context } from '../http/context.ts';

/** Who acts when nobody is signed in: the holder of a link, or the server itself. */
export interface Actor {
  readonly id: string | null;
  readonly name: string;
}

/** The operator of the machine, who uses the server's own commands. */
export const OPERATOR: Actor = { id: null, name: 'the server’s own command' };

export interface AuditLine {
  /** A verb in the imperative, such as `sign off`. */
  readonly act: string;
  /** What it was done to, in words that outlive it: a person's name, a recipe's number and version. */
  readonly about: string;
  readonly detail?: string;
}

/**
 * Writes one line of the audit log. Call it with the context of the act, so that line and act are committed together.
 * `by` is who is signed in, unless given. Never pass a token or a password in `detail`.
 */
export async function writeAudit(
  { db, now, ids, person }: Pick<Context, 'db' | 'now' | 'ids' | 'person'>,
  { act, about, detail = '' }: AuditLine,
  by: Actor | null = person,
): Promise<void> {
  if (!by) throw new Error(`The audit line "${act}" names nobody who acted.`);
  await db.insert(auditEvent).values({ id: ids.uuid(), at: now, userId: by.id, byName: by.name, act, about, detail });
}
