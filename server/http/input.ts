import type * as z from 'zod';
import { CONTRACT, type Endpoint, type Failure, type FieldError, fieldWords, type RouteName } from '#api';
import { fail, ok, type Result } from '#text';

interface Parts {
  readonly params: unknown;
  readonly query: unknown;
  readonly body: unknown;
}

/**
 * Parses what a request carries by the contract; unknown fields are refused.
 * When it cannot: `not-found` for an address that names nothing, `invalid` with one error per field for the rest.
 */
export function parseInput(name: RouteName, parts: Parts): Result<Readonly<Record<string, unknown>>, Failure> {
  const endpoints: Readonly<Record<RouteName, Endpoint>> = CONTRACT;
  const endpoint = endpoints[name];
  const params = endpoint.params?.safeParse(parts.params);
  if (params && !params.success) return fail({ kind: 'not-found', detail: 'There is nothing at this address.' });
  const fields: FieldError[] = [];
  const values: unknown[] = [params?.data];
  for (const part of ['query', 'body'] as const) {
    const parsed = endpoint[part]?.safeParse(parts[part], { error: fieldWords });
    if (parsed?.success === false) fields.push(...parsed.error.issues.flatMap(fieldErrors));
    else values.push(parsed?.data);
  }
  return fields.length === 0 ? ok(Object.assign({}, ...values)) : fail(needOthers(fields));
}

/** Parses a body that stands outside of the contract, in the same words. */
export function parseBody<S extends z.ZodType>(schema: S, body: unknown): Result<z.output<S>, Failure> {
  const parsed = schema.safeParse(body, { error: fieldWords });
  return parsed.success ? ok(parsed.data) : fail(needOthers(parsed.error.issues.flatMap(fieldErrors)));
}

function needOthers(fields: readonly FieldError[]): Failure {
  const count = fields.length === 1 ? 'One field needs' : `${fields.length} fields need`;
  return { kind: 'invalid', detail: `${count} another value.`, fields };
}

function fieldErrors(issue: z.core.$ZodIssue): FieldError[] {
  if (issue.code !== 'unrecognized_keys') return [{ field: issue.path.join('.'), message: issue.message }];
  return issue.keys.map((key) => ({ field: [...issue.path, key].join('.'), message: 'Unexpected field.' }));
}
