import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { AxeBuilder } from '@axe-core/playwright';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest';
import { paths } from '../../src/lib/paths.ts';
import { ask, clientId, launchBrowser, makeAdmin, signIn, watchTroubles } from './browser.ts';
import { type BuiltServer, freePort, startBuilt } from './server.ts';

const SLUG = 'unity-difference-amplifier';
const WIDTHS = [1440, 390] as const;
const THEMES = ['light', 'dark'] as const;

/** What the pages show. */
interface Data {
  readonly draft: string;
  readonly inReview: string;
  readonly design: string;
  readonly invitation: string;
  readonly password: string;
}

interface Row {
  readonly address: (data: Data) => string;
  /** The page's first heading. */
  readonly heading: string | RegExp;
  /** Pages that nobody needs to sign in for are opened by somebody who has not. */
  readonly isOpen?: true;
  /** Waited for besides, where a part is loaded later. */
  readonly part?: string;
  /** The status by which the server refuses what this page asks for; Chromium writes each such answer to its console. */
  readonly refusedBy?: number;
}

/** Every page of `paths`, each with what it may show; a path without a row does not compile, and fails below. */
const PAGES = {
  recipes: { all: { address: paths.recipes, heading: 'What do you need to build?', part: '.register' } },
  recipe: {
    'as it stands': { address: () => paths.recipe(SLUG), heading: /Unity difference amplifier/, part: '.calculator' },
    'with broken limits': {
      address: () => paths.recipe('rail-splitter'),
      heading: /Rail splitter/,
      part: '.calculator',
    },
    'that is not there': {
      address: () => paths.recipe('nothing-of-the-kind'),
      heading: 'There is no such recipe',
      refusedBy: 404,
    },
  },
  start: { 'a new one': { address: paths.start, heading: /./, part: 'form' } },
  startFrom: { 'a recipe': { address: () => paths.startFrom(SLUG), heading: /./, part: 'form' } },
  write: {
    'a draft with a mistake': {
      address: ({ draft }) => paths.write(draft),
      heading: /Lamp driver/,
      part: '.cm-content',
    },
    'a draft in review': { address: ({ inReview }) => paths.write(inReview), heading: /Name of the circuit/ },
  },
  reviews: { 'one waiting': { address: paths.reviews, heading: 'Reviews', part: 'table' } },
  review: {
    'my own': {
      address: ({ inReview }) => paths.review(inReview),
      heading: /Name of the circuit/,
      part: '.calculator',
    },
  },
  designs: { 'one kept': { address: paths.designs, heading: /designs/i, part: 'table' } },
  design: { kept: { address: ({ design }) => paths.design(design), heading: /Platform lamp/, part: '.calculator' } },
  team: {
    start: { address: () => paths.team(), heading: /./ },
    people: { address: () => paths.team('people'), heading: /./, part: 'table' },
    settings: { address: () => paths.team('settings'), heading: /./, part: 'form' },
    mail: { address: () => paths.team('mail'), heading: /./ },
    log: { address: () => paths.team('log'), heading: /./, part: 'table' },
  },
  account: { mine: { address: paths.account, heading: /./, part: 'form' } },
  signIn: { empty: { address: () => paths.signIn('/designs'), heading: /Circuits/, isOpen: true, part: 'form' } },
  forgotten: { empty: { address: paths.forgotten, heading: /./, isOpen: true, part: 'form' } },
  setUp: {
    'with a dead link': {
      address: () => `${paths.setUp()}#token=${'x'.repeat(43)}`,
      heading: /./,
      refusedBy: 410,
      isOpen: true,
    },
  },
  invitation: { living: { address: ({ invitation }) => invitation, heading: /./, isOpen: true, part: 'form' } },
  password: { living: { address: ({ password }) => password, heading: /./, isOpen: true, part: 'form' } },
} satisfies Record<keyof typeof paths, Readonly<Record<string, Row>>>;

const ROWS = Object.entries(PAGES).flatMap(([path, rows]) =>
  Object.entries<Row>(rows).map(([title, row]) => [`${path}, ${title}`, row] as const),
);

let folder: string;
let server: BuiltServer;
let browser: Browser;
let context: BrowserContext;
let strangers: BrowserContext;
let data: Data;
let troubles: readonly { taken(): readonly string[] }[];

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'quadrille-pages-'));
  server = await startBuilt(join(folder, 'data'), await freePort());
  await makeAdmin(server);
  browser = await launchBrowser();
  context = await browser.newContext();
  strangers = await browser.newContext();
  troubles = await Promise.all([context, strangers].map(watchTroubles));
  const page = await context.newPage();
  await signIn(page, server.url);
  await page.close();
  data = await fill();
});
afterAll(async () => {
  await browser.close();
  await server.stop('SIGKILL');
  rmSync(folder, { recursive: true, force: true });
});
afterEach(async () => {
  for (const page of [...context.pages(), ...strangers.pages()]) await page.close();
  for (const each of troubles) each.taken();
});

