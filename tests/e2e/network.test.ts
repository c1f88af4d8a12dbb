import { mkdtempSync, rmSync } from 'node:fs';
import { networkInterfaces, tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { ADMIN, launchBrowser, makeAdmin, signIn, watchTroubles } from './browser.ts';
import { type BuiltServer, freePort, startBuilt } from './server.ts';

let folder: string;
let server: BuiltServer;
let browser: Browser;
let context: BrowserContext;
let page: Page;
let troubles: { taken(): readonly string[] };

/** The first IPv4 address by which other machines reach this one. */
function networkAddress(): string {
  const found = Object.values(networkInterfaces())
    .flatMap((each) => each ?? [])
    .find(({ family, internal }) => family === 'IPv4' && !internal);
  if (!found) throw new Error('this machine has no address but its loopback; the test needs one');
  return found.address;
}

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'quadrille-network-'));
  const port = await freePort();
  const url = `http://${networkAddress()}:${port}`;
  server = await startBuilt(join(folder, 'data'), port, { HOST: '0.0.0.0', PUBLIC_URL: url });
  await makeAdmin(server);
  browser = await launchBrowser();
  context = await browser.newContext();
  troubles = await watchTroubles(context);
  page = await context.newPage();
});
afterAll(async () => {
  await browser.close();
  await server.stop('SIGKILL');
  rmSync(folder, { recursive: true, force: true });
});

describe('over plain http from another address than the loopback', () => {
  test('a person signs in, puts in numbers that are kept, and copies them', async () => {
    await signIn(page, server.url);
    expect(await page.evaluate(() => [window.isSecureContext, 'clipboard' in navigator, 'locks' in navigator])).toEqual(
      [false, false, false],
    );
    await page.getByRole('searchbox', { name: 'Search the recipes' }).fill('rail split');
    await page.getByRole('link', { name: /Rail splitter/ }).click();
    const panel = page.getByRole('region', { name: 'Your numbers' });
    const field = panel.getByRole('textbox', { name: 'Upper resistor' });
    await field.fill('12.4 kΩ');
    await field.press('Enter');
    await panel.locator('.calculator-standing').getByText('keeping').waitFor();
    await panel.locator('.calculator-standing').getByText('kept', { exact: true }).waitFor();
    await page.reload();
    await panel.waitFor();
    expect(await field.inputValue()).toBe('12.4 kΩ');

    await panel.getByRole('button', { name: 'Copy numbers' }).click();
    await panel.getByRole('button', { name: 'Copied' }).waitFor();
    expect(await pasted()).toContain('12.4 kΩ');
    expect(troubles.taken()).toEqual([]);
  });

  test('opened at another address than the team uses, the sign-in page says which one to use, and nobody is signed in there', async () => {
    const here = new URL(server.url);
    here.hostname = 'localhost';
    const elsewhere = await (await browser.newContext()).newPage();
    await elsewhere.goto(`${here.origin}/recipes`);
    const note = elsewhere.getByText('Your team uses Quadrille at another address.').locator('xpath=..');
    expect(await note.textContent()).toBe(
      `Your team uses Quadrille at another address. This is ${here.origin}; sign in at ${server.url}.`,
    );
    await elsewhere.getByLabel('Work e-mail').fill(ADMIN.email);
    await elsewhere.getByLabel('Password', { exact: true }).fill(ADMIN.password);
    await elsewhere.getByRole('button', { name: 'Sign in' }).click();
    await elsewhere.getByRole('form').getByText(`but Quadrille is used at ${server.url}`).waitFor();
    await note.getByRole('link', { name: server.url }).click();
    await elsewhere.waitForURL(`${server.url}/**`);
    expect(await elsewhere.getByText('at another address').count()).toBe(0);
  });
});

/** What the clipboard holds, by pasting it into a field. */
async function pasted(): Promise<string> {
  await page.evaluate(() => {
    const area = document.createElement('textarea');
    area.setAttribute('aria-label', 'Paste here');
    document.body.append(area);
    area.focus();
  });
  await page.keyboard.press('Control+V');
  return page.getByRole('textbox', { name: 'Paste here' }).inputValue();
}
