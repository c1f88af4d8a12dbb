import { eq } from 'drizzle-orm';
import { fail, ok } from '#text';
import { link } from '../../database/schema.ts';
import type { Context, Service } from '../../http/context.ts';
import { writeAudit } from '../audit.ts';
import { countActiveAdmins, lockAdmins } from './admins.ts';
import { DEAD_LINK, findLink, type MadeLink, makeLink, useLink } from './links.ts';
import { passwordProblem, scryptHash } from './passwords.ts';
import { addPerson } from './people-rows.ts';
import { refusedField } from './refusals.ts';

const LINK_LIFE_MS = 24 * 3600 * 1000;

/**
 * Makes the link by which the first admin is made, for the terminal and nothing else; earlier ones stop working. Lives 24 hours.
 * When it cannot: null, if the team has an admin. Call it at each start, inside a transaction.
 */
export async function renewSetUpLink(
  context: Pick<Context, 'db' | 'ids' | 'now' | 'settings'>,
): Promise<MadeLink | null> {
  await lockAdmins(context.db);
  await context.db.delete(link).where(eq(link.kind, 'set-up'));
  if ((await countActiveAdmins(context.db)) > 0) return null;
  return makeLink(context, { kind: 'set-up', expiresAt: new Date(context.now.getTime() + LINK_LIFE_MS) });
}

export const checkSetUp: Service<'setup.check'> = async ({ db, now }, { token }) => {
  const found = await findLink(db, 'set-up', token, now);
  return found ? ok({ expiresAt: found.expiresAt.toISOString() }) : fail(DEAD_LINK);
};

/** Makes the first admin and ends the set-up link. Two people who use it at once make one admin. */
export const finishSetUp: Service<'setup.finish'> = async (context, { token, name, email, password }) => {
  const { db, now } = context;
  await lockAdmins(db);
  const used = await useLink(db, 'set-up', token, now);
  if (!used || (await countActiveAdmins(db)) > 0) return fail(DEAD_LINK);
  const problem = passwordProblem(password, { email, name });
  if (problem) return fail(refusedField('password', problem));
  const passwordHash = await scryptHash.hash(password);
  const admin = await addPerson(context, { email, name, role: 'admin', passwordHash });
  if (!admin) return fail(refusedField('email', 'This address has an account already; use another.'));
  await writeAudit(context, { act: 'set up Quadrille', about: admin.name, detail: 'first admin' }, admin);
  return ok({ email: admin.email });
};
