import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { shuntText } from '../shunt-recipe.ts';
import { ADMIN, ask, launchBrowser, makeAdmin, watchTroubles } from './browser.ts';
import { addPerson, type SignedInPerson, signInQuietly } from './people.ts';
import { Scene } from './review-scene.ts';
import { type BuiltServer, freePort, startBuilt } from './server.ts';

const TITLE = 'Shunt reading for the works car';

let folder: string;
let server: BuiltServer;
let browser: Browser;
let scene: Scene;
let author: SignedInPerson;
let editor: SignedInPerson;
let reader: SignedInPerson;
let page: Page;
let troubles: { taken(): readonly string[] };

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'quadrille-editor-'));
  server = await startBuilt(join(folder, 'data'), await freePort());
  scene = new Scene(server.url);
  await makeAdmin(server);
  browser = await launchBrowser();
  const admin = await browser.newContext();
  await signInQuietly(admin, server.url, ADMIN);
  author = await addPerson(browser, server.url, admin, { name: 'Aren Tilling', role: 'author' });
  editor = await addPerson(browser, server.url, admin, { name: 'Edda Marsh', role: 'editor' });
  reader = await addPerson(browser, server.url, admin, { name: 'Rhea Dallow', role: 'reader' });
  troubles = await watchTroubles(editor.context);
});
afterAll(async () => {
  await browser.close();
  await server.stop('SIGKILL');
  rmSync(folder, { recursive: true, force: true });
});
beforeEach(async () => {
  for (const open of editor.context.pages()) await open.close();
  page = await editor.context.newPage();
});

const button = (name: string | RegExp) => page.getByRole('button', { name });
const note = () => page.getByRole('textbox', { name: 'What you checked, or what should change' });

async function tickAll(): Promise<void> {
  for (const box of await page.getByRole('group', { name: 'Yours to check' }).getByRole('checkbox').all())
    await box.check();
}

/** The words of all elements that fit, without the space around them. */
async function wordsOf(selector: string): Promise<readonly string[]> {
  return (await page.locator(selector).allTextContents()).map((text) => text.trim());
}

