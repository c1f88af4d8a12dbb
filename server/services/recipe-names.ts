import { eq, sql } from 'drizzle-orm';
import type { Failure } from '#api';
import type { FrontMatter } from '#recipe';
import { fail, ok, type Result } from '#text';
import type { Db } from '../database/open.ts';
import { rows } from '../database/rows.ts';
import { recipe } from '../database/schema.ts';
import { problemAtKey } from './recipe-text.ts';

/**
 * A recipe's slug and its short number. The slug is reserved at sending and fixed by the first publication. A number in the front matter is
 * taken; without one the recipe keeps the number that it has, or gets the next of a running series: `Q-001`, `Q-002`, …
 */
const NUMBER_TRIES = 5;

/**
 * Reserves both names for a recipe.
 * When it cannot: `checks-failed` with a diagnostic at the key whose value another recipe has.
 */
export async function reserveNames(
  db: Db,
  recipeId: string,
  text: string,
  front: Pick<FrontMatter, 'slug' | 'number'>,
): Promise<Result<{ readonly slug: string; readonly number: string }, Failure>> {
  const [current] = await db.select({ number: recipe.number }).from(recipe).where(eq(recipe.id, recipeId));
  const fixed = front.number ?? current?.number ?? null;
  for (let attempt = 0; attempt < NUMBER_TRIES; attempt++) {
    const names = { slug: front.slug, number: fixed ?? (await nextNumber(db)) };
    const taken = await takeNames(db, recipeId, names);
    if (taken === null) return ok(names);
    if (taken === 'slug' || fixed !== null) return fail(takenFailure(text, taken, names[taken]));
  }
  throw new Error(`no free recipe number after ${NUMBER_TRIES} tries`);
}

/** Lets names go that no version was ever published under. */
export async function releaseNames(db: Db, recipeId: string): Promise<void> {
  await db
    .update(recipe)
    .set({ slug: null, number: null })
    .where(sql`${recipe.id} = ${recipeId} and not ${recipe.slugFixed}`);
}

async function nextNumber(db: Db): Promise<string> {
  const [found] = await rows<{ last: number }>(
    db,
    sql`select coalesce(max(substring(number from '^Q-([0-9]{1,8})$')::int), 0)::int as last from recipe`,
  );
  return `Q-${String((found?.last ?? 0) + 1).padStart(3, '0')}`;
}

/** The unique constraints decide, inside a savepoint, so that two recipes sent at once cannot get one name. */
async function takeNames(
  db: Db,
  recipeId: string,
  names: { readonly slug: string; readonly number: string },
): Promise<'slug' | 'number' | null> {
  try {
    await db.transaction(async (tx) => {
      await tx.update(recipe).set(names).where(eq(recipe.id, recipeId));
    });
    return null;
  } catch (error) {
    const constraint = uniqueConstraint(error);
    if (constraint === 'recipe_slug_unique') return 'slug';
    if (constraint === 'recipe_number_unique') return 'number';
    throw error;
  }
}

/** Name of the unique constraint that a statement ran into; null for every other error. 23505: PostgreSQL's unique_violation. */
function uniqueConstraint(error: unknown): string | null {
  if (!(error instanceof Error)) return null;
  const cause = error.cause as { code?: unknown; constraint?: unknown } | undefined;
  return cause?.code === '23505' && typeof cause.constraint === 'string' ? cause.constraint : null;
}

function takenFailure(text: string, key: 'slug' | 'number', value: string): Failure {
  const diagnostic = problemAtKey(text, key, {
    code: `${key}-taken`,
    message: `The ${key} ${value} belongs to another recipe.`,
    hint: `Write another ${key}.`,
  });
  return {
    kind: 'checks-failed',
    detail: `The ${key} ${value} belongs to another recipe. Nothing was done.`,
    extra: { diagnostics: [diagnostic], checks: [] },
  };
}
