import { fromNodeHeaders } from 'better-auth/node';
import type { Request, Response } from 'express';
import * as z from 'zod';
import type { Failure } from '#api';
import { fail, ok, type Result } from '#text';
import { ADDRESS_HEADER, type Auth } from './auth.ts';
import type { Settings } from './context.ts';

interface Passing {
  readonly auth: Auth;
  readonly settings: Settings;
}

export interface Passed {
  /** Whom the answer speaks of; empty when it speaks of nobody. */
  readonly userId: string;
  readonly setCookies: (res: Response) => void;
}

/** What better-auth answers, as far as we read it. */
const answerShape = z.looseObject({ code: z.string().optional(), user: z.looseObject({ id: z.string() }).optional() });

/**
 * Passes a request on to better-auth with a body that was parsed here, and turns its answer into ours: no token leaves in a body.
 * When it cannot: a failure in our words; a fault inside better-auth is thrown.
 */
export async function passOn(
  { auth, settings }: Passing,
  req: Request,
  path: string,
  body: Readonly<Record<string, unknown>>,
): Promise<Result<Passed, Failure>> {
  const request = new Request(`${settings.publicUrl}/api/auth${path}`, {
    method: 'POST',
    headers: headersFor(req),
    body: JSON.stringify(body),
  });
  const response = await auth.handler(request);
  const answer = answerShape.parse(await response.json());
  if (!response.ok) return fail(inOurWords(response.status, answer.code ?? ''));
  const cookies = response.headers.getSetCookie();
  return ok({
    userId: answer.user?.id ?? '',
    setCookies: (res) => {
      for (const cookie of cookies) res.append('Set-Cookie', cookie);
    },
  });
}

/** The session that a request carries, from the database. */
export async function signedInHere({ auth }: Passing, req: Request): Promise<{ readonly sessionId: string } | null> {
  const found = await auth.api.getSession({ headers: fromNodeHeaders(req.headers) });
  return found && { sessionId: found.session.id };
}

/** Only what better-auth needs, with the address as Express knows it: a client could write any. */
function headersFor(req: Request): Headers {
  const headers = new Headers({ 'content-type': 'application/json', [ADDRESS_HEADER]: req.ip ?? '' });
  for (const name of ['cookie', 'origin', 'user-agent', 'sec-fetch-site', 'sec-fetch-mode', 'sec-fetch-dest']) {
    const value = req.get(name);
    if (value !== undefined) headers.set(name, value);
  }
  return headers;
}

function inOurWords(status: number, code: string): Failure {
  switch (code) {
    case 'INVALID_EMAIL_OR_PASSWORD':
      return {
        kind: 'invalid',
        detail: 'This address and this password do not belong together.',
        fields: [{ field: 'password', message: 'This address and this password do not belong together.' }],
      };
    case 'FAILED_TO_CREATE_SESSION':
      return { kind: 'forbidden', detail: 'This account is deactivated. An admin can activate it again.' };
    default:
      if (status === 401) return { kind: 'not-signed-in' };
      if (status === 403) return { kind: 'forbidden', detail: 'This request did not come from a page of Quadrille.' };
      throw new Error(`better-auth answered ${status} ${code}.`);
  }
}
