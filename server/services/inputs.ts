import { and, eq, sql } from 'drizzle-orm';
import type { Failure } from '#api';
import { fail, ok, type Result } from '#text';
import type { Db } from '../database/open.ts';
import { rows } from '../database/rows.ts';
import { keptInput, recipe, requestAnswer } from '../database/schema.ts';
import type { Service } from '../http/context.ts';

/** Names kept for one calculator, beyond which a new one is refused; a page holds at most some dozens. Common practice, no source. */
const FIELD_LIMIT = 500;
const ROUTE = 'inputs.keep';

export const readInputs: Service<'inputs.read'> = async ({ db, person }, { slug }) => {
  const recipeId = await publishedRecipe(db, slug);
  if (!recipeId.ok) return recipeId;
  const found = await db
    .select({ calculator: keptInput.calculator, fields: keptInput.fields })
    .from(keptInput)
    .where(and(eq(keptInput.userId, person.id), eq(keptInput.recipeId, recipeId.value)));
  return ok({ calculators: Object.fromEntries(found.map(({ calculator, fields }) => [calculator, { ...fields }])) });
};

/**
 * Keeps what was typed. Field by field the last to arrive wins; the answer holds all fields and names those that had moved since the sender
 * last saw them. A repeated `saveId` gets its first answer and changes nothing, also after other saves: it is stored for 24 hours.
 */
export const keepInputs: Service<'inputs.keep'> = async ({ db, person, now }, input) => {
  const recipeId = await publishedRecipe(db, input.slug);
  if (!recipeId.ok) return recipeId;
  const row = and(eq(requestAnswer.person, person.id), eq(requestAnswer.requestId, input.saveId));
  const taken = await db
    .insert(requestAnswer)
    .values({ person: person.id, requestId: input.saveId, route: ROUTE, answer: {}, createdAt: now })
    .onConflictDoNothing()
    .returning({ person: requestAnswer.person });
  if (taken.length === 0) {
    const [first] = await db.select().from(requestAnswer).where(row);
    // Stored below, by this route alone.
    if (first?.route === ROUTE) return ok(first.answer as Kept);
    const message = 'This id was used for another request; each save needs its own.';
    return fail({ kind: 'invalid', detail: 'One field needs another value.', fields: [{ field: 'saveId', message }] });
  }
  const kept = await keepFields(db, { personId: person.id, recipeId: recipeId.value, now, ...input });
  if (!kept.ok) return kept;
  await db.update(requestAnswer).set({ answer: kept.value }).where(row);
  return kept;
};

interface Kept {
  readonly fields: Record<string, string>;
  readonly moved: string[];
}

interface Keeping {
  readonly personId: string;
  readonly recipeId: string;
  readonly calculator: string;
  readonly saveId: string;
  readonly fields: Readonly<Record<string, { readonly text: string | null; readonly base: string | null }>>;
  readonly now: Date;
}

async function keepFields(db: Db, keeping: Keeping): Promise<Result<Kept, Failure>> {
  const { personId, recipeId, calculator, saveId, now } = keeping;
  const [before] = await db
    .select({ fields: keptInput.fields })
    .from(keptInput)
    .where(and(eq(keptInput.userId, personId), eq(keptInput.recipeId, recipeId), eq(keptInput.calculator, calculator)))
    .for('update');
  const stored = new Map(Object.entries(before?.fields ?? {}));
  const sent = Object.entries(keeping.fields);
  const moved = sent.filter(([name, { base }]) => (stored.get(name) ?? null) !== base).map(([name]) => name);
  const typed = sent.filter(([, { text }]) => text !== null).map(([name, { text }]) => [name, text] as const);
  const cleared = sent.filter(([, { text }]) => text === null).map(([name]) => name);
  if (new Set([...stored.keys(), ...typed.map(([name]) => name)]).size > FIELD_LIMIT) {
    const message = `At most ${FIELD_LIMIT} fields are kept for one calculator.`;
    return fail({ kind: 'invalid', detail: message, fields: [{ field: 'fields', message }] });
  }
  // Merged by the database, so that a first save from two tabs at once loses no field.
  const [after] = await rows<{ fields: Record<string, string> }>(
    db,
    sql`
    insert into kept_input as k (user_id, recipe_id, calculator, fields, last_save_id, updated_at)
    values (${personId}, ${recipeId}, ${calculator}, ${JSON.stringify(Object.fromEntries(typed))}::jsonb, ${saveId},
      ${now.toISOString()}::timestamptz)
    on conflict (user_id, recipe_id, calculator) do update set
      fields = (k.fields || excluded.fields)
        - array(select jsonb_array_elements_text(${JSON.stringify(cleared)}::jsonb)),
      last_save_id = excluded.last_save_id, updated_at = excluded.updated_at
    returning fields`,
  );
  return ok({ fields: after?.fields ?? {}, moved });
}

/** Only what was published once can be typed into. */
async function publishedRecipe(db: Db, slug: string): Promise<Result<string, Failure>> {
  const [found] = await db
    .select({ id: recipe.id })
    .from(recipe)
    .where(and(eq(recipe.slug, slug), recipe.slugFixed));
  return found === undefined ? fail({ kind: 'not-found', detail: `There is no recipe "${slug}".` }) : ok(found.id);
}
