import { configure, fireEvent, screen, waitFor, within } from '@testing-library/react';
import { beforeEach, describe, expect, test, vi } from 'vitest';
import type { Reply } from './fake-server.ts';
import {
  type Answers,
  draftPage,
  editor,
  HASH,
  ID,
  moved,
  open,
  READ,
  SAVE,
  saves,
  sourceNow,
  standIns,
  TEXT,
  type,
} from './writing-fixtures.tsx';

// A page is compiled, drawn and saved with real pauses; on a busy machine the usual second is short.
configure({ asyncUtilTimeout: 8000 });

/** What the browser keeps, in place of IndexedDB, which jsdom lacks. */
const kept = vi.hoisted(() => new Map<string, unknown>());
vi.mock('idb-keyval', () => ({
  createStore: () => ({}),
  get: async (key: string) => kept.get(key),
  set: async (key: string, value: unknown) => void kept.set(key, value),
  del: async (key: string) => void kept.delete(key),
  entries: async () => [...kept.entries()],
}));

beforeEach(() => {
  kept.clear();
  standIns();
});

describe('the writing page', () => {
  test('names the line of a mistake, keeps the last good page, and is ready to send once it is mended', async () => {
    const { user } = open({
      [READ]: { body: draftPage() },
      [SAVE]: { body: { revision: 4, hash: HASH, at: '2026-05-18T10:00:00.000Z' } },
    });
    expect(await screen.findByText('none found')).toBeTruthy();
    expect(within(screen.getByRole('region', { name: 'Checks' })).getByText(/Half an ampere/)).toBeTruthy();
    await type('V / R', 'V + R');
    const problems = screen.getByRole('region', { name: 'Problems' });
    expect(await within(problems).findByText(/line 11/)).toBeTruthy();
    expect(screen.getByRole('button', { name: 'Send for review…' }).getAttribute('aria-disabled')).toBe('true');
    expect(screen.getByText(/^Waits for line 11/)).toBeTruthy();
    await user.click(within(problems).getByText(/line 11/));
    await waitFor(async () => {
      const view = await editor();
      expect(view.state.doc.lineAt(view.state.selection.main.head).number).toBe(11);
    });
    await type('V + R', 'V / R');
    expect(await screen.findByText('none found')).toBeTruthy();
    expect(screen.getByRole('button', { name: 'Send for review…' }).getAttribute('aria-disabled')).toBeNull();
  });

  test('saves a second after the last change on the revision it has, and keeps the text in the browser until then', async () => {
    let release = () => {};
    const answered = new Promise<void>((done) => {
      release = done;
    });
    const { heard } = open({
      [READ]: { body: draftPage() },
      [SAVE]: async () => {
        await answered;
        return { body: { revision: 4, hash: HASH, at: '2026-05-18T10:00:00.000Z' } };
      },
    });
    await type('Light.', 'Bright light.');
    await waitFor(() => expect([...kept.keys()].join()).toContain(`p1/draft/${ID}/`));
    await waitFor(() => expect(saves(heard)).toHaveLength(1));
    expect(saves(heard)[0]).toMatchObject({ baseRevision: 3, text: TEXT.replace('Light.', 'Bright light.') });
    expect(screen.getByText('keeping')).toBeTruthy();
    release();
    expect(await screen.findByText('kept')).toBeTruthy();
    await waitFor(() => expect(kept.size).toBe(0));
  });

  test('says once that a text is not kept without a connection, and keeps it when the connection is back', async () => {
    let answer = (): Reply => {
      throw new TypeError('no network');
    };
    open({ [READ]: { body: draftPage() }, [SAVE]: () => answer() });
    await type('Light.', 'Bright light.');
    expect(await screen.findByText('not yet kept: no connection', { selector: 'span' })).toBeTruthy();
    expect(screen.getByRole('alert').textContent).toContain('not yet kept: no connection');
    expect(kept.size).toBe(1);
    answer = () => ({ body: { revision: 4, hash: HASH, at: '2026-05-18T10:00:00.000Z' } });
    // A save that still waits for its next try would go to the server of a later test.
    fireEvent(window, new Event('online'));
    expect(await screen.findByText('kept')).toBeTruthy();
    await waitFor(() => expect(kept.size).toBe(0));
  });

  test('offers a text that was left unsent, and sends it only when it is taken', async () => {
    kept.set(`p1/draft/${ID}/an-earlier-tab`, {
      label: 'the text of “A lamp”',
      at: 1_779_100_000_000,
      payload: { text: TEXT.replace('Light.', 'Left behind.'), revision: 2 },
    });
    kept.set(`p2/draft/${ID}/somebody-else`, { label: 'x', at: 0, payload: { text: 'secret', revision: 2 } });
    const { heard, user } = open({
      [READ]: { body: draftPage() },
      [SAVE]: { body: { revision: 4, hash: HASH, at: '2026-05-18T10:00:00.000Z' } },
    });
    const offer = await screen.findByRole('region', { name: 'Text not sent' });
    expect(await sourceNow()).toBe(TEXT);
    const sent = () => saves(heard).filter((body) => JSON.stringify(body).includes('Left behind.'));
    expect(sent()).toHaveLength(0);
    await user.click(within(offer).getByRole('button', { name: 'Use that text' }));
    expect(await sourceNow()).toContain('Left behind.');
    await waitFor(() => expect(sent()).toHaveLength(1));
    expect(sent()[0]).toMatchObject({ baseRevision: 3 });
    expect(screen.queryByRole('region', { name: 'Text not sent' })).toBeNull();
    await waitFor(() => expect([...kept.keys()]).toEqual([`p2/draft/${ID}/somebody-else`]));
  });

  test('forgets a text that the server has after all', async () => {
    kept.set(`p1/draft/${ID}/an-earlier-tab`, { label: 'x', at: 1, payload: { text: TEXT, revision: 2 } });
    open({ [READ]: { body: draftPage() } });
    await editor();
    await waitFor(() => expect(kept.size).toBe(0));
    expect(screen.queryByRole('region', { name: 'Text not sent' })).toBeNull();
  });
});

