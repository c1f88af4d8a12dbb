import { QueryClientProvider } from '@tanstack/react-query';
import { render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { describe, expect, test } from 'vitest';
import type { Me, RecipePage as Page, RecipeRow, Role, VersionRow } from '#api';
import { RecipePage } from '../../src/features/recipes/recipe-page.tsx';
import { RecipesPage } from '../../src/features/recipes/recipes-page.tsx';
import { newQueryClient, reading } from '../../src/lib/query-client.ts';
import { fakeServer, type Heard, type Reply } from './fake-server.ts';
import { starterDocument } from './starter-documents.ts';

const SLUG = 'difference-amplifier-with-gain';

const recipe: RecipeRow = {
  slug: SLUG,
  number: 'DA-02',
  title: 'Difference amplifier with gain, on a reference',
  summary: 'Takes the difference of two voltages.',
  purpose: 'take a difference',
  topics: ['difference amplifier'],
  supply: 'single',
  hazards: [],
  version: 1,
  state: 'published',
  publishedAt: '2026-05-18T08:00:00.000Z',
  reviewDue: '2027-05-18',
  reviewOverdue: false,
  owners: [],
  signedBy: null,
  origin: 'supplied',
  designs: 0,
};

const supplied: VersionRow = {
  version: 1,
  state: 'published',
  at: '2026-05-18T08:00:00.000Z',
  writtenBy: [],
  signedBy: null,
  selfSigned: false,
  supplied: '0.1.0',
  note: '',
};

function pageOf(changes: Partial<Page> = {}): Page {
  return {
    recipe,
    version: supplied,
    document: starterDocument(SLUG),
    textHash: 'a'.repeat(64),
    versions: [supplied],
    draft: null,
    ...changes,
  };
}

function meAs(role: Role): Me {
  return {
    person: { id: 'p1', name: 'Rhea', email: 'rhea@example.org', role },
    team: {
      name: 'Signals and power',
      timeZone: 'UTC',
      allowSelfSignOff: false,
      publicUrl: window.location.origin,
      needsSetUp: false,
    },
    notices: [],
    reviewsWaiting: 0,
    release: '0.1.0',
  };
}

type Answers = Readonly<Record<string, Reply | ((heard: Heard) => Reply)>>;

function open(at: string, answers: Answers, role: Role = 'reader') {
  const heard = fakeServer(answers);
  const queries = newQueryClient();
  queries.setQueryData(reading('me.read', {}).queryKey, meAs(role));
  const router = createMemoryRouter(
    [
      { path: '/recipes', Component: RecipesPage },
      { path: '/recipes/:slug', Component: RecipePage },
      { path: '*', element: <p>another page</p> },
    ],
    { initialEntries: [at] },
  );
  render(
    <QueryClientProvider client={queries}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  return { heard, router, user: userEvent.setup() };
}

const answersOf = (changes: Answers = {}): Answers => ({
  'GET /api/recipes': { body: { recipes: [recipe] } },
  [`GET /api/recipes/${SLUG}`]: { body: pageOf() },
  [`GET /api/recipes/${SLUG}/inputs`]: { body: { calculators: {} } },
  ...changes,
});

const KEEP = `PATCH /api/recipes/${SLUG}/inputs/amp`;

/** Answers as the server does: all fields that were sent, none of them moved. */
const keepsAll = ({ body }: Heard): Reply => {
  const { fields } = body as { fields: Record<string, { text: string | null }> };
  const kept = Object.entries(fields).flatMap(([name, { text }]) => (text === null ? [] : [[name, text]]));
  return { body: { fields: Object.fromEntries(kept), moved: [] } };
};

async function typeFeedback(user: ReturnType<typeof userEvent.setup>, text: string) {
  await user.tripleClick(await screen.findByLabelText('Feedback'));
  await user.paste(text);
}

describe('the recipe page', () => {
  test('says what stands behind it: supplied, not signed off, examples and what was not proven', async () => {
    open(`/recipes/${SLUG}`, answersOf());
    expect(await screen.findByRole('heading', { level: 1, name: recipe.title })).toBeTruthy();
    const signed = screen.getByText('Signed off by', { selector: 'dt' }).nextElementSibling;
    expect(signed?.textContent).toBe('not by your teamsupplied with Quadrille 0.1.0');
    expect(screen.getByText('4 of 4 agree')).toBeTruthy();
    expect(screen.getByText('not proven on a drawing')).toBeTruthy();
    expect(screen.getByText('18 May 2027')).toBeTruthy();
    expect(screen.getByText('No formula is proven against a drawing: there is none.')).toBeTruthy();
    expect(screen.getByText(/^Checked against: Texas Instruments, RES11A/)).toBeTruthy();
    expect(screen.queryByText('Change this recipe')).toBeNull();
  });

  test('keeps what is typed with what it was typed over, as understood', async () => {
    const { heard, user } = open(`/recipes/${SLUG}`, answersOf({ [KEEP]: keepsAll }));
    await typeFeedback(user, '33k');
    await waitFor(() => expect(heard.some(({ method }) => method === 'PATCH')).toBe(true), { timeout: 5000 });
    const sent = heard.find(({ method }) => method === 'PATCH');
    expect(sent?.body).toMatchObject({ fields: { R2: { text: '33 kΩ', base: null } } });
    expect(await screen.findByText('kept')).toBeTruthy();
  });

  test('says “not yet kept: no connection” and repeats the save under its own id', async () => {
    const connection: { isUp: boolean } = { isUp: false };
    const { heard, user } = open(
      `/recipes/${SLUG}`,
      answersOf({
        [KEEP]: (one) => {
          if (!connection.isUp) throw new TypeError('Failed to fetch');
          return keepsAll(one);
        },
      }),
    );
    await typeFeedback(user, '33k');
    expect(await screen.findByText('not yet kept: no connection', {}, { timeout: 5000 })).toBeTruthy();
    connection.isUp = true;
    expect(await screen.findByText('kept', {}, { timeout: 5000 })).toBeTruthy();
    const ids = heard.filter(({ method }) => method === 'PATCH').map(({ body }) => (body as { saveId: string }).saveId);
    expect(ids.length).toBeGreaterThan(1);
    expect(new Set(ids).size).toBe(1);
  });

  test('opens with the numbers of last time', async () => {
    const kept = { amp: { R2: '20 kΩ', gone_in_this_version: '1 V' } };
    open(`/recipes/${SLUG}`, answersOf({ [`GET /api/recipes/${SLUG}/inputs`]: { body: { calculators: kept } } }));
    expect((await screen.findByLabelText<HTMLInputElement>('Feedback')).value).toBe('20 kΩ');
    expect(screen.getByRole('button', { name: /^Gain: 2\.000/ })).toBeTruthy();
  });

  test('hears from another tab what was typed there, but not into the field that has the focus', async () => {
    const { user } = open(`/recipes/${SLUG}`, answersOf({ [KEEP]: keepsAll }));
    const feedback = await screen.findByLabelText<HTMLInputElement>('Feedback');
    const supply = screen.getByLabelText<HTMLInputElement>('Supply');
    await user.click(supply);
    const other = new BroadcastChannel(`quadrille:inputs/p1/${SLUG}`);
    other.postMessage({ calculator: 'amp', name: 'V_s', text: '6 V' });
    other.postMessage({ calculator: 'amp', name: 'R2', text: '22 kΩ' });
    await waitFor(() => expect(feedback.value).toBe('22 kΩ'));
    expect(supply.value).toBe('5 V');
    other.close();
  });

  test('says which version is read when it is not the newest, and leads there', async () => {
    const newest = { ...recipe, version: 2 };
    const second = { ...supplied, version: 2 };
    const old = pageOf({
      recipe: newest,
      version: { ...supplied, state: 'superseded' },
      versions: [second, { ...supplied, state: 'superseded' }],
    });
    open(`/recipes/${SLUG}?version=1`, answersOf({ [`GET /api/recipes/${SLUG}`]: { body: old } }));
    const banner = await screen.findByText('This is version 1.');
    const link = within(banner.parentElement ?? document.body).getByRole('link', { name: 'Open version 2' });
    expect(link.getAttribute('href')).toBe(`/recipes/${SLUG}`);
    expect(screen.getByRole('link', { name: '2' }).getAttribute('href')).toBe(`/recipes/${SLUG}?version=2`);
  });

  test('a withdrawn version opens with the red block', async () => {
    const version = { ...supplied, state: 'withdrawn' as const, note: 'The limit was missing.' };
    open(`/recipes/${SLUG}`, answersOf({ [`GET /api/recipes/${SLUG}`]: { body: pageOf({ version }) } }));
    const block = await screen.findByRole('region', { name: /was withdrawn/ });
    expect(block.textContent).toContain('The limit was missing.');
  });

  test('keeps the numbers as a design with what was shown, and opens it', async () => {
    const { heard, router, user } = open(
      `/recipes/${SLUG}`,
      answersOf({
        [KEEP]: keepsAll,
        'POST /api/designs': ({ body }) => ({
          body: {
            id: '0b0a8f52-6a0c-4f43-9d7b-5c5ac4b0f001',
            name: (body as { name: string }).name,
            project: '',
            owner: { id: 'p1', name: 'Rhea' },
            visibility: 'team',
            recipe: { slug: SLUG, number: 'DA-02', title: recipe.title },
            version: 1,
            versionState: 'published',
            newestVersion: 1,
            limitsBroken: 0,
            updatedAt: '2026-05-18T08:00:00.000Z',
          },
        }),
      }),
    );
    await typeFeedback(user, '33k');
    await user.click(screen.getByRole('button', { name: 'Keep as a design' }));
    const dialog = await screen.findByRole('dialog', {}, { timeout: 10_000 });
    await user.type(within(dialog).getByLabelText('Name'), 'Signal box 4');
    await user.click(within(dialog).getByRole('button', { name: /^Keep as a design/ }));
    await waitFor(() => expect(router.state.location.pathname).toBe('/designs/0b0a8f52-6a0c-4f43-9d7b-5c5ac4b0f001'));
    const sent = heard.find(({ path }) => path === '/api/designs')?.body;
    expect(sent).toMatchObject({
      slug: SLUG,
      version: 1,
      name: 'Signal box 4',
      visibility: 'team',
      inputs: { amp: { R2: '33 kΩ' } },
      shown: {
        calculators: { amp: { results: { G: { text: '3.300', low: 3.3, high: 3.3 } }, limits: { output: 'within' } } },
      },
    });
  });

  test('cannot keep a design while a field is refused, and says which', async () => {
    const { user } = open(`/recipes/${SLUG}`, answersOf({ [KEEP]: keepsAll }));
    await typeFeedback(user, 'abc');
    const button = screen.getByRole('button', { name: 'Keep as a design' });
    expect(button.getAttribute('aria-disabled')).toBe('true');
    expect(screen.getByText('A field needs a change first: R2.')).toBeTruthy();
  });

  test('an author starts a change and is led to it', async () => {
    const { router, user } = open(
      `/recipes/${SLUG}`,
      answersOf({ 'POST /api/drafts': { body: { id: '0b0a8f52-6a0c-4f43-9d7b-5c5ac4b0f002', already: false } } }),
      'author',
    );
    await user.click(await screen.findByRole('button', { name: 'Change this recipe' }));
    await waitFor(() => expect(router.state.location.pathname).toBe('/write/0b0a8f52-6a0c-4f43-9d7b-5c5ac4b0f002'));
  });

  test('an editor signs a supplied recipe off only after every tick', async () => {
    const { heard, user } = open(
      `/recipes/${SLUG}`,
      answersOf({ [`POST /api/recipes/${SLUG}/sign-off`]: { body: { slug: SLUG, version: 1 } } }),
      'editor',
    );
    await user.click(await screen.findByRole('button', { name: 'Sign off as it stands' }));
    const dialog = await screen.findByRole('dialog', {}, { timeout: 10_000 });
    const sign = () => within(dialog).getByRole('button', { name: /^Sign off version 1/ });
    await user.click(sign());
    expect(heard.some(({ method }) => method === 'POST')).toBe(false);
    expect(within(dialog).getByText('2 ticks are missing.')).toBeTruthy();
    for (const box of within(dialog).getAllByRole('checkbox')) await user.click(box);
    await user.click(sign());
    await waitFor(() => expect(heard.some(({ method }) => method === 'POST')).toBe(true));
    expect(heard.find(({ method }) => method === 'POST')?.body).toMatchObject({
      version: 1,
      hash: 'a'.repeat(64),
      ticks: ['I followed the derivation of each formula', 'I looked at the hazards and their cautions'],
    });
  });

  test('an address without a recipe says so and leads back', async () => {
    const missing = { type: 'about:blank', title: 'Not found', status: 404, code: 'not-found' };
    const body = { ...missing, detail: 'There is no recipe "nothing-here".' };
    open('/recipes/nothing-here', {
      'GET /api/recipes/nothing-here': { status: 404, body },
      'GET /api/recipes/nothing-here/inputs': { status: 404, body },
    });
    expect(await screen.findByRole('heading', { name: 'There is no such recipe' })).toBeTruthy();
    expect(screen.getByRole('link', { name: 'All recipes' }).getAttribute('href')).toBe('/recipes');
  });
});

describe('the list of recipes', () => {
  const splitter: RecipeRow = {
    ...recipe,
    slug: 'rail-splitter',
    number: 'RP-01',
    title: 'Rail splitter',
    purpose: 'make a reference point',
    topics: ['single supply'],
    hazards: ['battery'],
    reviewOverdue: true,
    origin: 'team',
    owners: ['Ines Varga'],
    signedBy: 'Tomas Okoye',
  };
  const list = { 'GET /api/recipes': { body: { recipes: [recipe, splitter] } } };
  const titles = () => screen.getAllByRole('rowheader').map((head) => within(head).getByRole('link').textContent);

  test('groups by purpose, names hazards and overdue reviews in words', async () => {
    open('/recipes', list);
    expect(await screen.findByRole('heading', { level: 2, name: 'Make a reference point' })).toBeTruthy();
    expect(titles()).toEqual(['Rail splitter', recipe.title]);
    expect(screen.getByText('Caution: battery')).toBeTruthy();
    expect(screen.getByText('Tomas Okoye')).toBeTruthy();
    expect(screen.getByText('not by your team')).toBeTruthy();
    expect(screen.getByText(', overdue')).toBeTruthy();
  });

  test('searches as one types; the list stays until the answer is there', async () => {
    const { heard, router, user } = open('/recipes', {
      ...list,
      'GET /api/recipes/search': { body: { hits: [{ slug: 'rail-splitter', matched: ['rail'] }] } },
    });
    const search = await screen.findByRole('searchbox');
    await user.click(search);
    await user.paste('rail');
    expect(titles()).toHaveLength(2);
    await waitFor(() => expect(titles()).toEqual(['Rail splitter']));
    expect(heard.filter(({ path }) => path.includes('/search')).map(({ path }) => path)).toEqual([
      '/api/recipes/search?q=rail',
    ]);
    await waitFor(() => expect(router.state.location.search).toBe('?q=rail'));
    await user.keyboard('{ArrowDown}');
    expect(document.activeElement?.textContent).toBe('Rail splitter');
  });

  test('Enter opens the first row for what was typed, not the one that stood there before the answer', async () => {
    // Unsearched, the rail splitter's group stands first.
    const { router, user } = open('/recipes', {
      ...answersOf(list),
      'GET /api/recipes/search': { body: { hits: [{ slug: SLUG, matched: ['unity'] }] } },
    });
    await user.click(await screen.findByRole('searchbox'));
    await user.paste('unity');
    await user.keyboard('{Enter}');
    await waitFor(() => expect(router.state.location.pathname).toBe(`/recipes/${SLUG}`));
  });

  test('narrows by ticked facets and counts what each would leave', async () => {
    const { user } = open('/recipes', list);
    const box = await screen.findByRole('checkbox', { name: /^battery/ });
    await user.click(box);
    expect(titles()).toEqual(['Rail splitter']);
    const none = screen.getByRole('checkbox', { name: /^difference amplifier/ });
    expect(none.closest('label')?.textContent).toBe('difference amplifier0');
  });

  test('the arrow keys walk from one group to the next', async () => {
    const { user } = open('/recipes', list);
    const [first, second] = (await screen.findAllByRole('rowheader')).map((head) => within(head).getByRole('link'));
    first?.focus();
    await user.keyboard('{ArrowDown}');
    expect(document.activeElement).toBe(second);
    await user.keyboard('{ArrowUp}{ArrowUp}');
    expect(document.activeElement).toBe(screen.getByRole('searchbox'));
  });

  test('says that nothing matches and leads back to all', async () => {
    const { user } = open('/recipes?q=xylophone', { ...list, 'GET /api/recipes/search': { body: { hits: [] } } });
    expect(await screen.findByText('No recipe matches “xylophone”.')).toBeTruthy();
    await user.click(screen.getByRole('button', { name: 'Show all recipes' }));
    expect(titles()).toHaveLength(2);
  });

  test('says that the list was not read and tries again', async () => {
    const server: { isDown: boolean } = { isDown: true };
    const { user } = open('/recipes', {
      'GET /api/recipes': () =>
        server.isDown ? { status: 400, body: { detail: 'Broken.' } } : list['GET /api/recipes'],
    });
    expect(await screen.findByText('The list was not read.', {}, { timeout: 8000 })).toBeTruthy();
    server.isDown = false;
    await user.click(screen.getByRole('button', { name: 'Try again' }));
    expect(await screen.findByText('Rail splitter')).toBeTruthy();
  });
});
