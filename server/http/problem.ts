import type { Response } from 'express';
import type { Failure, ProblemBody } from '#api';

/** Failure → status, and what the status is called. Titles are the same for every problem of a kind; details speak of the one at hand. */
export const FAILURES = {
  'not-signed-in': { status: 401, title: 'Sign in first' },
  forbidden: { status: 403, title: 'Not allowed' },
  'not-found': { status: 404, title: 'Not found' },
  invalid: { status: 400, title: 'Some fields need another value' },
  stale: { status: 409, title: 'It changed in the meantime' },
  'checks-failed': { status: 422, title: 'A check fails' },
  'too-many': { status: 429, title: 'Too many tries' },
  'too-large': { status: 413, title: 'Too large' },
  gone: { status: 410, title: 'No longer there' },
} as const satisfies Record<Failure['kind'], { status: number; title: string }>;

/** Problems that the frame itself answers, before or after any service. */
export const FRAME_PROBLEMS = {
  'other-origin': { status: 403, title: 'Sent from another site' },
  'not-json': { status: 415, title: 'Not JSON' },
  'unread-body': { status: 400, title: 'The body could not be read' },
  fault: { status: 500, title: 'A fault in the server' },
} as const;
type FrameProblem = keyof typeof FRAME_PROBLEMS;

/** Makes the body (RFC 9457) of a refused request. Members of `extra` stand beside the standard ones and never replace them. */
export function problemOf(failure: Failure, requestId: string): ProblemBody {
  const { status, title } = FAILURES[failure.kind];
  return {
    ...('extra' in failure ? failure.extra : {}),
    ...('fields' in failure ? { fields: [...failure.fields] } : {}),
    ...('retryAfterSeconds' in failure ? { retryAfterSeconds: failure.retryAfterSeconds } : {}),
    ...('detail' in failure ? { detail: failure.detail } : {}),
    type: `/api/docs#${failure.kind}`,
    title,
    status,
    code: failure.kind,
    requestId,
  };
}

export function sendFailure(res: Response, failure: Failure): void {
  if (failure.kind === 'too-many') res.set('Retry-After', String(failure.retryAfterSeconds));
  send(res, problemOf(failure, String(res.req.id)));
}

export function sendFrameProblem(res: Response, code: FrameProblem, detail: string): void {
  const { status, title } = FRAME_PROBLEMS[code];
  send(res, { type: `/api/docs#${code}`, title, status, code, detail, requestId: String(res.req.id) });
}

function send(res: Response, body: ProblemBody): void {
  res.status(body.status).type('application/problem+json').send(JSON.stringify(body));
}
