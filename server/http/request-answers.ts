import { createHash } from 'node:crypto';
import { and, eq, lt } from 'drizzle-orm';
import type { Failure, RouteName } from '#api';
import { fail, ok, type Result } from '#text';
import { requestAnswer } from '../database/schema.ts';
import type { Context } from './context.ts';
import { seal, unseal } from './seal.ts';

/** How long a first answer is kept, in milliseconds. */
const KEPT_MS = 24 * 3600 * 1000;

interface Request {
  readonly route: RouteName;
  readonly requestId: string;
  /** Whose request it is; see `requester`. */
  readonly by: string;
  readonly sealed: boolean;
}

/** Who repeats a request: the person, or for nobody signed in the holder of the link that the request carries. */
export function requester(context: Context, input: Readonly<Record<string, unknown>>): string {
  if (context.person) return context.person.id;
  const { token } = input;
  return `anyone:${createHash('sha256')
    .update(typeof token === 'string' ? token : '')
    .digest('hex')}`;
}

/**
 * Acts once for all requests with the same id by the same person. The row is taken first: of two that run at once the second waits in the
 * database for the first to commit, and then reads its answer. A refused request leaves no row, so a repeat of it is tried afresh.
 */
export async function answerOnce<T>(
  context: Context,
  request: Request,
  act: () => Promise<Result<T, Failure>>,
): Promise<Result<T, Failure>> {
  const { db, now, settings } = context;
  await db.delete(requestAnswer).where(lt(requestAnswer.createdAt, new Date(now.getTime() - KEPT_MS)));
  const taken = await db
    .insert(requestAnswer)
    .values({ person: request.by, requestId: request.requestId, route: request.route, answer: {}, createdAt: now })
    .onConflictDoNothing()
    .returning();
  const row = and(eq(requestAnswer.person, request.by), eq(requestAnswer.requestId, request.requestId));
  if (taken.length === 0) {
    const [first] = await db.select().from(requestAnswer).where(row);
    if (first?.route !== request.route) return fail(usedElsewhere);
    // Stored by this function from the same route's answer.
    return ok((request.sealed ? unseal(String(first.answer), settings.secret) : first.answer) as T);
  }
  const result = await act();
  if (!result.ok) return result;
  const answer = request.sealed ? seal(result.value, settings.secret) : result.value;
  await db.update(requestAnswer).set({ answer }).where(row);
  return result;
}

const usedElsewhere: Failure = {
  kind: 'invalid',
  detail: 'One field needs another value.',
  fields: [{ field: 'requestId', message: 'This id was used for another request; each request needs its own.' }],
};
