import { and, desc, eq, type SQL, sql } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import { type DesignRow, type Failure, type ShownResults, shownResults } from '#api';
import { fail, ok, type Result } from '#text';
import type { Db } from '../database/open.ts';
import { design, recipe, recipeVersion, user } from '../database/schema.ts';
import type { Input, Person, Service } from '../http/context.ts';
import { mayChangeDesign, maySeeDesign } from './access.ts';

/** Lists this person's designs and the team's, last changed first. Others' "only me" designs are in no list and in no count. */
export const listDesigns: Service<'designs.list'> = async ({ db, person }) => {
  const found = await loadDesigns(db, undefined);
  return ok({ designs: found.filter((one) => maySeeDesign(person, one)).map((one) => one.row) });
};

/** Keeps numbers as a named design on the version that they were typed on, which may be an older one. */
export const keepDesign: Service<'designs.keep'> = async ({ db, ids, person, now }, input) => {
  const [found] = await db
    .select({ recipeId: recipe.id })
    .from(recipe)
    .innerJoin(recipeVersion, and(eq(recipeVersion.recipeId, recipe.id), eq(recipeVersion.version, input.version)))
    .where(eq(recipe.slug, input.slug));
  if (found === undefined)
    return fail({ kind: 'not-found', detail: `There is no version ${input.version} of "${input.slug}".` });
  const id = ids.uuid();
  const { name, project, note, visibility, inputs, shown, version } = input;
  const kept = { name, project, note, visibility, inputs, shown, version };
  await db
    .insert(design)
    .values({ id, ownerId: person.id, recipeId: found.recipeId, ...kept, createdAt: now, updatedAt: now });
  return ok((await requireDesign(db, id)).row);
};

export const readDesign: Service<'designs.read'> = async ({ db, person }, { id }) => {
  const found = await findDesign(db, person, id);
  if (!found.ok) return found;
  const { row, recipeId, inputs, note, shown } = found.value;
  const [version] = await db
    .select({ document: recipeVersion.document })
    .from(recipeVersion)
    .where(and(eq(recipeVersion.recipeId, recipeId), eq(recipeVersion.version, row.version)));
  if (version === undefined) throw new Error(`design ${id} stands on version ${row.version}, which does not exist`);
  return ok({
    design: row,
    inputs,
    note,
    shown,
    document: version.document,
    mayChange: mayChangeDesign(person, found.value),
  });
};

/** Changes what was sent and nothing else. The version never changes here: a design stays on it until its owner moves it. */
export const updateDesign: Service<'designs.update'> = async ({ db, person, now }, input) => {
  const found = await changeable(db, person, input);
  if (!found.ok) return found;
  const { id, requestId: _request, updatedAt: _seen, ...changes } = input;
  await db
    .update(design)
    .set({ ...changes, updatedAt: laterThan(found.value, now) })
    .where(eq(design.id, id));
  return ok((await requireDesign(db, id)).row);
};

export const removeDesign: Service<'designs.remove'> = async ({ db, person }, input) => {
  const found = await changeable(db, person, input);
  if (!found.ok) return found;
  await db.delete(design).where(eq(design.id, input.id));
  return ok({});
};

/** Two changes within one millisecond still differ in what the next one must have seen. */
function laterThan({ row }: LoadedDesign, now: Date): Date {
  return new Date(Math.max(now.getTime(), Date.parse(row.updatedAt) + 1));
}

/**
 * Gives a design that this person may change and that has not moved since they saw it; its row is taken until the transaction ends.
 * When it cannot: `not-found`, `forbidden`, or `stale` with the design as it is now.
 */
async function changeable(
  db: Db,
  person: Person,
  input: Pick<Input<'designs.remove'>, 'id' | 'updatedAt'>,
): Promise<Result<LoadedDesign, Failure>> {
  await db.select({ id: design.id }).from(design).where(eq(design.id, input.id)).for('update');
  const found = await findDesign(db, person, input.id);
  if (!found.ok) return found;
  const { row, inputs, note, shown } = found.value;
  if (!mayChangeDesign(person, found.value)) {
    return fail({
      kind: 'forbidden',
      detail: `This is a design of ${row.owner.name}; keep a copy under your own name.`,
    });
  }
  if (Date.parse(row.updatedAt) === Date.parse(input.updatedAt)) return found;
  return fail({
    kind: 'stale',
    detail: 'This design was changed in the meantime. Nothing was done.',
    extra: { design: row, inputs, note, shown },
  });
}

interface LoadedDesign {
  readonly ownerId: string;
  readonly visibility: 'team' | 'only me';
  readonly recipeId: string;
  readonly inputs: Record<string, Record<string, string>>;
  readonly note: string;
  readonly shown: ShownResults;
  readonly row: DesignRow;
}

async function findDesign(db: Db, person: Person, id: string): Promise<Result<LoadedDesign, Failure>> {
  const [found] = await loadDesigns(db, eq(design.id, id));
  return found !== undefined && maySeeDesign(person, found) ? ok(found) : fail(noDesign);
}

async function requireDesign(db: Db, id: string): Promise<LoadedDesign> {
  const [found] = await loadDesigns(db, eq(design.id, id));
  if (found === undefined) throw new Error(`design ${id} is gone inside its own transaction`);
  return found;
}

const noDesign: Failure = { kind: 'not-found', detail: 'There is no such design, or it is not open to you.' };
const owner = alias(user, 'owner');

async function loadDesigns(db: Db, where: SQL | undefined): Promise<readonly LoadedDesign[]> {
  const found = await db
    .select({
      design,
      ownerName: owner.name,
      slug: recipe.slug,
      number: recipe.number,
      title: sql<string>`${recipeVersion.document} -> 'front' ->> 'title'`,
      versionState: recipeVersion.state,
      newestVersion: sql<number>`(select max(v.version) from recipe_version v where v.recipe_id = ${recipe.id})::int`,
    })
    .from(design)
    .innerJoin(owner, eq(owner.id, design.ownerId))
    .innerJoin(recipe, eq(recipe.id, design.recipeId))
    .innerJoin(
      recipeVersion,
      and(eq(recipeVersion.recipeId, design.recipeId), eq(recipeVersion.version, design.version)),
    )
    .where(where)
    .orderBy(desc(design.updatedAt), design.id);
  return found.map(({ design: kept, ownerName, slug, number, title, versionState, newestVersion }) => {
    const shown = shownResults.parse(kept.shown);
    return {
      ownerId: kept.ownerId,
      visibility: kept.visibility,
      recipeId: kept.recipeId,
      inputs: Object.fromEntries(Object.entries(kept.inputs).map(([id, fields]) => [id, { ...fields }])),
      note: kept.note,
      shown,
      row: {
        id: kept.id,
        name: kept.name,
        project: kept.project,
        owner: { id: kept.ownerId, name: ownerName },
        visibility: kept.visibility,
        recipe: { slug: slug ?? '', number: number ?? '', title },
        version: kept.version,
        versionState,
        newestVersion,
        limitsBroken: countBroken(shown),
        updatedAt: kept.updatedAt.toISOString(),
      },
    };
  });
}

/** States of a limit that does not hold, as `shown` writes them. */
const BROKEN: ReadonlySet<string> = new Set(['exceeded', 'only-nominally', 'only nominally', 'no-value', 'no value']);

/** Counted from what its owner last saw, not computed again on every list. */
function countBroken({ calculators }: ShownResults): number {
  const states = Object.values(calculators).flatMap(({ limits }) => Object.values(limits));
  return states.filter((state) => BROKEN.has(state)).length;
}
