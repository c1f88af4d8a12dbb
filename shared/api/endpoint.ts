import * as z from 'zod';

/** What one endpoint takes and gives. Objects are strict: a field that is not named here is refused. */
export interface Endpoint {
  readonly summary: string;
  readonly params?: z.ZodObject;
  readonly query?: z.ZodObject;
  readonly body?: z.ZodType;
  readonly answer: z.ZodType;
}

export function endpoint<const E extends Endpoint>(definition: E): E {
  return definition;
}

/** Ids made by the client with `crypto.getRandomValues`: 22 characters of base64url, 128 bits and a little. */
export const clientId = z.string().regex(/^[A-Za-z0-9_-]{16,40}$/);
/** Carried by every changing request; a repeat by the same person within 24 hours gets the first answer. */
export const requestId = clientId;
export const id = z.uuid();
export const slug = z.string().regex(/^[a-z0-9-]{3,80}$/);
export const instant = z.iso.datetime();
export const calendarDate = z.iso.date();
export const sha256 = z.string().regex(/^[0-9a-f]{64}$/);
export const nothing = z.strictObject({});
export const onlyRequestId = z.strictObject({ requestId });
export const personRef = z.strictObject({ id: z.string(), name: z.string() });
export type PersonRef = z.infer<typeof personRef>;
