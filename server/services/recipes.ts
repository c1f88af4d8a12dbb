import { and, desc, eq, inArray, type SQL, sql } from 'drizzle-orm';
import type { Answer, RecipePage, RecipeRow } from '#api';
import type { FrontMatter } from '#recipe';
import { fail, ok } from '#text';
import type { Db } from '../database/open.ts';
import { draft, recipe, recipeVersion, user } from '../database/schema.ts';
import type { Person, Service } from '../http/context.ts';
import { maySeeDraft, mayWriteDraft } from './access.ts';
import { dateIn } from './calendar.ts';
import { loadDrafts } from './draft-rows.ts';
import { noteStarterOpened, readTeam } from './team.ts';

type Version = Answer<'recipes.read'>['version'];

/** Lists every recipe that was ever published, by its published version or, without one, by its newest. */
export const listRecipes: Service<'recipes.list'> = async ({ db, person, now }) => {
  const recipes = await loadRows(db, person, now, eq(recipe.slugFixed, true));
  return ok({ recipes: recipes.map((one) => one.row) });
};

export const readRecipe: Service<'recipes.read'> = async ({ db, person, now }, { slug, version }) => {
  const [found] = await loadRows(db, person, now, and(eq(recipe.slug, slug), eq(recipe.slugFixed, true)));
  if (found === undefined) return fail(noRecipe(slug));
  const versions = await loadVersions(db, found.id);
  const wanted = version ?? found.row.version;
  const shown = versions.find((one) => one.version === wanted);
  if (shown === undefined) return fail(noVersion(slug, wanted));
  const [stored] = await db
    .select({ document: recipeVersion.document, textHash: recipeVersion.textHash })
    .from(recipeVersion)
    .where(and(eq(recipeVersion.recipeId, found.id), eq(recipeVersion.version, wanted)));
  if (stored === undefined) return fail(noVersion(slug, wanted));
  if (shown.supplied !== null) await noteStarterOpened(db);
  return ok({
    recipe: found.row,
    version: shown,
    document: stored.document,
    textHash: stored.textHash,
    versions: [...versions],
    draft: await openDraft(db, person, found.id),
  });
};

export const readText: Service<'recipes.text'> = async ({ db }, { slug, version }) => {
  const [found] = await db
    .select({ version: recipeVersion.version, text: recipeVersion.text })
    .from(recipe)
    .innerJoin(recipeVersion, eq(recipeVersion.recipeId, recipe.id))
    .where(and(eq(recipe.slug, slug), version === undefined ? undefined : eq(recipeVersion.version, version)))
    .orderBy(...currentFirst)
    .limit(1);
  if (found === undefined) return fail(version === undefined ? noRecipe(slug) : noVersion(slug, version));
  return ok({ slug, ...found });
};

/** A recipe's current version: the published one, else the newest. */
const currentFirst = [sql`${recipeVersion.state} = 'published' desc`, sql`${recipeVersion.version} desc`] as const;

const noRecipe = (slug: string) => ({ kind: 'not-found', detail: `There is no recipe "${slug}".` }) as const;
const noVersion = (slug: string, version: number) =>
  ({ kind: 'not-found', detail: `There is no version ${version} of "${slug}".` }) as const;

interface LoadedRecipe {
  readonly id: string;
  readonly row: RecipeRow;
}

/** Of the documents only the front matter is read: a list of thousands stays small. Others' private designs are not counted. */
async function loadRows(db: Db, person: Person, now: Date, where: SQL | undefined): Promise<readonly LoadedRecipe[]> {
  const found = await db
    .selectDistinctOn([recipe.id], {
      id: recipe.id,
      slug: recipe.slug,
      number: recipe.number,
      origin: recipe.origin,
      version: recipeVersion.version,
      state: recipeVersion.state,
      publishedAt: recipeVersion.publishedAt,
      reviewDue: recipeVersion.reviewDue,
      signedBy: user.name,
      front: sql<FrontMatter>`${recipeVersion.document} -> 'front'`,
      owners: sql<readonly string[]>`coalesce((select jsonb_agg(u.name order by u.name) from recipe_owner o
        join "user" u on u.id = o.user_id where o.recipe_id = ${recipe.id}), '[]'::jsonb)`,
      designs: sql<number>`(select count(*)::int from design g where g.recipe_id = ${recipe.id}
        and (g.visibility = 'team' or g.owner_id = ${person.id}))`,
    })
    .from(recipe)
    .innerJoin(recipeVersion, eq(recipeVersion.recipeId, recipe.id))
    .leftJoin(user, eq(user.id, recipeVersion.signedBy))
    .where(where)
    .orderBy(recipe.id, ...currentFirst);
  const today = dateIn((await readTeam(db)).timeZone, now);
  const rows = found.map(({ id, front, slug, number, publishedAt, reviewDue, owners, ...rest }) => ({
    id,
    row: {
      ...rest,
      slug: slug ?? front.slug,
      number: number ?? '',
      title: front.title,
      summary: front.summary,
      purpose: front.purpose ?? '',
      topics: [...front.topics],
      supply: front.supply ?? '',
      hazards: [...front.hazards],
      publishedAt: publishedAt.toISOString(),
      reviewDue,
      reviewOverdue: reviewDue !== null && reviewDue < today,
      owners: [...owners],
    },
  }));
  return rows.sort(
    (a, b) => a.row.title.localeCompare(b.row.title, 'en') || a.row.slug.localeCompare(b.row.slug, 'en'),
  );
}

/** Every version of a recipe, newest first, without documents. */
async function loadVersions(db: Db, recipeId: string): Promise<readonly Version[]> {
  const found = await db
    .select({
      version: recipeVersion.version,
      state: recipeVersion.state,
      at: recipeVersion.publishedAt,
      signedBy: user.name,
      selfSigned: recipeVersion.selfSigned,
      supplied: recipeVersion.suppliedWith,
      note: recipeVersion.note,
      writtenBy: sql<readonly string[]>`coalesce((select jsonb_agg(u.name order by u.name) from version_writer w
        join "user" u on u.id = w.user_id
        where w.recipe_id = ${recipeVersion.recipeId} and w.version = ${recipeVersion.version}), '[]'::jsonb)`,
    })
    .from(recipeVersion)
    .leftJoin(user, eq(user.id, recipeVersion.signedBy))
    .where(eq(recipeVersion.recipeId, recipeId))
    .orderBy(desc(recipeVersion.version));
  return found.map(({ at, writtenBy, ...rest }) => ({ ...rest, at: at.toISOString(), writtenBy: [...writtenBy] }));
}

/** The open change of a recipe, for who may see it. */
async function openDraft(db: Db, person: Person, recipeId: string): Promise<RecipePage['draft']> {
  const open = and(eq(draft.recipeId, recipeId), inArray(draft.state, ['draft', 'in-review']));
  const [found] = await loadDrafts(db, open);
  if (found === undefined || !maySeeDraft(person, found)) return null;
  return { id: found.id, mine: mayWriteDraft(person, found) };
}
