import { parseCookies } from 'better-auth/cookies';
import type { Request, Response } from 'express';
import { KNOWN_FOR_MS } from '../services/accounts/known-browsers.ts';
import type { Settings } from './context.ts';

/** The cookie by which a browser is known again; it lets nobody in, it only spares its owner the pauses that others cause. */
function cookieName({ publicUrl }: Settings): string {
  return publicUrl.startsWith('https:') ? '__Host-quadrille.browser' : 'quadrille.browser';
}

export function browserToken({ settings }: { readonly settings: Settings }, req: Request): string | undefined {
  return parseCookies(req.headers.cookie ?? '').get(cookieName(settings));
}

export function keepBrowserToken({ settings }: { readonly settings: Settings }, res: Response, token: string): void {
  res.cookie(cookieName(settings), token, {
    httpOnly: true,
    sameSite: 'lax',
    secure: settings.publicUrl.startsWith('https:'),
    path: '/',
    maxAge: KNOWN_FOR_MS,
  });
}