describe('the editor', () => {
  test('sees what waits, the numbers and words that change, signs only after every tick, and publishes', async () => {
    const slug = 'shunt-signed';
    await scene.publish(author, editor, shuntText({ gain: 20, slug }));
    await scene.keepDesign(reader, { slug, name: 'Car 3, ammeter', amperes: 13, visibility: 'team' });
    await scene.keepDesign(reader, { slug, name: 'Nobody else’s business', amperes: 14, visibility: 'only me' });
    const words = 'A shunt turns current into a very small voltage.';
    const change = await scene.write(author, shuntText({ gain: 25, slug, words }), slug);
    await scene.send(author, change, 'The new amplifier has a gain of 25.');

    await page.goto(`${server.url}/reviews`);
    const waiting = page.getByRole('table', { name: 'Waiting for you' });
    await waiting.getByRole('row', { name: /The new amplifier has a gain of 25\. Aren Tilling/ }).waitFor();
    await waiting.getByRole('link', { name: TITLE }).click();

    const numbers = page.getByRole('table', { name: 'Numbers of worked examples that move' });
    // 20 and 25 times 10 A times 10 mΩ: own arithmetic.
    const example = numbers.getByRole('row', { name: /Pulling away at 10 A/ });
    await example.waitFor();
    expect(await example.getByRole('cell').allTextContents()).toEqual([
      '2.000\u2009V',
      '2.500\u2009V',
      'the example agrees with the text in review',
    ]);
    const designs = page.getByRole('table', { name: 'Numbers of kept designs that would move' });
    expect(
      await designs
        .getByRole('row', { name: /meter range/ })
        .getByRole('cell')
        .allTextContents(),
    ).toEqual(['within', 'exceeded', 'newly broken']);
    await page.getByText('And 1 private design would move, and a limit would break in it.').waitFor();
    expect(await page.locator('main').textContent()).not.toContain('Nobody else');
    await page.locator('.redline').waitFor();
    expect(await wordsOf('.redline ins')).toEqual(['added: very.', 'added: 25.', 'added: 2.5.']);
    expect(await wordsOf('.redline del')).toEqual(['removed: 20.', 'removed: 2.']);
    await page.getByRole('tab', { name: 'The page as readers will see it' }).click();
    await page.getByRole('textbox', { name: 'Motor current' }).waitFor();

    expect(await button('Sign off and publish').getAttribute('aria-disabled')).toBe('true');
    await page.getByText('4 boxes left to tick.').waitFor();
    await tickAll();
    await note().fill('Worked through by hand.');
    await button('Sign off and publish').dblclick();
    const done = page.getByRole('heading', { name: 'Signed off: version 2 is published' });
    await done.waitFor();
    expect(await done.evaluate((heading) => heading === document.activeElement)).toBe(true);

    const { version, versions } = await ask<{
      version: { version: number; signedBy: string };
      versions: { version: number; state: string }[];
    }>(editor.context, 'GET', `${server.url}/api/recipes/${slug}`);
    expect(version).toMatchObject({ version: 2, signedBy: 'Edda Marsh' });
    expect(versions.map((one) => [one.version, one.state])).toEqual([
      [2, 'published'],
      [1, 'superseded'],
    ]);
    expect(troubles.taken()).toEqual([]);
  });

  test('of a draft that moved while it was read signs nothing, reads what changed, and then signs', async () => {
    const slug = 'shunt-moving';
    await scene.publish(author, editor, shuntText({ gain: 20, slug }));
    const change = await scene.write(author, shuntText({ gain: 25, slug }), slug);
    await scene.send(author, change, 'Now 25.');
    await page.goto(`${server.url}/reviews/${change}`);
    await note().fill('Seen.');
    await tickAll();
    await scene.takeBack(author, change);
    await scene.save(
      author,
      change,
      shuntText({ gain: 25, slug, words: 'A shunt turns current into a tiny voltage.' }),
    );
    await scene.send(author, change, 'Now 25, and better words.');

    await button('Sign off and publish').click();
    const notice = page.getByRole('region', { name: 'The draft has moved' });
    await notice.getByText(/Nothing was signed and nothing was sent back/).waitFor();
    await notice.locator('.redline').waitFor();
    expect(await wordsOf('.moved ins')).toEqual(['added: tiny.']);
    const { recipe } = await ask<{ recipe: { version: number } }>(
      editor.context,
      'GET',
      `${server.url}/api/recipes/${slug}`,
    );
    expect(recipe.version).toBe(1);
    // The refused request is told in the console by the browser itself.
    expect(troubles.taken().filter((one) => !one.includes('409'))).toEqual([]);

    await notice.getByRole('button', { name: 'Read it as it is now' }).click();
    await page.getByText('Now 25, and better words.').waitFor();
    expect(await note().inputValue()).toBe('Seen.');
    expect(await page.getByRole('checkbox', { checked: true }).count()).toBe(0);
    await tickAll();
    await button('Sign off and publish').click();
    await page.getByRole('heading', { name: 'Signed off: version 2 is published' }).waitFor();
    expect(troubles.taken()).toEqual([]);
  });

  test('sends back with a reason, which the author then reads', async () => {
    const change = await scene.write(author, shuntText({ gain: 25, slug: 'shunt-sent-back' }));
    await scene.send(author, change, 'A new recipe.');
    await page.goto(`${server.url}/reviews/${change}`);
    await button('Send back').click();
    await page.getByText('Say what should change.', { exact: true }).first().waitFor();
    await note().fill('Say which meter this is for.');
    await button('Send back').click();
    await page.getByRole('heading', { name: 'Sent back' }).waitFor();

    const desk = await author.context.newPage();
    await desk.goto(`${server.url}/write/${change}`);
    await desk.getByText('Say which meter this is for.').waitFor();
    await desk.close();
    expect(troubles.taken()).toEqual([]);
  });

  test('cannot decide on what they wrote a part of, and reads why', async () => {
    const change = await scene.write(editor, shuntText({ gain: 20, slug: 'shunt-of-my-own' }));
    await scene.send(editor, change, 'My own.');
    await page.goto(`${server.url}/reviews/${change}`);
    await page.getByText('You wrote a part of this text, so it needs a second person to decide.').waitFor();
    expect(await button(/Sign off|Send back/).count()).toBe(0);
    const refused = await editor.context.request.post(`${server.url}/api/reviews/${change}/sign-off`, {
      headers: { origin: server.url },
      data: { ...(await scene.seen(editor.context, change)), ticks: [], note: '' },
    });
    expect(refused.status()).toBe(403);
    expect(troubles.taken()).toEqual([]);
  });

  test('finds that the design of a reader still stands on its version, and that a newer one is named', async () => {
    const slug = 'shunt-with-a-design';
    await scene.publish(author, editor, shuntText({ gain: 20, slug }));
    await scene.keepDesign(reader, { slug, name: 'Car 4, ammeter', amperes: 13, visibility: 'team' });
    const change = await scene.write(author, shuntText({ gain: 25, slug }), slug);
    await scene.send(author, change, 'Now 25.');
    await scene.signOff(editor, change);
    await page.goto(`${server.url}/designs?show=team`);
    const line = page.getByRole('row', { name: /Car 4, ammeter/ });
    await line.getByText('Version 2 is newer').waitFor();
    await line.getByRole('link', { name: 'Car 4, ammeter' }).click();
    await page.getByText('Version 2 is newer.').waitFor();
    await page.getByRole('button', { name: /^Output: 2\.600/ }).waitFor();
    expect(await button('Keep changes').count()).toBe(0);
    expect(troubles.taken()).toEqual([]);
  });
});
