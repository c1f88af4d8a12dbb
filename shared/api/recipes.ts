import * as z from 'zod';
import type { Check, RecipeDocument } from '#recipe';
import { calendarDate, clientId, endpoint, instant, requestId, sha256, slug } from './endpoint.ts';

export const VERSION_STATES = ['published', 'superseded', 'withdrawn'] as const;
export const versionState = z.enum(VERSION_STATES);
export type VersionState = z.infer<typeof versionState>;

/** Documents are made by our own compiler and stored as they are; their shape is held by the type, not parsed again. */
export const documentShape = z.custom<RecipeDocument>((value) => typeof value === 'object' && value !== null);
export const checkShape = z.custom<Check>((value) => typeof value === 'object' && value !== null);

export const versionNumber = z.coerce.number().int().positive();

export const recipeRow = z.strictObject({
  slug: z.string(),
  number: z.string(),
  title: z.string(),
  summary: z.string(),
  purpose: z.string(),
  topics: z.array(z.string()),
  supply: z.string(),
  hazards: z.array(z.string()),
  version: z.int(),
  state: versionState,
  publishedAt: instant,
  reviewDue: calendarDate.nullable(),
  reviewOverdue: z.boolean(),
  owners: z.array(z.string()),
  /** Who signed off the version of this row; null while nobody of the team has. */
  signedBy: z.string().nullable(),
  /** `supplied` until an editor of the team signs it off. */
  origin: z.enum(['team', 'supplied']),
  designs: z.int(),
});
export type RecipeRow = z.infer<typeof recipeRow>;

export const versionRow = z.strictObject({
  version: z.int(),
  state: versionState,
  at: instant,
  writtenBy: z.array(z.string()),
  signedBy: z.string().nullable(),
  selfSigned: z.boolean(),
  supplied: z.string().nullable(),
  /** What the sender said about the change. */
  note: z.string(),
});
export type VersionRow = z.infer<typeof versionRow>;

export const recipePage = z.strictObject({
  recipe: recipeRow,
  version: versionRow,
  document: documentShape,
  /** Hash of the version's text, to be sent with a sign-off of a supplied recipe. */
  textHash: sha256,
  versions: z.array(versionRow),
  draft: z.strictObject({ id: z.string(), mine: z.boolean() }).nullable(),
});
export type RecipePage = z.infer<typeof recipePage>;

/** One kept field: what was typed, and what the typing person last saw (null: the recipe's own value). */
export const keptField = z.strictObject({ text: z.string().max(200).nullable(), base: z.string().max(200).nullable() });
export const keptInputs = z.record(z.string(), z.record(z.string(), z.string()));
export type KeptInputs = z.infer<typeof keptInputs>;

export const searchHit = z.strictObject({ slug: z.string(), matched: z.array(z.string()) });

export const recipesContract = {
  'recipes.list': endpoint({
    summary: 'Every recipe that can be read',
    answer: z.strictObject({ recipes: z.array(recipeRow) }),
  }),
  'recipes.search': endpoint({
    summary: 'Search names, purposes, topics and labels; best first',
    query: z.strictObject({ q: z.string().max(200) }),
    answer: z.strictObject({ hits: z.array(searchHit) }),
  }),
  'recipes.read': endpoint({
    summary: 'One recipe at its published or at a named version',
    params: z.strictObject({ slug }),
    query: z.strictObject({ version: versionNumber.optional() }),
    answer: recipePage,
  }),
  'recipes.text': endpoint({
    summary: 'The text of a version, as its author wrote it',
    params: z.strictObject({ slug }),
    query: z.strictObject({ version: versionNumber.optional() }),
    answer: z.strictObject({ slug: z.string(), version: z.int(), text: z.string() }),
  }),
  'recipes.signOffSupplied': endpoint({
    summary: 'Sign off a supplied recipe as it stands',
    params: z.strictObject({ slug }),
    body: z.strictObject({ requestId, version: z.int(), hash: sha256, ticks: z.array(z.string().max(200)).max(20) }),
    answer: z.strictObject({ slug: z.string(), version: z.int() }),
  }),
  'inputs.read': endpoint({
    summary: 'What this person last typed on a recipe',
    params: z.strictObject({ slug }),
    answer: z.strictObject({ calculators: keptInputs }),
  }),
  'inputs.keep': endpoint({
    summary: 'Keep what was typed, field by field; the last to arrive wins',
    params: z.strictObject({ slug, calculator: z.string().max(80) }),
    body: z.strictObject({ saveId: clientId, fields: z.record(z.string().max(80), keptField) }),
    answer: z.strictObject({ fields: z.record(z.string(), z.string()), moved: z.array(z.string()) }),
  }),
};
