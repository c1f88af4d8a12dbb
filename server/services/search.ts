import { eq, inArray, sql } from 'drizzle-orm';
import MiniSearch from 'minisearch';
import type { Answer } from '#api';
import { type RecipeDocument, type SearchText, searchText } from '#recipe';
import { ok } from '#text';
import type { Db } from '../database/open.ts';
import { recipe, recipeVersion } from '../database/schema.ts';
import type { ServiceRow } from '../http/context.ts';

type Hit = Answer<'recipes.search'>['hits'][number];

/** The names of every readable recipe, in memory. */
export interface RecipeSearch {
  /** Reads every recipe; call it once the server listens. A search that comes earlier waits for it. */
  build(db: Db): Promise<void>;
  /** Says that a recipe has another current version; the next search reads it again. */
  refresh(recipeId: string): void;
  /**
   * Finds recipes, best first. All words must match, each (from two letters on) as the start of a word of the recipe; misspelt ones
   * of four letters and more are tried only when there are few exact hits.
   * Cost: grows with the recipes that hold the words; the goal at 10,000 recipes is 40 ms for 95 of 100 searches.
   */
  find(db: Db, query: string): Promise<readonly Hit[]>;
  readonly service: ServiceRow<'recipes.search'>;
}

/** Recipes read at a time, so that no more than so many documents are in memory at once. */
const BATCH = 200;
/** Below this many exact hits, misspelt words are tried as well. Common practice, no source. */
const FEW_HITS = 5;
const FUZZY_FROM_LETTERS = 4;
/** Part of a word's letters that may be wrong. Common practice, no source. */
const FUZZY_SHARE = 0.2;
/** Nobody reads further; a list of thousands only costs. */
const HIT_LIMIT = 500;

interface Entry extends Record<(typeof FIELDS)[number], string> {
  readonly id: string;
  readonly slug: string;
}
/** Few fields, because each word costs one look-up in each: what it is called, what else it is called and for, what it speaks of. */
const FIELDS = ['title', 'names', 'words'] as const;
const BOOST = { title: 4, names: 3 };
/** One letter stands for itself; as the start of a word it would match nearly everything. */
const PREFIX_FROM_LETTERS = 2;

export function createRecipeSearch(): RecipeSearch {
  const index = new MiniSearch<Entry>({
    fields: [...FIELDS],
    storeFields: ['slug'],
    processTerm: telling,
    searchOptions: SEARCH,
  });
  const stale = new Set<string>();
  let building: Promise<void> | undefined;

  async function build(db: Db): Promise<void> {
    building ??= addAll(index, db).catch((error: unknown) => {
      // The next search tries again.
      building = undefined;
      throw error;
    });
    await building;
  }
  async function find(db: Db, query: string): Promise<readonly Hit[]> {
    await build(db);
    await readAgain(index, db, stale);
    return search(index, query);
  }
  return {
    build,
    find,
    refresh: (recipeId) => stale.add(recipeId),
    service: { act: async ({ db }, { q }) => ok({ hits: [...(await find(db, q))] }) },
  };
}

/** Words that nearly every recipe holds: they tell none from another, and each would cost a look at all. Common practice, no source. */
const EMPTY_WORDS: ReadonlySet<string> = new Set(
  'a an and as at be by for from in into is it its of on or that the this to with within'.split(' '),
);

function telling(word: string): string | null {
  const term = word.toLowerCase();
  return EMPTY_WORDS.has(term) ? null : term;
}

/** Empty words are left out, but where nothing else was typed they are taken as the start of another: "on" of "one-shot". */
function termsOf(query: string) {
  const tokenize: (text: string) => readonly string[] = MiniSearch.getDefault('tokenize');
  const tells = tokenize(query).some((word) => word !== '' && telling(word) !== null);
  return tells ? {} : { processTerm: (word: string) => word.toLowerCase() };
}

const SEARCH = {
  prefix: (term: string) => term.length >= PREFIX_FROM_LETTERS,
  combineWith: 'AND' as const,
  boost: BOOST,
};

function search(index: MiniSearch<Entry>, query: string): readonly Hit[] {
  const terms = termsOf(query);
  const exact = index.search(query, terms);
  const found =
    exact.length >= FEW_HITS
      ? exact
      : [
          ...exact,
          ...without(index.search(query, { ...terms, fuzzy: fuzzyFor }), new Set(exact.map((hit) => String(hit.id)))),
        ];
  // The slug was stored with the entry.
  return found.slice(0, HIT_LIMIT).map((hit) => ({ slug: String(hit.slug), matched: hit.terms }));
}

/** A number is meant as it stands: 4.7 and 4.8 are not misspellings of one another. */
function fuzzyFor(term: string): number | false {
  return term.length >= FUZZY_FROM_LETTERS && !/\d/.test(term) ? FUZZY_SHARE : false;
}

function without<T extends { readonly id: unknown }>(hits: readonly T[], ids: ReadonlySet<string>): readonly T[] {
  return hits.filter((hit) => !ids.has(String(hit.id)));
}

async function addAll(index: MiniSearch<Entry>, db: Db): Promise<void> {
  const ids = await db.select({ id: recipe.id }).from(recipe).where(eq(recipe.slugFixed, true)).orderBy(recipe.id);
  for (let from = 0; from < ids.length; from += BATCH) {
    const entries = await readEntries(
      db,
      ids.slice(from, from + BATCH).map((row) => row.id),
    );
    for (const entry of entries) put(index, entry);
  }
}

/** Names leave the set before they are read, so that a refresh during the reading is not lost. */
async function readAgain(index: MiniSearch<Entry>, db: Db, stale: Set<string>): Promise<void> {
  if (stale.size === 0) return;
  const ids = [...stale];
  stale.clear();
  try {
    for (const entry of await readEntries(db, ids)) put(index, entry);
  } catch (error) {
    for (const id of ids) stale.add(id);
    throw error;
  }
}

function put(index: MiniSearch<Entry>, entry: Entry): void {
  if (index.has(entry.id)) index.replace(entry);
  else index.add(entry);
}

async function readEntries(db: Db, ids: readonly string[]): Promise<readonly Entry[]> {
  const found = await db
    .selectDistinctOn([recipe.id], {
      id: recipe.id,
      slug: recipe.slug,
      number: recipe.number,
      // The body is the larger part of a document, and names are not taken from it.
      document: sql<Omit<RecipeDocument, 'body'>>`${recipeVersion.document} - 'body'`,
    })
    .from(recipe)
    .innerJoin(recipeVersion, eq(recipeVersion.recipeId, recipe.id))
    .where(inArray(recipe.id, [...ids]))
    .orderBy(recipe.id, sql`${recipeVersion.state} = 'published' desc`, sql`${recipeVersion.version} desc`);
  return found.map(({ id, slug, number, document }) =>
    entryOf(id, slug ?? '', number ?? '', searchText({ ...document, body: [] })),
  );
}

function entryOf(id: string, slug: string, number: string, text: SearchText): Entry {
  return {
    id,
    slug,
    title: `${number}\n${text.title}`,
    names: [text.purpose, ...text.topics, ...text.keywords].join('\n'),
    words: [text.summary, ...text.labels].join('\n'),
  };
}
