import { asc, eq, ne } from 'drizzle-orm';
import type { Failure } from '#api';
import type { Compiled, CompileFacts, RecipeDocument } from '#recipe';
import { fail, ok, type Result } from '#text';
import type { Db } from '../database/open.ts';
import { recipe, recipeVersion } from '../database/schema.ts';
import { readTeam } from './team.ts';

/** Facts for a compiler, each present: in the browser of a writing person as well as on the server. */
export interface WholeFacts extends CompileFacts {
  readonly recipes: Readonly<Record<string, readonly number[]>>;
  readonly topics: readonly string[];
  readonly hazardVolts: number;
}

/** Gathers what the compiler cannot know by itself. `fixedSlug` is null for a recipe that was never published. */
export async function compileFacts(db: Db, fixedSlug: string | null): Promise<WholeFacts> {
  const versions = await db
    .select({ slug: recipe.slug, version: recipeVersion.version })
    .from(recipeVersion)
    .innerJoin(recipe, eq(recipe.id, recipeVersion.recipeId))
    .where(ne(recipeVersion.state, 'withdrawn'))
    .orderBy(asc(recipe.slug), asc(recipeVersion.version));
  const recipes = new Map<string, number[]>();
  for (const { slug, version } of versions) {
    if (slug !== null) recipes.set(slug, [...(recipes.get(slug) ?? []), version]);
  }
  const { hazardVolts, topics } = await readTeam(db);
  return {
    recipes: Object.fromEntries(recipes),
    topics,
    hazardVolts,
    ...(fixedSlug === null ? {} : { fixedSlug }),
  };
}

/**
 * Gives the document of a text that may be published: no error, every check passed.
 * When it cannot: `checks-failed` with the diagnostics and the checks as they stand.
 */
export function documentToPublish(compiled: Compiled): Result<RecipeDocument, Failure> {
  const errors = compiled.diagnostics.filter((d) => d.severity === 'error').length;
  const failed = compiled.checks.filter((check) => !check.passed).length;
  if (compiled.document !== null && errors === 0 && failed === 0) return ok(compiled.document);
  const counts = [
    errors > 0 ? `${errors} ${errors === 1 ? 'problem stands' : 'problems stand'} in the text` : '',
    failed > 0 ? `${failed} ${failed === 1 ? 'check fails' : 'checks fail'}` : '',
  ].filter((part) => part !== '');
  return fail({
    kind: 'checks-failed',
    detail: `${counts.join(' and ') || 'The text gives no document'}. Nothing was done.`,
    extra: { diagnostics: compiled.diagnostics, checks: compiled.checks },
  });
}
