import * as z from 'zod';

/** One thing wrong with one field; `field` is a path such as `fields.V_d.text`. */
export const fieldError = z.object({ field: z.string(), message: z.string() });
export type FieldError = z.infer<typeof fieldError>;

/**
 * A refused request, as services return it. `server/http` turns the kind into a status in one table; the body is
 * `application/problem+json` (RFC 9457) with `code` and the extra members named here.
 */
export type Failure =
  | { readonly kind: 'not-signed-in' }
  | { readonly kind: 'forbidden'; readonly detail: string }
  | { readonly kind: 'not-found'; readonly detail: string }
  | { readonly kind: 'invalid'; readonly detail: string; readonly fields: readonly FieldError[] }
  /** The object moved since it was read. `extra` carries what the client needs to lose nothing (see each endpoint's `conflict`). */
  | { readonly kind: 'stale'; readonly detail: string; readonly extra: Readonly<Record<string, unknown>> }
  | { readonly kind: 'checks-failed'; readonly detail: string; readonly extra: Readonly<Record<string, unknown>> }
  | { readonly kind: 'too-many'; readonly detail: string; readonly retryAfterSeconds: number }
  | { readonly kind: 'too-large'; readonly detail: string }
  | { readonly kind: 'gone'; readonly detail: string };

export const problemBody = z.looseObject({
  type: z.string(),
  title: z.string(),
  status: z.int(),
  code: z.string(),
  detail: z.string().optional(),
  fields: z.array(fieldError).optional(),
  retryAfterSeconds: z.int().optional(),
  requestId: z.string().optional(),
});
export type ProblemBody = z.infer<typeof problemBody>;
