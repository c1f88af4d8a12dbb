import { readdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { eq, sql } from 'drizzle-orm';
import type { Compiled, CompileFacts, RecipeDocument } from '#recipe';
import type { Db } from '../database/open.ts';
import { recipe, recipeVersion, team } from '../database/schema.ts';
import type { Context } from '../http/context.ts';
import { type Actor, writeAudit } from './audit.ts';
import { compileFacts } from './compile-facts.ts';
import { reserveNames } from './recipe-names.ts';
import { frontKey, hashText } from './recipe-text.ts';
import { readTeam } from './team.ts';

/** What loading needs of the running server; `db` is the database itself. */
export interface StarterContext extends Pick<Context, 'db' | 'now' | 'ids' | 'compile'> {
  readonly release: string;
  /** Folder of the supplied recipes. */
  readonly folder: string;
}

interface Starter {
  readonly file: string;
  readonly text: string;
}

/**
 * Loads the supplied recipes into an empty collection as version 1, signed by nobody. A collection that holds anything, even a first draft,
 * is left alone. All of them or none. Gives how many were loaded.
 * When it cannot: throws with the name of the file whose text does not compile cleanly.
 */
export async function loadStarters(context: StarterContext): Promise<number> {
  if (!(await isEmpty(context.db))) return 0;
  const starters = await readStarters(context.folder);
  const facts = await factsTogether(context.db, starters);
  const compiled: {
    readonly starter: Starter;
    readonly document: RecipeDocument;
    readonly checks: Compiled['checks'];
  }[] = [];
  for (const starter of starters) {
    const { document, diagnostics, checks } = await context.compile(starter.text, facts);
    const problem = firstProblem({ document, diagnostics, checks });
    if (problem !== null || document === null)
      throw new Error(`${starter.file} cannot be loaded: ${problem ?? 'no document'}`);
    compiled.push({ starter, document, checks });
  }
  await context.db.transaction(async (tx) => {
    for (const one of compiled) await insertStarter({ ...context, db: tx }, one);
    await takeTopics(
      tx,
      compiled.map((one) => one.document),
    );
    const line = {
      act: 'load starter recipes',
      about: `${compiled.length} recipes`,
      detail: `version 1, release ${context.release}`,
    };
    await writeAudit({ ...context, db: tx, person: null }, line, PROGRAM);
  });
  return compiled.length;
}

const PROGRAM: Actor = { id: null, name: 'Quadrille' };

/** A team that has named no topics and purposes yet starts with those of the supplied recipes. */
async function takeTopics(db: Db, documents: readonly RecipeDocument[]): Promise<void> {
  const { topics, purposes } = await readTeam(db);
  const fronts = documents.map((document) => document.front);
  const named = {
    topics: topics.length > 0 ? topics : distinct(fronts.flatMap((front) => front.topics)),
    purposes: purposes.length > 0 ? purposes : distinct(fronts.flatMap((front) => front.purpose ?? [])),
  };
  await db.update(team).set(named).where(eq(team.id, 1));
}

function distinct(words: readonly string[]): readonly string[] {
  return [...new Set(words)].sort((a, b) => a.localeCompare(b, 'en'));
}

async function isEmpty(db: Db): Promise<boolean> {
  const [found] = await db.select({ any: sql<boolean>`exists (select 1 from recipe)` }).from(sql`(select 1) as one`);
  return found?.any === false;
}

async function readStarters(folder: string): Promise<readonly Starter[]> {
  const files = (await readdir(folder)).filter((file) => file.endsWith('.mdx')).sort();
  return Promise.all(files.map(async (file) => ({ file, text: await readFile(join(folder, file), 'utf8') })));
}

/** They may link each other, so each is compiled as if all were there. */
async function factsTogether(db: Db, starters: readonly Starter[]): Promise<CompileFacts> {
  const { topics: _none, ...facts } = await compileFacts(db, null);
  return { ...facts, recipes: Object.fromEntries(starters.map(({ text }) => [frontKey(text, 'slug'), [1]])) };
}

/** Warnings may stand: a recipe about a fault shows that fault at its own values. */
function firstProblem({ document, diagnostics, checks }: Omit<Compiled, 'preview'>): string | null {
  const problem = diagnostics.find((d) => d.severity === 'error');
  if (problem !== undefined) {
    return `line ${problem.start.line}, column ${problem.start.column}: ${problem.message}`;
  }
  const failed = checks.find((check) => !check.passed);
  if (failed !== undefined) return `${failed.title}: ${failed.detail}`;
  return document === null ? 'it gives no document' : null;
}

async function insertStarter(
  { db, ids, now, release }: StarterContext,
  {
    starter,
    document,
    checks,
  }: { readonly starter: Starter; readonly document: RecipeDocument; readonly checks: Compiled['checks'] },
): Promise<void> {
  const recipeId = ids.uuid();
  await db.insert(recipe).values({ id: recipeId, origin: 'supplied', createdAt: now });
  const names = await reserveNames(db, recipeId, starter.text, document.front);
  if (!names.ok)
    throw new Error(
      `${starter.file} cannot be loaded: ${'detail' in names.error ? names.error.detail : names.error.kind}`,
    );
  await db.update(recipe).set({ slugFixed: true }).where(sql`${recipe.id} = ${recipeId}`);
  await db.insert(recipeVersion).values({
    recipeId,
    version: 1,
    state: 'published',
    text: starter.text,
    textHash: hashText(starter.text),
    document,
    compilerVersion: document.compiler,
    checks,
    ticks: [],
    suppliedWith: release,
    publishedAt: now,
  });
}
