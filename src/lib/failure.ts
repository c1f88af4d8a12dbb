import type { FieldError, ProblemBody } from '#api';

/** Why a request gave no answer to use. `message` is a sentence for people; `fields` belong to fields of a form. */
export type ClientFailure = { readonly message: string; readonly fields: readonly FieldError[] } & (
  | { readonly kind: 'offline' | 'timeout' | 'unreadable' }
  | { readonly kind: 'refused'; readonly status: number; readonly code: string; readonly problem: ProblemBody }
);

export const NO_CONNECTION = 'The server did not answer. Is this machine connected?';
const TOO_SLOW = 'The server took too long to answer.';
const UNREADABLE = 'The answer is not one this page knows. Reload the page to get the newest one.';

export function withoutAnswer(kind: 'offline' | 'timeout' | 'unreadable'): ClientFailure {
  const message = kind === 'offline' ? NO_CONNECTION : kind === 'timeout' ? TOO_SLOW : UNREADABLE;
  return { kind, message, fields: [] };
}

/** Reads a refusal, ours (RFC 9457) or that of the sign-in library (`{ code, message }`). */
export function refusalOf(status: number, body: unknown, headers: Headers): ClientFailure {
  const said = typeof body === 'object' && body !== null ? body : {};
  const detail = textAt(said, 'detail') ?? textAt(said, 'message') ?? textAt(said, 'title');
  const code = textAt(said, 'code') ?? `status-${status}`;
  const fields = fieldsAt(said);
  const wait = 'retryAfterSeconds' in said ? Number(said.retryAfterSeconds) : waitFrom(headers);
  const problem: ProblemBody = {
    ...said,
    type: textAt(said, 'type') ?? 'about:blank',
    title: textAt(said, 'title') ?? `Refused with status ${status}`,
    status,
    code,
    ...(Number.isInteger(wait) && wait > 0 ? { retryAfterSeconds: wait } : {}),
  };
  const message = detail ?? (status >= 500 ? SERVER_FAULT : `The server refused this (status ${status}).`);
  return { kind: 'refused', status, code, problem, message, fields };
}

const SERVER_FAULT =
  'The server met a fault of its own. Nothing was changed; try again, and tell your admin if it stays.';

function waitFrom(headers: Headers): number {
  return Number(headers.get('retry-after') ?? headers.get('x-retry-after') ?? 0);
}

function textAt(said: object, name: string): string | undefined {
  const value: unknown = Reflect.get(said, name);
  return typeof value === 'string' && value !== '' ? value : undefined;
}

function fieldsAt(said: object): readonly FieldError[] {
  const fields: unknown = Reflect.get(said, 'fields');
  if (!Array.isArray(fields)) return [];
  return fields.flatMap((each: unknown) => {
    if (typeof each !== 'object' || each === null) return [];
    const field = textAt(each, 'field');
    const message = textAt(each, 'message');
    return field === undefined || message === undefined ? [] : [{ field, message }];
  });
}

/** Tells whether the same request may be sent again by itself: nobody refused it. */
export function mayTryAgain(failure: ClientFailure): boolean {
  if (failure.kind !== 'refused') return failure.kind !== 'unreadable';
  return failure.status >= 500 || failure.status === 429;
}

export function isSignedOut(failure: ClientFailure): boolean {
  return failure.kind === 'refused' && failure.status === 401;
}
