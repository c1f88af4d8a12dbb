/** `npm run pictures`: takes the README's pictures from the running demo. Needs `npm run build`. */
import { spawn } from 'node:child_process';
import { mkdirSync } from 'node:fs';
import type { Page } from 'playwright-core';
import { launchBrowser, signIn } from './browser.ts';
import { freePort } from './server.ts';

const FOLDER = 'content/pictures';
const SIZE = { width: 1440, height: 900 };

const port = await freePort();
const demo = spawn(process.execPath, ['dist/server/main.js', 'demo'], {
  env: { ...process.env, NODE_ENV: 'production', PORT: String(port) },
  stdio: ['ignore', 'pipe', 'inherit'],
});
const said = await new Promise<string>((resolve, reject) => {
  let text = '';
  demo.stdout.setEncoding('utf8').on('data', (chunk: string) => {
    text += chunk;
    if (/^admin\s.*$/m.test(text)) resolve(text);
  });
  demo.once('exit', () => reject(new Error(`the demo ended before it listened:\n${text}`)));
});
const url = `http://localhost:${port}`;
const browser = await launchBrowser();
try {
  mkdirSync(FOLDER, { recursive: true });
  const reader = await signedIn('reader');
  await take(reader, '/recipes', 'recipes');
  await take(reader, '/recipes/difference-amplifier-with-gain', 'recipe');
  const editor = await signedIn('editor');
  await editor.goto(`${url}/reviews`);
  await editor.getByRole('rowheader').getByRole('link').first().click();
  await editor.getByRole('heading', { level: 1 }).waitFor();
  await shoot(editor, 'review');
  const author = await signedIn('author');
  await author.goto(`${url}/write`);
  await author.getByRole('radio').first().check();
  await author
    .getByRole('button', { name: /^start/i })
    .first()
    .click();
  await author.locator('.cm-content').waitFor();
  await shoot(author, 'write');
} finally {
  await browser.close();
  demo.kill('SIGTERM');
}

async function signedIn(role: string) {
  const [, email = '', password = ''] = new RegExp(`^${role}\\s+(\\S+)\\s+(\\S+)$`, 'm').exec(said) ?? [];
  const page = await (await browser.newContext({ viewport: SIZE, colorScheme: 'light' })).newPage();
  await signIn(page, url, { email, password });
  return page;
}

async function take(page: Page, path: string, name: string) {
  await page.goto(`${url}${path}`);
  await page.getByRole('heading', { level: 1 }).waitFor();
  await shoot(page, name);
}

/** Once fonts and the live page have settled. */
async function shoot(page: Page, name: string) {
  await page.waitForLoadState('networkidle');
  await page.evaluate(() => document.fonts.ready);
  await page.waitForTimeout(1500);
  await page.screenshot({ path: `${FOLDER}/${name}.png` });
}
