import compression from 'compression';
import { sql } from 'drizzle-orm';
import express, { type ErrorRequestHandler, type Express } from 'express';
import { AUTH_ROUTES, RELEASE_HEADER } from '#api';
import { apiPage } from './api-page.ts';
import type { Frame } from './http/frame.ts';
import { requestLog } from './http/logging.ts';
import type { Pages } from './http/pages.ts';
import { sendFailure, sendFrameProblem } from './http/problem.ts';
import { mountRoutes, refusal, type Services } from './http/route.ts';
import { nonceOf, sameOrigin, securityHeaders } from './http/security.ts';
import { readSession } from './http/session.ts';
import { openapiDocument } from './openapi.ts';

export interface AppDeps {
  readonly frame: Frame;
  readonly services: Services;
  /** Origins from which changing requests are taken; the first is named to those that come from elsewhere. */
  readonly origins: readonly string[];
  readonly behindProxy: boolean;
  readonly pages: Pages;
  /** False while developing: Vite's pages need inline scripts. */
  readonly securityHeaders: boolean;
}

/** Paths outside of the contract that need no sign-in and tell nothing of the team. */
export const OPEN_PATHS = ['/healthz', '/readyz', '/api/openapi.json', '/api/docs'] as const;

/** Puts the application together; it listens to nothing. */
export function createApp(deps: AppDeps): Express {
  const { frame } = deps;
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', deps.behindProxy ? 'loopback' : false);
  mountHealth(app, frame);
  app.use(requestLog(frame.log));
  if (deps.securityHeaders) app.use(securityHeaders(frame.settings.publicUrl));
  app.use(compression());
  app.use('/api', function headers(_req, res, next) {
    res.set('Cache-Control', 'private, no-store').set(RELEASE_HEADER, frame.settings.release);
    next();
  });
  mountDocuments(app, frame);
  app.use('/api', sameOrigin(deps.origins), readSession(frame.accounts.sessions));
  mountAccounts(app, frame);
  mountRoutes(app, deps.services, frame);
  app.use('/api', function nothingHere(_req, res) {
    sendFailure(res, { kind: 'not-found', detail: 'There is nothing at this address.' });
  });
  deps.pages.mount(app);
  app.use(lastHandler);
  return app;
}

/** `/healthz`: the process answers. `/readyz`: the database does too. */
function mountHealth(app: Express, frame: Frame): void {
  app.get('/healthz', function healthz(_req, res) {
    res.set('Cache-Control', 'no-store').json({ ok: true });
  });
  app.get('/readyz', async function readyz(_req, res) {
    await frame.db.execute(sql`select 1`);
    res.set('Cache-Control', 'no-store').json({ ok: true });
  });
}

function mountDocuments(app: Express, frame: Frame): void {
  const { release } = frame.settings;
  // Made when it is first asked for: it took a sixth of the time of a start.
  let document: ReturnType<typeof openapiDocument> | undefined;
  app.get('/api/openapi.json', function openapi(_req, res) {
    document ??= openapiDocument(release);
    res.json(document);
  });
  app.get('/api/docs', function docs(_req, res) {
    res.type('html').send(apiPage(release, nonceOf(res)));
  });
}

/** better-auth behind an allow-list of exact paths, each with its gate. */
function mountAccounts(app: Express, frame: Frame): void {
  for (const [path, action] of Object.entries(AUTH_ROUTES)) {
    app.post(
      path,
      function authGate(req, res, next) {
        const refused = refusal(req.person, action);
        if (refused) sendFailure(res, refused);
        else next();
      },
      express.json({ limit: '16kb' }),
      frame.accounts.handler,
    );
  }
}

/** What still arrives here is a body that could not be read, or a fault of ours: logged whole, told without its inside. */
const lastHandler: ErrorRequestHandler = (error: unknown, req, res, next) => {
  if (res.headersSent) return next(error);
  const status = typeof error === 'object' && error !== null && 'status' in error ? error.status : 500;
  if (status === 413)
    return sendFailure(res, { kind: 'too-large', detail: 'The body is larger than this address takes.' });
  if (typeof status === 'number' && status >= 400 && status < 500) {
    return sendFrameProblem(
      res,
      'unread-body',
      'Unexpected body or address, expected JSON in UTF-8 and a well-formed address.',
    );
  }
  req.log.error({ err: error }, 'fault');
  sendFrameProblem(res, 'fault', `This was written to the server's log under ${String(req.id)}.`);
};
