import { and, eq } from 'drizzle-orm';
import type { Failure } from '#api';
import { fail, ok } from '#text';
import type { Db } from '../database/open.ts';
import { recipe, recipeVersion } from '../database/schema.ts';
import type { ServiceRow, SignedInContext } from '../http/context.ts';
import { writeAudit } from './audit.ts';
import { compileFacts, documentToPublish } from './compile-facts.ts';
import { TICK_DERIVATION, TICK_HAZARDS } from './review-changes.ts';
import type { RecipeSearch } from './search.ts';
import { reviewDue } from './sign-off.ts';

/**
 * Signs off a supplied version as it stands: the text stays, the team's signature is added. Checks run again.
 * When it cannot: `stale` when another version or another text was seen, or somebody signed before; `checks-failed`; `invalid` while a tick is missing.
 */
export function signOffSupplied(search: RecipeSearch): ServiceRow<'recipes.signOffSupplied'> {
  return {
    async before(context, { slug }) {
      const found = await loadSupplied(context.db, slug);
      if (found !== null) await compileAgain(context, found);
    },
    async act(context, input) {
      const { db, person, now } = context;
      const found = await loadSupplied(db, input.slug, 'update');
      if (found === null) return fail({ kind: 'not-found', detail: `There is no published recipe "${input.slug}".` });
      const moved = whatMoved(found, input);
      if (moved !== null) return fail(moved);
      const compiled = await compileAgain(context, found);
      const document = documentToPublish(compiled);
      if (!document.ok) return document;
      const missing = [TICK_DERIVATION, TICK_HAZARDS].filter((tick) => !input.ticks.includes(tick));
      if (missing.length > 0) {
        const fields = missing.map((tick) => ({ field: 'ticks', message: `Tick “${tick}” first.` }));
        return fail({ kind: 'invalid', detail: 'Signing off needs every tick.', fields });
      }
      await db
        .update(recipeVersion)
        .set({
          signedBy: person.id,
          signedAt: now,
          checks: compiled.checks,
          ticks: input.ticks,
          reviewDue: await reviewDue(context, document.value),
        })
        .where(and(eq(recipeVersion.recipeId, found.recipeId), eq(recipeVersion.version, found.version)));
      await db.update(recipe).set({ origin: 'team' }).where(eq(recipe.id, found.recipeId));
      const detail = `version ${found.version} as supplied with ${found.suppliedWith}, SHA-256 ${found.textHash}`;
      await writeAudit(context, { act: 'sign off', about: `${found.number ?? ''} ${found.title}`.trim(), detail });
      context.afterCommit(() => search.refresh(found.recipeId));
      return ok({ slug: input.slug, version: found.version });
    },
  };
}

type Supplied = NonNullable<Awaited<ReturnType<typeof loadSupplied>>>;

async function loadSupplied(db: Db, slug: string, lock?: 'update') {
  const query = db
    .select({
      recipeId: recipe.id,
      slug: recipe.slug,
      number: recipe.number,
      version: recipeVersion.version,
      text: recipeVersion.text,
      textHash: recipeVersion.textHash,
      document: recipeVersion.document,
      suppliedWith: recipeVersion.suppliedWith,
      signedBy: recipeVersion.signedBy,
    })
    .from(recipeVersion)
    .innerJoin(recipe, eq(recipe.id, recipeVersion.recipeId))
    .where(and(eq(recipe.slug, slug), eq(recipeVersion.state, 'published')));
  const [found] = await (lock === undefined ? query : query.for(lock));
  if (found === undefined) return null;
  const { document, ...rest } = found;
  return { ...rest, title: document.front.title };
}

async function compileAgain(context: SignedInContext, { text, slug }: Supplied) {
  return context.compile(text, await compileFacts(context.db, slug));
}

function whatMoved(found: Supplied, seen: { readonly version: number; readonly hash: string }): Failure | null {
  const extra = { version: found.version, hash: found.textHash, text: found.text };
  if (found.version !== seen.version || found.textHash !== seen.hash) {
    return { kind: 'stale', detail: `Version ${found.version} is published now. Nothing was signed.`, extra };
  }
  if (found.suppliedWith === null || found.signedBy !== null) {
    return { kind: 'stale', detail: 'This version is signed already.', extra };
  }
  return null;
}
