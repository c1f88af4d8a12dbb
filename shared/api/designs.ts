import * as z from 'zod';
import { endpoint, id, instant, personRef, requestId, slug } from './endpoint.ts';
import { documentShape, keptInputs, versionState } from './recipes.ts';

/** Results and limit states as last shown to the owner, with the engine that made them. */
export const shownResults = z.strictObject({
  engine: z.int(),
  calculators: z.record(
    z.string(),
    z.strictObject({
      results: z.record(
        z.string(),
        z.strictObject({ text: z.string(), low: z.number().nullable(), high: z.number().nullable() }),
      ),
      limits: z.record(z.string(), z.string()),
    }),
  ),
});
export type ShownResults = z.infer<typeof shownResults>;

export const designRow = z.strictObject({
  id,
  name: z.string(),
  project: z.string(),
  owner: personRef,
  visibility: z.enum(['team', 'only me']),
  recipe: z.strictObject({ slug: z.string(), number: z.string(), title: z.string() }),
  version: z.int(),
  versionState,
  newestVersion: z.int(),
  limitsBroken: z.int(),
  updatedAt: instant,
});
export type DesignRow = z.infer<typeof designRow>;

export const designPage = z.strictObject({
  design: designRow,
  inputs: keptInputs,
  note: z.string(),
  shown: shownResults,
  document: documentShape,
  mayChange: z.boolean(),
});
export type DesignPage = z.infer<typeof designPage>;

const name = z.string().trim().min(1, 'Give the design a name.').max(120);
const project = z.string().trim().max(120);
const note = z.string().max(4000);
const visibility = z.enum(['team', 'only me']);

export const designsContract = {
  'designs.list': endpoint({
    summary: 'Designs of this person and of the team',
    answer: z.strictObject({ designs: z.array(designRow) }),
  }),
  'designs.keep': endpoint({
    summary: 'Keep the numbers as a named design, pinned to a version',
    body: z.strictObject({
      requestId,
      slug,
      version: z.int(),
      name,
      project,
      note,
      visibility,
      inputs: keptInputs,
      shown: shownResults,
    }),
    answer: designRow,
  }),
  'designs.read': endpoint({
    summary: 'A design with the document of its version',
    params: z.strictObject({ id }),
    answer: designPage,
  }),
  'designs.update': endpoint({
    summary: 'Change a design (409 when it moved since `updatedAt`)',
    params: z.strictObject({ id }),
    body: z.strictObject({
      requestId,
      updatedAt: instant,
      name: name.optional(),
      project: project.optional(),
      note: note.optional(),
      visibility: visibility.optional(),
      inputs: keptInputs.optional(),
      shown: shownResults.optional(),
    }),
    answer: designRow,
  }),
  'designs.remove': endpoint({
    summary: 'Remove a design',
    params: z.strictObject({ id }),
    body: z.strictObject({ requestId, updatedAt: instant }),
    answer: z.strictObject({}),
  }),
};