describe('a draft that moved meanwhile', () => {
  const newest = draftPage({ text: TEXT.replace('Light.', 'Warm light.'), hash: 'b'.repeat(64) }, { revision: 4 });

  function openMoved() {
    let reads = 0;
    let tries = 0;
    return open({
      [READ]: () => ({ body: reads++ === 0 ? draftPage() : newest }),
      [SAVE]: () => (tries++ === 0 ? moved() : { body: { revision: 5, hash: HASH, at: '2026-05-18T10:00:00.000Z' } }),
    });
  }

  test('shows both texts, and uses what was typed when asked', async () => {
    const { heard, user } = openMoved();
    await type('title: A lamp', 'title: My lamp');
    // The page that shows both texts is loaded later.
    const panel = await screen.findByRole('region', { name: /Ines saved this draft/ }, { timeout: 15_000 });
    expect(within(panel).getAllByText(/Warm light|My/).length).toBeGreaterThan(1);
    await user.click(within(panel).getByRole('button', { name: 'Use what I typed, whole' }));
    await waitFor(() => expect(saves(heard)).toHaveLength(2));
    expect(saves(heard)[1]).toMatchObject({ baseRevision: 4, text: TEXT.replace('A lamp', 'My lamp') });
  });

  test('takes what was saved without saving again', async () => {
    const { heard, user } = openMoved();
    await type('title: A lamp', 'title: My lamp');
    await user.click(await screen.findByRole('button', { name: 'Use what was saved, whole' }));
    expect(await sourceNow()).toBe(newest.text);
    expect(await screen.findByText('kept')).toBeTruthy();
    expect(saves(heard)).toHaveLength(1);
  });

  test('joins both by what was changed on each side', async () => {
    const { heard, user } = openMoved();
    await type('title: A lamp', 'title: My lamp');
    await user.click(await screen.findByRole('button', { name: 'Use what is chosen below' }));
    await waitFor(() => expect(saves(heard)).toHaveLength(2));
    expect(saves(heard)[1]).toMatchObject({
      baseRevision: 4,
      text: TEXT.replace('A lamp', 'My lamp').replace('Light.', 'Warm light.'),
    });
  });

  test('says where the text is kept when it went into review, and opens it as a new draft', async () => {
    let reads = 0;
    const inReview = draftPage({ mayWrite: false }, { state: 'in-review', revision: 4 });
    const { heard, router, user } = open({
      [READ]: () => ({ body: reads++ === 0 ? draftPage() : inReview }),
      [SAVE]: moved({ state: 'in-review' }),
      'POST /api/drafts': { body: { id: '7c7f6f0e-9a1d-4c4e-8d53-0e2f5c6f7a10', already: false } },
      'GET /api/drafts/7c7f6f0e-9a1d-4c4e-8d53-0e2f5c6f7a10': {
        body: draftPage({}, { id: '7c7f6f0e-9a1d-4c4e-8d53-0e2f5c6f7a10' }),
      },
    });
    await type('title: A lamp', 'title: My lamp');
    const panel = await screen.findByRole('region', { name: /in review/ });
    expect(within(panel).getByText(/kept beside it on the server/)).toBeTruthy();
    await user.click(within(panel).getByRole('button', { name: 'Open as a new draft' }));
    await waitFor(() => expect(router.state.location.pathname).toBe('/write/7c7f6f0e-9a1d-4c4e-8d53-0e2f5c6f7a10'));
    const started = heard.find((one) => one.method === 'POST')?.body;
    expect(started).toMatchObject({ text: TEXT.replace('A lamp', 'My lamp') });
    await waitFor(() => expect(kept.size).toBe(0));
  });

  test('is taken in at once by a tab that has nothing unsent, when another tab has saved', async () => {
    let reads = 0;
    const { heard } = open({ [READ]: () => ({ body: reads++ === 0 ? draftPage() : newest }) });
    await editor();
    const other = new BroadcastChannel(`quadrille:draft/p1/${ID}`);
    other.postMessage({ kind: 'kept', revision: 4 });
    await waitFor(async () => expect(await sourceNow()).toBe(newest.text));
    expect(saves(heard)).toHaveLength(0);
    other.close();
  });
});

