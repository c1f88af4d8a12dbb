import { and, eq, isNull, max, ne } from 'drizzle-orm';
import type { Failure } from '#api';
import type { Compiled, RecipeDocument } from '#recipe';
import { fail, ok, type Result } from '#text';
import { design, draft, recipe, recipeOwner, recipeVersion, user, versionWriter } from '../database/schema.ts';
import type { Input, ServiceRow, SignedInContext } from '../http/context.ts';
import { queueMail } from '../mail/outbox.ts';
import { writeAudit } from './audit.ts';
import { addMonths, dateIn } from './calendar.ts';
import { documentToPublish } from './compile-facts.ts';
import { seenText } from './draft-conflict.ts';
import { findDraft, type LoadedDraft, lockDraft } from './draft-rows.ts';
import { nameOf, requireDraft } from './drafts.ts';
import { reserveNames } from './recipe-names.ts';
import { hashText } from './recipe-text.ts';
import { compileAhead, compileDraft, recordAct, refuseDecision, whoWrites } from './review-acts.ts';
import { designImpact, ticksFor } from './review-changes.ts';
import type { RecipeSearch } from './search.ts';
import { readTeam } from './team.ts';

type SignOff = Input<'reviews.signOff'>;

/**
 * Signs off a draft, which publishes it as the next whole version. One transaction: the text must be the one that was seen, everything is
 * compiled and checked again, the version row keeps hash, checks and ticks as they stood, the version before is superseded, one line
 * goes to the audit log and mails to the outbox.
 * When it cannot: `forbidden` by the second-person rule, `stale` with what changed, `checks-failed`, `invalid` while a tick is missing.
 */
export function signOff(search: RecipeSearch): ServiceRow<'reviews.signOff'> {
  return {
    before: compileAhead,
    async act(context, input) {
      const { db, person } = context;
      await lockDraft(db, input.id);
      const found = await findDraft(db, person, input.id);
      if (!found.ok) return found;
      const refused = await refuseDecision(context, found.value);
      if (refused !== null) return fail(refused);
      const seen = await seenText(db, found.value, input, 'in-review');
      if (!seen.ok) return seen;
      const compiled = await compileDraft(context, found.value, seen.value);
      const document = documentToPublish(compiled);
      if (!document.ok) return document;
      const ticks = await requireTicks(context, found.value, document.value, input.ticks);
      if (!ticks.ok) return ticks;
      const names = await reserveNames(db, found.value.recipeId, seen.value, document.value.front);
      if (!names.ok) return names;
      const version = await publish(context, found.value, {
        input,
        text: seen.value,
        document: document.value,
        compiled,
      });
      await tellPeople(context, found.value, version);
      context.afterCommit(() => search.refresh(found.value.recipeId));
      return ok({ slug: names.value.slug, version });
    },
  };
}

async function requireTicks(
  { db, person }: SignedInContext,
  found: LoadedDraft,
  document: RecipeDocument,
  ticked: readonly string[],
): Promise<Result<null, Failure>> {
  const needed = ticksFor(await designImpact(db, person, found.recipeId, document));
  const missing = needed.filter((tick) => !ticked.includes(tick));
  if (missing.length === 0) return ok(null);
  const fields = missing.map((tick) => ({ field: 'ticks', message: `Tick “${tick}” first.` }));
  return fail({ kind: 'invalid', detail: 'Signing off needs every tick.', fields });
}

interface Publication {
  readonly input: SignOff;
  readonly text: string;
  readonly document: RecipeDocument;
  readonly compiled: Compiled;
}

/** Writes the version and what hangs on it; gives its number. The lock on the draft keeps a second signer out. */
async function publish(context: SignedInContext, found: LoadedDraft, what: Publication): Promise<number> {
  const { db, person, now } = context;
  const { recipeId } = found;
  const writers = found.row.writtenBy.map((writer) => writer.id);
  const [newest] = await db
    .select({ version: max(recipeVersion.version) })
    .from(recipeVersion)
    .where(eq(recipeVersion.recipeId, recipeId));
  const version = (newest?.version ?? 0) + 1;
  await db
    .update(recipeVersion)
    .set({ state: 'superseded' })
    .where(and(eq(recipeVersion.recipeId, recipeId), eq(recipeVersion.state, 'published')));
  await db.insert(recipeVersion).values({
    recipeId,
    version,
    state: 'published',
    text: what.text,
    textHash: hashText(what.text),
    document: what.document,
    compilerVersion: what.document.compiler,
    checks: what.compiled.checks,
    ticks: what.input.ticks,
    note: found.row.note,
    signedBy: person.id,
    signedAt: now,
    selfSigned: writers.includes(person.id),
    publishedAt: now,
    reviewDue: await reviewDue(context, what.document),
  });
  if (writers.length > 0) {
    await db.insert(versionWriter).values(writers.map((userId) => ({ recipeId, version, userId })));
  }
  await db.update(draft).set({ state: 'published', updatedAt: now }).where(eq(draft.id, found.id));
  await db.update(recipe).set({ slugFixed: true, origin: 'team' }).where(eq(recipe.id, recipeId));
  await adopt(context, found);
  await recordAct(context, what.input, 'signed-off', what.input.note);
  const detail = `version ${version}, SHA-256 ${what.input.hash}${what.input.note === '' ? '' : `: ${what.input.note}`}`;
  await writeAudit(context, { act: 'sign off', about: nameOf(await requireDraft(db, found.id)), detail });
  return version;
}

/** A recipe that nobody owns, because it was supplied, belongs to whoever first changes it. */
async function adopt({ db }: SignedInContext, { recipeId, ownerId }: LoadedDraft): Promise<void> {
  const owners = await db.select().from(recipeOwner).where(eq(recipeOwner.recipeId, recipeId));
  if (owners.length === 0) await db.insert(recipeOwner).values({ recipeId, userId: ownerId });
}

/** Date of the signature in the team's time zone, and as many months on as the recipe asks for. */
export async function reviewDue({ db, now }: SignedInContext, document: RecipeDocument): Promise<string> {
  const { timeZone } = await readTeam(db);
  return addMonths(dateIn(timeZone, now), document.front.reviewMonths);
}

/** Mails those whose work it is and those whose designs use the recipe, each once, private designs included. */
async function tellPeople(context: SignedInContext, found: LoadedDraft, version: number): Promise<void> {
  const { db, person } = context;
  const users = await db
    .selectDistinct({ id: user.id, email: user.email })
    .from(design)
    .innerJoin(user, eq(user.id, design.ownerId))
    .where(and(eq(design.recipeId, found.recipeId), isNull(user.deactivatedAt), ne(user.id, person.id)));
  const everybody = new Map([...users, ...(await whoWrites(db, found, person.id))].map((one) => [one.id, one.email]));
  const facts = { kind: 'published', by: person.name, recipe: nameOf(found), version } as const;
  for (const [userId, recipient] of everybody) await queueMail(context, { recipient, userId }, facts);
}
