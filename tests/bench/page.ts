import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { brotliCompressSync, constants } from 'node:zlib';
import type { BrowserContext, Page } from 'playwright-core';
import { ADMIN, ask, launchBrowser, makeAdmin } from '../e2e/browser.ts';
import { freePort, startBuilt } from '../e2e/server.ts';
import type { Row } from './run.ts';

const SLUG = 'unity-difference-amplifier';
const KEYSTROKES = 100;
/** Kilobytes of 1000 bytes, as the browser's own tools count. */
const KB = 1000;

interface Loaded {
  readonly kind: 'script' | 'stylesheet' | 'font';
  readonly bytes: number;
}

/** Opens a page with an empty cache and gives the size of each file that Chromium loads for it, as brotli 11 sends it. */
async function load(page: Page, address: string): Promise<readonly Loaded[]> {
  const files: Promise<Loaded>[] = [];
  page.on('response', (response) => {
    const kind = response.request().resourceType();
    if (kind === 'script' || kind === 'stylesheet') {
      files.push(response.body().then((body) => ({ kind, bytes: brotli(body) })));
    } else if (kind === 'font') files.push(response.body().then((body) => ({ kind, bytes: body.byteLength })));
  });
  await page.goto(address, { waitUntil: 'networkidle' });
  await page.locator('.calculator .results').first().waitFor();
  return Promise.all(files);
}

function brotli(body: Buffer): number {
  return brotliCompressSync(body, {
    params: { [constants.BROTLI_PARAM_QUALITY]: 11, [constants.BROTLI_PARAM_SIZE_HINT]: body.byteLength },
  }).byteLength;
}

function kilobytes(files: readonly Loaded[], kind: Loaded['kind']): number {
  return files.filter((file) => file.kind === kind).reduce((sum, file) => sum + file.bytes, 0) / KB;
}

/** Types into a field and puts it right again; gives milliseconds from each key to the change of the results in the document. */
async function keystrokes(page: Page): Promise<readonly number[]> {
  await page.evaluate(() => {
    const times: number[] = [];
    let pressed = 0;
    document.addEventListener('keydown', () => (pressed = performance.now()), { capture: true });
    const watched = new MutationObserver(() => {
      if (pressed > 0) times.push(performance.now() - pressed);
      pressed = 0;
    });
    for (const results of document.querySelectorAll('.calculator .results')) {
      watched.observe(results, { subtree: true, childList: true, characterData: true });
    }
    Object.assign(window, { measuredTimes: times });
  });
  const field = page.getByRole('textbox', { name: 'To the reference' });
  await field.click();
  await field.press('Home');
  await field.press('ArrowRight');
  for (let n = 0; n < KEYSTROKES; n++) {
    await page.keyboard.press(n % 2 === 0 ? '7' : 'Backspace');
    await page.waitForFunction((count) => Reflect.get(window, 'measuredTimes').length > count, n);
  }
  return page.evaluate(() => Reflect.get(window, 'measuredTimes') as number[]);
}

async function measurePage(context: BrowserContext, url: string): Promise<readonly Row[]> {
  await ask(context, 'POST', `${url}/api/auth/sign-in/email`, { email: ADMIN.email, password: ADMIN.password });
  const page = await context.newPage();
  const files = await load(page, `${url}/recipes/${SLUG}`);
  const script = kilobytes(files, 'script');
  const fonts = kilobytes(files, 'font');
  const times = [...(await keystrokes(page))].sort((a, b) => a - b);
  const median = times[times.length >> 1] ?? Number.NaN;
  return [
    {
      name: "script of the reader's recipe page, signed in, brotli 11",
      value: script,
      unit: 'kB',
      goal: '≤ 165 kB',
      met: script <= 165,
    },
    {
      name: "style of the reader's recipe page, brotli 11",
      value: kilobytes(files, 'stylesheet'),
      unit: 'kB',
      goal: null,
      met: null,
    },
    { name: "fonts of the reader's recipe page", value: fonts, unit: 'kB', goal: '≤ 250 kB', met: fonts <= 250 },
    {
      name: `keystroke to results in Chromium, median of ${KEYSTROKES}`,
      value: median,
      unit: 'ms',
      goal: '≤ 16 ms',
      met: median <= 16,
    },
  ];
}

/** What Chromium loads for a recipe page of the built server, and how fast a key answers there. Needs `npm run build`. */
export async function measure(): Promise<readonly Row[]> {
  const folder = mkdtempSync(join(tmpdir(), 'quadrille-bench-'));
  const server = await startBuilt(join(folder, 'data'), await freePort());
  try {
    await makeAdmin(server);
    const browser = await launchBrowser();
    const rows = await measurePage(await browser.newContext(), server.url);
    await browser.close();
    return rows;
  } finally {
    await server.stop();
    rmSync(folder, { recursive: true, force: true });
  }
}