describe('sending for review', () => {
  test('waits for the save in flight and names its revision and hash', async () => {
    let isSent = false;
    const { heard, user } = open({
      [READ]: () => ({
        body: isSent
          ? draftPage(
              { mayWrite: false, mayTakeBack: true },
              {
                state: 'in-review',
                sentBy: { id: 'p1', name: 'Aren' },
                sentAt: '2026-05-18T10:00:00.000Z',
                note: 'New lamp',
              },
            )
          : draftPage(),
      }),
      [SAVE]: { body: { revision: 4, hash: 'c'.repeat(64), at: '2026-05-18T10:00:00.000Z' } },
      [`POST /api/drafts/${ID}/send`]: () => {
        isSent = true;
        return { body: draftPage().draft };
      },
    });
    await type('Light.', 'Bright light.');
    expect(await screen.findByText('kept', undefined)).toBeTruthy();
    expect(await screen.findByText('none found')).toBeTruthy();
    await user.click(screen.getByRole('button', { name: 'Send for review…' }));
    const dialog = await screen.findByRole('dialog', { name: 'Send for review' });
    await user.type(within(dialog).getByRole('textbox'), 'New lamp');
    await user.click(within(dialog).getByRole('button', { name: /Send for review/ }));
    expect(await screen.findByText(/In review, and frozen/)).toBeTruthy();
    expect(heard.find((one) => one.path.endsWith('/send'))?.body).toMatchObject({
      revision: 4,
      hash: 'c'.repeat(64),
      note: 'New lamp',
    });
    expect(screen.getByRole('button', { name: 'Take back' })).toBeTruthy();
    expect(screen.getByText(/“New lamp”/)).toBeTruthy();
  });

  test('shows what the server found and this page did not', async () => {
    const place = { line: 9, column: 1, offset: 90 };
    const { user } = open({
      [READ]: { body: draftPage() },
      [`POST /api/drafts/${ID}/send`]: {
        status: 422,
        body: {
          code: 'checks-failed',
          title: 'A check fails',
          detail: '1 problem stands in the text. Nothing was done.',
          diagnostics: [{ severity: 'error', code: 'x', message: 'The slug is taken.', start: place, end: place }],
        },
      },
    });
    expect(await screen.findByText('none found')).toBeTruthy();
    await user.click(screen.getByRole('button', { name: 'Send for review…' }));
    const dialog = await screen.findByRole('dialog', { name: 'Send for review' });
    await user.click(within(dialog).getByRole('button', { name: /Send for review/ }));
    expect(await screen.findByText(/The slug is taken/)).toBeTruthy();
    expect(screen.getByRole('button', { name: 'Line 9' })).toBeTruthy();
  });

  test('shows the reason on top when it came back', async () => {
    open({
      [READ]: {
        body: draftPage(
          {},
          { sentBack: { by: 'Edda', at: '2026-05-18T10:00:00.000Z', reason: 'The limit is missing.' } },
        ),
      },
    });
    expect(await screen.findByText(/The limit is missing/)).toBeTruthy();
  });
});

