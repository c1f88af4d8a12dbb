import type { IncomingHttpHeaders } from 'node:http';
import type { RequestHandler } from 'express';
import type { Person } from './context.ts';

/** Tells who sends a request. Filled by `server/services` with better-auth; tests sign people in without a password. */
export interface SessionReader {
  /** The person whose session these headers carry; null for nobody, for an ended session and for a deactivated person. */
  read(headers: IncomingHttpHeaders): Promise<Person | null>;
  /** Forgets what is cached of one person's sessions, after an act that succeeded. */
  forget(personId: string): void;
}

/** The accounts behind a running server. */
export interface Accounts {
  readonly sessions: SessionReader;
  /** Answers the paths of `AUTH_ROUTES`; the frame has let nothing else through, and has not read the body. */
  readonly handler: RequestHandler;
}

declare global {
  namespace Express {
    interface Request {
      /** Set by the session middleware on every path under /api. */
      person: Person | null;
    }
  }
}

/** Puts `person` on the request. */
export function readSession(sessions: SessionReader): RequestHandler {
  return async function session(req, _res, next) {
    req.person = await sessions.read(req.headers);
    next();
  };
}
