import { randomBytes } from 'node:crypto';
import { type Browser, type BrowserContext, chromium, type Page } from 'playwright-core';
import type { BuiltServer } from './server.ts';

/** An invented admin of the tests. */
export const ADMIN = {
  name: 'Ada Quill',
  email: 'ada@railway.example',
  password: 'a lantern on the north platform',
} as const;

/** A new id as the page makes it. */
export const clientId = () => randomBytes(16).toString('base64url');

/** Chromium without a sandbox, because as root it starts in no other way, and without its own traffic. */
export function launchBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath: '/usr/bin/chromium',
    args: [
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  });
}

/**
 * Collects what a page must not do: errors in the console, uncaught exceptions, and reports of the Content-Security-Policy, from every page of
 * the context that is opened later. `taken` empties the list and gives what stood there.
 */
export async function watchTroubles(context: BrowserContext): Promise<{ taken(): readonly string[] }> {
  const troubles: string[] = [];
  await context.addInitScript(() => {
    document.addEventListener('securitypolicyviolation', (event) => {
      console.error(`policy: ${event.violatedDirective} ${event.blockedURI} ${event.sourceFile}:${event.lineNumber}`);
    });
  });
  context.on('console', (message) => {
    if (message.type() === 'error') troubles.push(`${message.text()} (${message.location().url})`);
  });
  context.on('weberror', (error) => troubles.push(`uncaught: ${error.error().message}`));
  return { taken: () => troubles.splice(0) };
}

/** Makes the first admin by the set-up link that the server printed. */
export async function makeAdmin(server: BuiltServer): Promise<void> {
  const token = new URL(server.setUpLink ?? '').hash.replace('#token=', '');
  const response = await fetch(`${server.url}/api/setup`, {
    method: 'POST',
    headers: { origin: server.url, 'content-type': 'application/json' },
    body: JSON.stringify({ requestId: clientId(), token, ...ADMIN }),
  });
  if (!response.ok) throw new Error(`the admin was not made: ${response.status} ${await response.text()}`);
}

/** Signs in by the page, as a person does, and waits for the recipes. */
export async function signIn(page: Page, url: string, person: { email: string; password: string } = ADMIN) {
  await page.goto(`${url}/sign-in`);
  await page.getByLabel('Work e-mail').fill(person.email);
  await page.getByLabel('Password', { exact: true }).fill(person.password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.getByRole('heading', { level: 1, name: 'What do you need to build?' }).waitFor();
}

/** A request to the server with the context's cookies; throws on a refusal. Shapes are those of the contract. */
export async function ask<T>(
  context: BrowserContext,
  method: 'GET' | 'POST' | 'PUT' | 'PATCH',
  address: string,
  body?: object,
): Promise<T> {
  const response = await context.request.fetch(address, {
    method,
    headers: { origin: new URL(address).origin },
    ...(body === undefined ? {} : { data: body }),
  });
  if (!response.ok()) throw new Error(`${method} ${address}: ${response.status()} ${await response.text()}`);
  return (await response.json()) as T;
}
