import { randomBytes } from 'node:crypto';
import type { RequestHandler, Response } from 'express';
import helmet from 'helmet';
import { sendFrameProblem } from './problem.ts';

/** Where a page's nonce waits for the policy and the page itself. */
export function nonceOf(res: Response): string {
  res.locals.nonce ??= randomBytes(16).toString('base64');
  return String(res.locals.nonce);
}

/** Headers of every answer. The policy allows no inline script, no eval and no style attribute; style elements need the page's nonce. */
export function securityHeaders(publicUrl: string): RequestHandler {
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'none'"],
        baseUri: ["'none'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
        objectSrc: ["'none'"],
        scriptSrc: ["'self'"],
        workerSrc: ["'self'"],
        connectSrc: ["'self'"],
        imgSrc: ["'self'", 'data:'],
        fontSrc: ["'self'"],
        manifestSrc: ["'self'"],
        styleSrc: ["'self'"],
        styleSrcElem: ["'self'", (_req, res) => `'nonce-${nonceOf(res as Response)}'`],
        styleSrcAttr: ["'none'"],
      },
    },
    strictTransportSecurity: publicUrl.startsWith('https:'),
    crossOriginEmbedderPolicy: false,
    // Browsers ignore these over plain http from another machine and complain in the console; https keeps them.
    crossOriginOpenerPolicy: publicUrl.startsWith('https:'),
    originAgentCluster: publicUrl.startsWith('https:'),
  });
}

/** Takes changing requests from our own pages only: a foreign page can send a form or a simple request with our cookie. */
export function sameOrigin(origins: readonly string[]): RequestHandler {
  return function ownPagesOnly(req, res, next) {
    if (req.method === 'GET' || req.method === 'HEAD') return next();
    const origin = req.get('origin');
    const own = origin === undefined ? req.get('sec-fetch-site') === 'same-origin' : origins.includes(origin);
    if (own) return next();
    sendFrameProblem(
      res,
      'other-origin',
      `The page was opened at ${origin ?? 'an address it does not name'}, but Quadrille is used at ${origins[0]}.`,
    );
  };
}
