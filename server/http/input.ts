import type * as z from 'zod';
import { CONTRACT, type Endpoint, type Failure, type FieldError, type RouteName } from '#api';
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

const FORMATS: Readonly<Record<string, string>> = {
  email: 'an e-mail address',
  url: 'an address such as https://bench.example',
  uuid: 'an id',
  datetime: 'an instant such as 2026-03-14T09:30:00.000Z',
  date: 'a date such as 2026-03-14',
};

/** Speaks where the contract gives no words of its own. */
function fieldWords(issue: z.core.$ZodRawIssue): string | undefined {
  switch (issue.code) {
    case 'invalid_type':
      return issue.input === undefined
        ? 'This field is needed.'
        : `Unexpected ${nameOf(issue.input)}, expected ${issue.expected}.`;
    case 'invalid_format':
      return `Unexpected text, expected ${FORMATS[issue.format] ?? 'another form'}.`;
    case 'invalid_value':
      return `Unexpected value, expected ${issue.values.map(String).join(', ')}.`;
    case 'too_small':
      return issue.origin === 'string'
        ? `Use at least ${issue.minimum} characters.`
        : `Expected at least ${issue.minimum}.`;
    case 'too_big':
      return issue.origin === 'string'
        ? `Use at most ${issue.maximum} characters.`
        : `Expected at most ${issue.maximum}.`;
    default:
      return undefined;
  }
}

function nameOf(value: unknown): string {
  if (value === null) return 'nothing';
  return Array.isArray(value) ? 'list' : typeof value;
}