describe('the start page', () => {
  const lists: Answers = {
    'GET /api/drafts': {
      body: {
        drafts: [
          draftPage().draft,
          draftPage(
            {},
            { id: '1c7f6f0e-9a1d-4c4e-8d53-0e2f5c6f7a10', owner: { id: 'p9', name: 'Ines' }, title: 'Hers' },
          ).draft,
        ],
      },
    },
    'GET /api/recipes': { body: { recipes: [] } },
    'POST /api/drafts': { body: { id: ID, already: false } },
    [READ]: { body: draftPage() },
  };

  test('lists my drafts, and apart from them those I may only see', async () => {
    open(lists, '/write');
    const mine = await screen.findByRole('table', { name: 'Drafts you write' });
    expect(within(mine).getAllByRole('link')).toHaveLength(1);
    expect(screen.getByRole('table', { name: 'Others’ drafts that you may see' })).toBeTruthy();
  });

  test('starts from a skeleton under a title of its own', async () => {
    const { heard, router, user } = open(lists, '/write');
    await user.click(await screen.findByRole('radio', { name: /An op amp stage/ }));
    await user.type(screen.getByLabelText(/Title of your recipe/), 'Stage for the whistle');
    await user.click(screen.getByRole('button', { name: 'Start writing' }));
    await waitFor(() => expect(router.state.location.pathname).toBe(`/write/${ID}`));
    const body = heard.find((one) => one.method === 'POST')?.body;
    expect(body).toMatchObject({
      text: expect.stringContaining('title: Stage for the whistle\nslug: stage-for-the-whistle'),
    });
  });

  test('shows what was understood of a pasted list before it is used', async () => {
    const { heard, user } = open(lists, '/write');
    await user.click(await screen.findByRole('radio', { name: /A pasted list/ }));
    const start = () => screen.getByRole('button', { name: 'Start writing' });
    expect(start().getAttribute('aria-disabled')).toBe('true');
    await user.type(screen.getByLabelText(/Names and values/), 'R1 = 10k\nwords');
    expect(screen.getByRole('row', { name: /R1 10.00.kΩ/ })).toBeTruthy();
    expect(screen.getByText(/Line 2 is left out/)).toBeTruthy();
    await user.click(start());
    await waitFor(() => expect(heard.some((one) => one.method === 'POST')).toBe(true));
    expect(heard.find((one) => one.method === 'POST')?.body).toMatchObject({
      text: expect.stringContaining('<Given name="R1" label="R1" quantity="resistance" value="10k" />'),
    });
  });
});
