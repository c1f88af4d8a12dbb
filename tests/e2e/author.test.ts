import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { ADMIN, launchBrowser, makeAdmin, signIn, watchTroubles } from './browser.ts';
import { type BuiltServer, freePort, startBuilt } from './server.ts';

let browser: Browser;
let server: BuiltServer;
let folder: string;

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'quadrille-author-'));
  server = await startBuilt(join(folder, 'data'), await freePort());
  await makeAdmin(server);
  browser = await launchBrowser();
});

afterAll(async () => {
  await browser.close();
  await server.stop();
  rmSync(folder, { recursive: true, force: true });
});

interface Desk {
  readonly context: BrowserContext;
  readonly page: Page;
  readonly troubles: { taken(): readonly string[] };
}

async function sitDown(): Promise<Desk> {
  const context = await browser.newContext({ viewport: { width: 1440, height: 900 } });
  const troubles = await watchTroubles(context);
  const page = await context.newPage();
  await signIn(page, server.url, ADMIN);
  return { context, page, troubles };
}

/** Starts from the bare frame under a title, and gives the address of the draft. */
async function startDraft(page: Page, title: string): Promise<string> {
  await page.goto(`${server.url}/write`);
  await page.getByRole('radio', { name: /A bare frame/ }).check();
  await page.getByLabel(/Title of your recipe/).fill(title);
  await page.getByRole('button', { name: 'Start writing' }).click();
  await page.waitForURL(/\/write\/.+/);
  await page.getByText('none found', { exact: true }).waitFor();
  return page.url();
}

const source = (page: Page) => page.getByRole('textbox', { name: /^Source of/ });
const problems = (page: Page) => page.getByRole('region', { name: 'Problems' });

/** Puts the cursor behind the first place of a text in the source. */
async function cursorBehind(page: Page, line: string): Promise<void> {
  await source(page).locator('.cm-line', { hasText: line }).first().click();
  await page.keyboard.press('End');
}

describe('the author', () => {
  test('starts from a skeleton, is told of a mistake at its place, mends it, sends it, takes it back and sends it again', async () => {
    const { context, page, troubles } = await sitDown();
    await startDraft(page, 'Lamp on the footplate');

    const live = page.getByRole('region', { name: 'Page as readers will see it' });
    expect(await live.getByText('500.0', { exact: false }).first().textContent()).toContain('500.0');

    await cursorBehind(page, 'name="I"');
    await page.keyboard.press('Enter');
    await page.keyboard.insertText('<Result name="P" label="Power" formula="V * I + R" />');
    const mistake = problems(page).getByRole('button', { name: /line 24/ });
    await mistake.waitFor();
    expect(await mistake.textContent()).toMatch(/power|resistance/);
    expect(await page.locator('.cm-lintRange-error').first().textContent()).not.toBe('');
    expect(await page.getByRole('button', { name: 'Send for review…' }).getAttribute('aria-disabled')).toBe('true');

    await page.keyboard.press('Alt+ArrowDown');
    await cursorBehind(page, 'name="P"');
    for (let step = 0; step < 4; step++) await page.keyboard.press('ArrowLeft');
    for (let step = 0; step < 4; step++) await page.keyboard.press('Backspace');
    await page.getByText('none found', { exact: true }).waitFor();
    await live.getByText('2.500', { exact: false }).first().waitFor();

    await page.getByRole('button', { name: 'Send for review…' }).click();
    const dialog = page.getByRole('dialog', { name: 'Send for review' });
    await dialog.getByRole('textbox').fill('The lamp of the footplate.');
    await dialog.getByRole('button', { name: /^Send for review/ }).click();
    await page.getByText('In review, and frozen.').waitFor();
    expect(await source(page).getAttribute('contenteditable')).toBe('false');

    await page.getByRole('button', { name: 'Take back' }).click();
    await page.getByText('none found', { exact: true }).waitFor();
    await page.getByRole('button', { name: 'Send for review…' }).click();
    await page
      .getByRole('dialog', { name: 'Send for review' })
      .getByRole('button', { name: /^Send for review/ })
      .click();
    await page.getByText('In review, and frozen.').waitFor();
    expect(troubles.taken()).toEqual([]);
    await context.close();
  });

  test('sees what another tab saved, and in a race both texts', async () => {
    const { context, page, troubles } = await sitDown();
    const address = await startDraft(page, 'Lamp in the van');
    const other = await context.newPage();
    await other.goto(address);
    await other.getByText('none found', { exact: true }).waitFor();

    await cursorBehind(page, 'summary:');
    await page.keyboard.insertText(' First tab.');
    await source(other).getByText('First tab.').waitFor();

    await cursorBehind(page, 'Say which need');
    await cursorBehind(other, 'summary:');
    await Promise.all([page.keyboard.insertText(' Typed here.'), other.keyboard.insertText(' Typed there.')]);
    const [loser] = await Promise.all([
      Promise.race(
        [page, other].map(async (tab) => {
          await tab.getByRole('button', { name: 'Use what is chosen below' }).waitFor({ timeout: 60_000 });
          return tab;
        }),
      ),
    ]);
    await loser.getByRole('button', { name: 'Use what is chosen below' }).click();
    await loser.getByText('kept', { exact: true }).waitFor();
    const text = (await source(loser).textContent()) ?? '';
    expect(text).toContain('Typed here.');
    expect(text).toContain('Typed there.');
    // The browser itself writes a line for the 409 that this test is about.
    expect(troubles.taken().filter((line) => !line.includes('409'))).toEqual([]);
    await context.close();
  });

  test('loses nothing when the server is killed while typing and the page is loaded again', async () => {
    const { context, page } = await sitDown();
    const address = await startDraft(page, 'Lamp at the crossing');
    const { port } = new URL(server.url);
    await server.stop('SIGKILL');
    await cursorBehind(page, 'summary:');
    await page.keyboard.insertText(' Typed into the void.');
    await page
      .getByText(/not yet kept: no connection/)
      .first()
      .waitFor();
    // The page goes while the server is away: what is left is what the browser keeps.
    await page.goto('about:blank');
    server = await startBuilt(join(folder, 'data'), Number(port));
    await page.goto(address);
    const offer = page.getByRole('region', { name: 'Text not sent' });
    await offer.getByRole('button', { name: 'Use that text' }).click();
    await source(page).getByText('Typed into the void.').waitFor();
    await page.getByText('kept', { exact: true }).waitFor();
    await page.reload();
    await source(page).getByText('Typed into the void.').waitFor();
    expect(await page.getByRole('region', { name: 'Text not sent' }).count()).toBe(0);
    await context.close();
  });
});
