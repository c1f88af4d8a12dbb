import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { ADMIN, launchBrowser, makeAdmin, watchTroubles } from './browser.ts';
import { addPerson, signInQuietly } from './people.ts';
import { type BuiltServer, freePort, startBuilt } from './server.ts';

let browser: Browser;
let server: BuiltServer;
let folder: string;
let page: Page;
let troubles: { taken(): readonly string[] };

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'quadrille-reader-'));
  server = await startBuilt(join(folder, 'data'), await freePort());
  await makeAdmin(server);
  browser = await launchBrowser();
  const admin = await browser.newContext();
  await signInQuietly(admin, server.url, ADMIN);
  const reader = await addPerson(browser, server.url, admin, { name: 'Rhea Dallow', role: 'reader' });
  troubles = await watchTroubles(reader.context);
  page = await reader.context.newPage();
});

afterAll(async () => {
  await browser.close();
  await server.stop();
  rmSync(folder, { recursive: true, force: true });
});

describe('the reader', () => {
  test('finds a recipe by a mistyped word, sees where the numbers come from, and cures a broken limit', async () => {
    await page.goto(`${server.url}/recipes`);
    await page.getByRole('searchbox', { name: 'Search the recipes' }).fill('invertng level shift');
    await page.getByRole('link', { name: 'Level shift to a single supply, inverting' }).click();
    const panel = page.getByRole('region', { name: 'Your numbers' });
    await panel.getByText('0.500 … 4.500').waitFor();

    await panel.getByRole('button', { name: /^Output: .*How it comes about/ }).hover();
    const note = page.getByRole('note').last();
    await note.locator('math').first().waitFor();
    // The op amp's inputs stand at 2.5 V · 20/(20 + 10), put in with their unit.
    expect(await note.textContent()).toMatch(/1\.667\sV/);
    await page.keyboard.press('Escape');

    const highest = panel.getByRole('textbox', { name: 'Signal, highest' });
    await highest.fill('6');
    await highest.press('Enter');
    await panel.getByText('not valid: output').first().waitFor();
    await panel.getByRole('button', { name: /^Try it: / }).click();
    await panel.getByText('not valid: output').first().waitFor({ state: 'detached' });
    expect(await panel.getByText('exceeded').count()).toBe(0);
  });

  test('comes back to the same numbers, and keeps them as a design that stays on its version', async () => {
    const panel = page.getByRole('region', { name: 'Your numbers' });
    const lowest = panel.getByRole('textbox', { name: 'Signal, lowest' });
    await lowest.fill('-2.5 V');
    await lowest.press('Enter');
    await panel.locator('.calculator-standing').getByText('kept', { exact: true }).waitFor();
    const shown = await panel.locator('.result-key').textContent();
    await page.reload();
    await panel.waitFor();
    expect(await lowest.inputValue()).toBe('−2.5 V');
    expect(await panel.locator('.result-key').textContent()).toBe(shown);

    await panel.getByRole('button', { name: 'Keep as a design' }).click();
    const dialog = page.getByRole('dialog', { name: 'Keep as a design' });
    await dialog.getByLabel('Name').fill('Lamp monitor, channel 2');
    await dialog.getByRole('button', { name: 'Keep as a design' }).dblclick();
    await page.waitForURL(/\/designs\/.+/);
    await page.getByRole('heading', { level: 1, name: 'Lamp monitor, channel 2' }).waitFor();
    await page.goto(`${server.url}/designs`);
    const row = page.getByRole('row', { name: /Lamp monitor, channel 2/ });
    await row.first().waitFor();
    expect(await row.count()).toBe(1);
    expect(await row.textContent()).toContain('LS-01');
    expect(troubles.taken()).toEqual([]);
  });

  test('finds no way to write, review or run the team', async () => {
    const main = page.getByRole('navigation', { name: 'Main' });
    expect(await main.getByRole('link').allInnerTexts()).toEqual(['Recipes', 'My designs']);
    const answer = await page.request.get(`${server.url}/api/reviews`);
    expect(answer.status()).toBe(403);
  });
});
