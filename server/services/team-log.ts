import { and, desc, gte, lt } from 'drizzle-orm';
import { ok } from '#text';
import { auditEvent, mail } from '../database/schema.ts';
import type { Service } from '../http/context.ts';

/** Lines of the audit log a page holds; more when several were written in the same millisecond at its end. */
const PAGE = 50;
/** The newest mails that are shown. */
const MAILS = 200;

/**
 * One page of the audit log, newest first. The next page starts before the last instant of this one, so lines of the same instant are never
 * parted: a page takes all of them.
 */
export const readAudit: Service<'team.audit'> = async ({ db }, { before }) => {
  const earlier = before === undefined ? undefined : lt(auditEvent.at, new Date(before));
  const newestFirst = [desc(auditEvent.at), desc(auditEvent.id)];
  const instants = await db
    .select({ at: auditEvent.at })
    .from(auditEvent)
    .where(earlier)
    .orderBy(...newestFirst)
    .limit(PAGE);
  const last = instants.at(-1)?.at;
  if (!last) return ok({ events: [], more: false });
  const rows = await db
    .select()
    .from(auditEvent)
    .where(and(gte(auditEvent.at, last), earlier))
    .orderBy(...newestFirst);
  const beyond = await db.select({ id: auditEvent.id }).from(auditEvent).where(lt(auditEvent.at, last)).limit(1);
  const events = rows.map(({ id, at, byName, act, about, detail }) => {
    return { id, at: at.toISOString(), by: byName, act, about, detail };
  });
  return ok({ events, more: beyond.length > 0 });
};

/** Mails as captured, newest first. Their rows hold no token, so there is none to show. */
export const readMail: Service<'team.mail'> = async ({ db }) => {
  const rows = await db.select().from(mail).orderBy(desc(mail.createdAt), desc(mail.id)).limit(MAILS);
  return ok({
    mail: rows.map(({ id, kind, recipient, subject, body, state, createdAt }) => {
      return { id, kind, to: recipient, subject, body, state, at: createdAt.toISOString() };
    }),
  });
};
