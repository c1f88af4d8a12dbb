import type { Browser, BrowserContext } from 'playwright-core';
import type { Role } from '#api';
import { ask, clientId } from './browser.ts';

/** Somebody with a browser of their own, signed in. */
export interface SignedInPerson {
  readonly name: string;
  readonly email: string;
  readonly password: string;
  readonly context: BrowserContext;
}

/** Invites a person as the admin does, accepts by the link, and signs in. */
export async function addPerson(
  browser: Browser,
  url: string,
  admin: BrowserContext,
  { name, role }: { readonly name: string; readonly role: Role },
): Promise<SignedInPerson> {
  const email = `${name.toLowerCase().replaceAll(' ', '.')}@railway.example`;
  const password = `a whistle for ${name}`;
  const requestId = clientId();
  const { id } = await ask<{ id: string }>(admin, 'POST', `${url}/api/invitations`, { requestId, email, role });
  const link = await ask<{ url: string }>(admin, 'POST', `${url}/api/invitations/${id}/link`, {
    requestId: clientId(),
  });
  const token = new URL(link.url).hash.replace('#token=', '');
  const context = await browser.newContext();
  await ask(context, 'POST', `${url}/api/invitations/accept`, { requestId: clientId(), token, name, password });
  await signInQuietly(context, url, { email, password });
  return { name, email, password, context };
}

/** Signs a context in without a page, where signing in is not what is looked at. */
export async function signInQuietly(
  context: BrowserContext,
  url: string,
  { email, password }: { readonly email: string; readonly password: string },
): Promise<void> {
  await ask(context, 'POST', `${url}/api/auth/sign-in/email`, { email, password });
}
