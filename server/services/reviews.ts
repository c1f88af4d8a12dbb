import { and, eq } from 'drizzle-orm';
import type { ReviewPage } from '#api';
import { compareDocuments, type RecipeDocument } from '#recipe';
import { ok } from '#text';
import type { Db } from '../database/open.ts';
import { draft, recipeVersion } from '../database/schema.ts';
import type { Person, Service } from '../http/context.ts';
import { maySeeDraft, whyNotDecide } from './access.ts';
import { findDraft, type LoadedDraft, loadDrafts, readDraftText } from './draft-rows.ts';
import { hashText } from './recipe-text.ts';
import { compileDraft } from './review-acts.ts';
import { type DesignImpact, designImpact, ticksFor } from './review-changes.ts';
import { readTeam } from './team.ts';

export const listReviews: Service<'reviews.list'> = async ({ db, person }) => {
  const waiting = await loadDrafts(db, eq(draft.state, 'in-review'));
  const { allowSelfSignOff } = await readTeam(db);
  const seen = waiting.filter((one) => maySeeDraft(person, one));
  return ok({ reviews: seen.map((one) => reviewRow(person, one, allowSelfSignOff)) });
};

function reviewRow(person: Person, one: LoadedDraft, allowSelfSignOff: boolean): ReviewPage['review'] {
  const writerIds = one.row.writtenBy.map((writer) => writer.id);
  const whyNot =
    one.state === 'in-review' ? whyNotDecide(person, { writerIds, allowSelfSignOff }) : 'This is not in review.';
  return { draft: one.row, mayDecide: whyNot === null, whyNot };
}

/** Gathers what a decision needs: both texts and documents, changed numbers, and what would happen to designs. */
export const readReview: Service<'reviews.read'> = async (context, { id }) => {
  const { db, person } = context;
  const found = await findDraft(db, person, id);
  if (!found.ok) return found;
  const text = await readDraftText(db, id);
  const compiled = await compileDraft(context, found.value, text);
  const base = await readBase(db, found.value);
  const { document } = compiled;
  const designs = document === null ? NO_IMPACT : await designImpact(db, person, found.value.recipeId, document);
  const { allowSelfSignOff } = await readTeam(db);
  return ok({
    review: reviewRow(person, found.value, allowSelfSignOff),
    text,
    hash: hashText(text),
    document,
    diagnostics: [...compiled.diagnostics],
    checks: [...compiled.checks],
    base,
    numbers: base !== null && document !== null ? [...compareDocuments(base.document, document)] : [],
    designs,
    ticks: [...ticksFor(designs)],
  });
};

const NO_IMPACT: DesignImpact = { seen: [], unchanged: 0, privateCount: 0, privateNewlyBroken: 0 };

async function readBase(
  db: Db,
  { recipeId, row }: LoadedDraft,
): Promise<{ version: number; text: string; document: RecipeDocument } | null> {
  if (row.from === null) return null;
  const [base] = await db
    .select({ version: recipeVersion.version, text: recipeVersion.text, document: recipeVersion.document })
    .from(recipeVersion)
    .where(and(eq(recipeVersion.recipeId, recipeId), eq(recipeVersion.version, row.from)));
  return base ?? null;
}
