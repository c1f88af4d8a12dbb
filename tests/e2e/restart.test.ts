import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { ask, clientId, launchBrowser, makeAdmin, signIn } from './browser.ts';
import { type BuiltServer, freePort, startBuilt } from './server.ts';

const SLUG = 'unity-difference-amplifier';
const NOT_YET = 'not yet kept: no connection';

let folder: string;
let port: number;
let server: BuiltServer;
let browser: Browser;
let context: BrowserContext;
let page: Page;

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'quadrille-restart-'));
  port = await freePort();
  await begin();
  await makeAdmin(server);
  browser = await launchBrowser();
  context = await browser.newContext();
  await signIn(await context.newPage(), server.url);
});
afterAll(async () => {
  await browser.close();
  await server.stop('SIGKILL');
  rmSync(folder, { recursive: true, force: true });
});
beforeEach(async () => {
  for (const open of context.pages()) await open.close();
  page = await context.newPage();
});

async function begin(): Promise<void> {
  server = await startBuilt(join(folder, 'data'), port);
}

describe('a server that is killed while a page is open', () => {
  test('loses no number typed on a recipe: it stays, is kept when the server is back, and stands there after a reload', async () => {
    await page.goto(`${server.url}/recipes/${SLUG}`);
    const panel = page.getByRole('region', { name: 'Your numbers' });
    const field = panel.getByRole('textbox', { name: 'Positive supply' });
    const standing = panel.locator('.calculator-standing');
    await field.fill('14 V');
    await field.press('Enter');
    await standing.getByText('kept', { exact: true }).waitFor();

    await server.stop('SIGKILL');
    await field.fill('9.5 V');
    await standing.getByText(NOT_YET).waitFor();
    expect(await field.inputValue()).toBe('9.5 V');
    expect(await page.getByRole('alert').allInnerTexts()).toContain(NOT_YET);

    await begin();
    await standing.getByText('kept', { exact: true }).waitFor({ timeout: 60_000 });
    const before = await panel.locator('.results').allTextContents();
    await page.reload();
    await panel.waitFor();
    expect(await field.inputValue()).toBe('9.5 V');
    expect(await panel.locator('.results').allTextContents()).toEqual(before);
    const { calculators } = await ask<{ calculators: Record<string, Record<string, string>> }>(
      context,
      'GET',
      `${server.url}/api/recipes/${SLUG}/inputs`,
    );
    expect(calculators).toEqual({ amp: { V_p: '9.5 V' } });
  });

  test('loses no word of a draft: it stays, is kept when the server is back, and stands there after a reload', async () => {
    const { id } = await ask<{ id: string }>(context, 'POST', `${server.url}/api/drafts`, {
      requestId: clientId(),
      text: '---\ntitle: Lamp driver\nslug: lamp-driver\nsummary: Lights a lamp.\nhazards: [none]\n---\n\nFirst words.\n',
    });
    await page.goto(`${server.url}/write/${id}`);
    const editor = page.locator('.cm-content');
    await editor.waitFor();
    const bar = page.locator('.write-bar');
    await editor.press('Control+End');
    await page.keyboard.type('Typed while it ran. ');
    await bar.getByText('kept', { exact: true }).waitFor();

    await server.stop('SIGKILL');
    await page.keyboard.type('Typed while it was gone.');
    await bar.getByText(NOT_YET).waitFor();
    expect(await editor.textContent()).toContain('Typed while it ran. Typed while it was gone.');

    await begin();
    await bar.getByText('kept', { exact: true }).waitFor({ timeout: 60_000 });
    const { text } = await ask<{ text: string }>(context, 'GET', `${server.url}/api/drafts/${id}`);
    expect(text).toContain('First words.\nTyped while it ran. Typed while it was gone.');
    await page.reload();
    await editor.waitFor();
    expect(await editor.textContent()).toContain('Typed while it ran. Typed while it was gone.');
  });
});
