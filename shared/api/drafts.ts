import * as z from 'zod';
import type { ShownDiagnostic } from '#text';
import { clientId, endpoint, id, instant, personRef, requestId, sha256, slug } from './endpoint.ts';
import { checkShape, documentShape } from './recipes.ts';

/** Longest recipe text, in UTF-16 units. Source: the recipe language. */
export const TEXT_LIMIT = 100_000;
/** A text may be too long to compile and is kept all the same, up to this. */
export const KEPT_TEXT_LIMIT = 400_000;

export const draftState = z.enum(['draft', 'in-review', 'published', 'discarded']);
export const draftRow = z.strictObject({
  id,
  title: z.string(),
  number: z.string(),
  slug: z.string(),
  state: draftState,
  revision: z.int(),
  /** The published version it changes; null for a new recipe. */
  from: z.int().nullable(),
  owner: personRef,
  authors: z.array(personRef),
  writtenBy: z.array(personRef),
  updatedAt: instant,
  sentBy: personRef.nullable(),
  sentAt: instant.nullable(),
  note: z.string(),
  sentBack: z.strictObject({ by: z.string(), at: instant, reason: z.string() }).nullable(),
});
export type DraftRow = z.infer<typeof draftRow>;

export const draftPage = z.strictObject({
  draft: draftRow,
  text: z.string(),
  hash: sha256,
  mayWrite: z.boolean(),
  mayTakeBack: z.boolean(),
  base: z.strictObject({ version: z.int(), text: z.string() }).nullable(),
  /** What the compiler in the browser needs to know. */
  facts: z.strictObject({
    recipes: z.record(z.string(), z.array(z.int())),
    topics: z.array(z.string()),
    fixedSlug: z.string().optional(),
    hazardVolts: z.number(),
  }),
});
export type DraftPage = z.infer<typeof draftPage>;

/** Carried by a 409 of `drafts.saveText`: nothing that was typed is lost, it is stored under `saveId`. */
export const saveConflict = z.strictObject({
  saveId: clientId,
  state: draftState,
  revision: z.int(),
  text: z.string(),
  baseText: z.string(),
  savedBy: z.string(),
});
export type SaveConflict = z.infer<typeof saveConflict>;

export const saveRow = z.strictObject({
  saveId: z.string(),
  at: instant,
  by: personRef,
  revision: z.int().nullable(),
  kept: z.enum(['on the draft', 'to the side']),
});

const shown = z.custom<ShownDiagnostic>((value) => typeof value === 'object' && value !== null);
export const draftId = z.strictObject({ id });
const atRevision = { requestId, revision: z.int(), hash: sha256 };

export const draftsContract = {
  'drafts.list': endpoint({
    summary: 'Drafts this person may see',
    answer: z.strictObject({ drafts: z.array(draftRow) }),
  }),
  'drafts.start': endpoint({
    summary: 'Start a recipe, or a change of one',
    body: z.strictObject({
      requestId,
      /** A change of this recipe; its open draft is returned if there is one. */
      changes: slug.optional(),
      /** The text to start from; without it, and without `changes`, the draft starts empty. */
      text: z.string().max(KEPT_TEXT_LIMIT).optional(),
    }),
    answer: z.strictObject({ id, already: z.boolean() }),
  }),
  'drafts.read': endpoint({ summary: 'A draft with its text', params: draftId, answer: draftPage }),
  'drafts.saveText': endpoint({
    summary: 'Save the text (409 with both texts when the draft has moved)',
    params: draftId,
    body: z.strictObject({
      saveId: clientId,
      baseRevision: z.int().nonnegative(),
      text: z.string().max(KEPT_TEXT_LIMIT),
    }),
    answer: z.strictObject({ revision: z.int(), hash: sha256, at: instant }),
  }),
  'drafts.saves': endpoint({
    summary: 'Earlier saves of a draft, newest first',
    params: draftId,
    answer: z.strictObject({ saves: z.array(saveRow) }),
  }),
  'drafts.readSave': endpoint({
    summary: 'The text of one save',
    params: z.strictObject({ id, saveId: clientId }),
    answer: z.strictObject({ text: z.string(), at: instant }),
  }),
  'drafts.setAuthors': endpoint({
    summary: 'Say who else may write a draft',
    params: draftId,
    body: z.strictObject({ requestId, personIds: z.array(z.string()).max(50) }),
    answer: draftRow,
  }),
  'drafts.discard': endpoint({
    summary: 'Put a draft aside (its saves are kept for 90 days)',
    params: draftId,
    body: z.strictObject(atRevision),
    answer: z.strictObject({}),
  }),
  'drafts.send': endpoint({
    summary: 'Send for review; refused with diagnostics while a check fails',
    params: draftId,
    body: z.strictObject({ ...atRevision, note: z.string().trim().max(500) }),
    answer: draftRow,
  }),
  'drafts.takeBack': endpoint({
    summary: 'Take back what one sent',
    params: draftId,
    body: z.strictObject(atRevision),
    answer: draftRow,
  }),
};

export const numberChange = z.strictObject({
  calculator: z.string(),
  example: z.string(),
  result: z.string(),
  label: z.string(),
  before: z.string().nullable(),
  after: z.string().nullable(),
});
export const affectedDesign = z.strictObject({
  id,
  name: z.string(),
  owner: personRef,
  changes: z.array(
    z.strictObject({ label: z.string(), before: z.string(), after: z.string(), newlyBroken: z.boolean() }),
  ),
});
export const reviewRow = z.strictObject({ draft: draftRow, mayDecide: z.boolean(), whyNot: z.string().nullable() });
export const reviewPage = z.strictObject({
  review: reviewRow,
  text: z.string(),
  hash: sha256,
  document: documentShape.nullable(),
  diagnostics: z.array(shown),
  checks: z.array(checkShape),
  base: z.strictObject({ version: z.int(), text: z.string(), document: documentShape }).nullable(),
  numbers: z.array(numberChange),
  designs: z.strictObject({
    seen: z.array(affectedDesign),
    unchanged: z.int(),
    privateCount: z.int(),
    privateNewlyBroken: z.int(),
  }),
  /** What the person who decides must tick, in these words. */
  ticks: z.array(z.string()),
});
export type ReviewPage = z.infer<typeof reviewPage>;

export const reviewsContract = {
  'reviews.list': endpoint({ summary: 'Drafts in review', answer: z.strictObject({ reviews: z.array(reviewRow) }) }),
  'reviews.read': endpoint({ summary: 'Everything a decision needs', params: draftId, answer: reviewPage }),
  'reviews.signOff': endpoint({
    summary: 'Sign off and publish as the next version',
    params: draftId,
    body: z.strictObject({
      ...atRevision,
      ticks: z.array(z.string().max(200)).max(20),
      note: z.string().trim().max(1000),
    }),
    answer: z.strictObject({ slug: z.string(), version: z.int() }),
  }),
  'reviews.sendBack': endpoint({
    summary: 'Send back with a reason',
    params: draftId,
    body: z.strictObject({ ...atRevision, reason: z.string().trim().min(1, 'Say what should change.').max(2000) }),
    answer: draftRow,
  }),
};