/** A draft with a mistake, one in review, a design, an invitation, a password link, and numbers that break limits. */
async function fill(): Promise<Data> {
  const post = <T>(path: string, body: object) =>
    ask<T>(context, 'POST', `${server.url}${path}`, { requestId: clientId(), ...body });
  const skeleton = readFileSync('content/skeletons/empty.mdx', 'utf8');
  const mistake = skeleton.replace('Name of the circuit', 'Lamp driver').replace('formula="V / R"', 'formula="V / Q"');
  const draft = await post<{ id: string }>('/api/drafts', {
    text: mistake.replace(/^slug: .*$/m, 'slug: lamp-driver'),
  });
  const sent = await post<{ id: string }>('/api/drafts', { text: skeleton });
  const { draft: row, hash } = await ask<{ draft: { revision: number }; hash: string }>(
    context,
    'GET',
    `${server.url}/api/drafts/${sent.id}`,
  );
  await post(`/api/drafts/${sent.id}/send`, { revision: row.revision, hash, note: 'A first try.' });
  await ask(context, 'PATCH', `${server.url}/api/recipes/rail-splitter/inputs/split`, {
    saveId: clientId(),
    fields: { V_s: { text: '4 V', base: null } },
  });
  const design = await post<{ id: string }>('/api/designs', {
    slug: SLUG,
    version: 1,
    name: 'Platform lamp',
    project: 'Signals',
    note: 'Second shelf.',
    visibility: 'team',
    inputs: { amp: { V_cm: '±25 V' } },
    shown: { engine: 1, calculators: {} },
  });
  const invited = await post<{ id: string }>('/api/invitations', { email: 'edda@railway.example', role: 'editor' });
  const invitation = await post<{ url: string }>(`/api/invitations/${invited.id}/link`, {});
  const me = await ask<{ person: { id: string } }>(context, 'GET', `${server.url}/api/me`);
  const password = await post<{ url: string }>(`/api/people/${me.person.id}/link`, {});
  return {
    draft: draft.id,
    inReview: sent.id,
    design: design.id,
    invitation: invitation.url.replace(server.url, ''),
    password: password.url.replace(server.url, ''),
  };
}

async function open(row: Row): Promise<Page> {
  const page = await (row.isOpen ? strangers : context).newPage();
  await page.goto(`${server.url}${row.address(data)}`);
  await page.getByRole('heading', { level: 1, name: row.heading }).first().waitFor();
  if (row.part !== undefined) await page.locator(row.part).first().waitFor();
  await page.evaluate(() => document.fonts.ready);
  return page;
}

/** What axe finds, each as its rule and the elements it speaks of. */
async function axeFindings(page: Page): Promise<readonly string[]> {
  const { violations } = await new AxeBuilder({ page }).analyze();
  return violations.flatMap(({ id, help, nodes }) =>
    nodes.map((node) => `${id}: ${help} (${node.target.join(' ')}) ${node.any[0]?.message ?? ''}`),
  );
}

/** How many pixels the page can be scrolled sideways, and the elements that stand out. */
function sideways(page: Page): Promise<readonly string[]> {
  return page.evaluate(() => {
    const { scrollWidth, clientWidth } = document.documentElement;
    if (scrollWidth <= clientWidth) return [];
    const out = [...document.querySelectorAll('body *')].filter(
      (one) => one.getBoundingClientRect().right > clientWidth,
    );
    return [`${scrollWidth} of ${clientWidth}: ${out.slice(0, 5).map((one) => `${one.tagName}.${one.className}`)}`];
  });
}

describe('every page', () => {
  test('has a row in the table', () => {
    expect(Object.keys(PAGES)).toEqual(Object.keys(paths));
  });

  test.each(ROWS)(
    '%s: axe finds nothing, in both themes, wide and narrow; nothing scrolls sideways; the console is quiet',
    async (_, row) => {
      const page = await open(row);
      const found: Record<string, readonly string[]> = {};
      for (const width of WIDTHS) {
        await page.setViewportSize({ width, height: 900 });
        for (const colorScheme of THEMES) {
          await page.emulateMedia({ colorScheme, reducedMotion: 'reduce' });
          found[`${colorScheme} ${width}`] = await axeFindings(page);
        }
        found[`sideways ${width}`] = await sideways(page);
      }
      const heard = troubles.flatMap((each) => each.taken());
      const refusals = heard.filter((line) => line.includes(`status of ${row.refusedBy} `));
      found.console = heard.filter((line) => !refusals.includes(line));
      expect(refusals.length > 0).toBe(row.refusedBy !== undefined);
      expect(Object.fromEntries(Object.entries(found).filter(([, list]) => list.length > 0))).toEqual({});
    },
  );
});
