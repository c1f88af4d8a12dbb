import { act, configure, fireEvent, screen, waitFor, within } from '@testing-library/react';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import {
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

let other: BroadcastChannel;
let told: unknown[] = [];

/** Another tab of the same person: what it hears, and what it may say. */
beforeEach(() => {
  kept.clear();
  standIns();
  told = [];
  other = new BroadcastChannel(`quadrille:draft/p1/${ID}`);
  other.onmessage = ({ data }: MessageEvent<unknown>) => void told.push(data);
});
afterEach(() => other.close());

const inReview = (text = TEXT) =>
  draftPage(
    { text, mayWrite: false, mayTakeBack: true },
    { state: 'in-review', sentBy: { id: 'p1', name: 'Aren' }, sentAt: '2026-05-18T10:00:00.000Z' },
  );
const bar = async () => (await screen.findByRole('heading', { level: 1 })).parentElement;

describe('another tab of the same person', () => {
  test('that sends the draft freezes a tab that has nothing unsent', async () => {
    let now = draftPage();
    const { heard } = open({ [READ]: () => ({ body: now }) });
    await editor();
    now = inReview();
    other.postMessage({ kind: 'state' });
    expect(await screen.findByText(/In review, and frozen/)).toBeTruthy();
    expect((await bar())?.textContent).toContain('in review');
    expect(saves(heard)).toHaveLength(0);
  });

  test('that sends the draft leaves what is unsent here, and the closed panel says why', async () => {
    let now = draftPage();
    const { heard, user } = open({ [READ]: () => ({ body: now }), [SAVE]: moved({ state: 'in-review', revision: 3 }) });
    await editor();
    now = inReview();
    const typed = TEXT.replace('title: A lamp', 'title: My lamp');
    await type('title: A lamp', 'title: My lamp');
    other.postMessage({ kind: 'state' });
    const panel = await screen.findByRole('region', { name: /in review, and its text is frozen/ });
    expect(panel.querySelector('pre')?.textContent).toBe(typed);
    expect(saves(heard)).toMatchObject([{ baseRevision: 3, text: typed }]);
    expect([...kept.values()]).toMatchObject([{ payload: { text: typed } }]);
    await user.click(within(panel).getByRole('button', { name: 'Show the draft as it is' }));
    expect(await screen.findByText(/In review, and frozen/)).toBeTruthy();
    expect(await sourceNow()).toBe(TEXT);
  });

  test('that takes the draft back opens it here', async () => {
    let now = inReview();
    open({ [READ]: () => ({ body: now }) });
    expect(await screen.findByText(/In review, and frozen/)).toBeTruthy();
    now = draftPage();
    other.postMessage({ kind: 'state' });
    expect(await screen.findByRole('button', { name: 'Send for review…' })).toBeTruthy();
    expect(screen.queryByText(/In review, and frozen/)).toBeNull();
  });

  test('hears when this one takes the draft back', async () => {
    let now = inReview();
    const { user } = open({
      [READ]: () => ({ body: now }),
      [`POST /api/drafts/${ID}/take-back`]: () => {
        now = draftPage();
        return { body: now.draft };
      },
    });
    await user.click(await screen.findByRole('button', { name: 'Take back' }));
    await waitFor(() => expect(told).toContainEqual({ kind: 'state' }));
  });

  test('hears when this one sends the draft', async () => {
    let now = draftPage();
    const { user } = open({
      [READ]: () => ({ body: now }),
      [`POST /api/drafts/${ID}/send`]: () => {
        now = inReview();
        return { body: now.draft };
      },
    });
    expect(await screen.findByText('none found')).toBeTruthy();
    await user.click(screen.getByRole('button', { name: 'Send for review…' }));
    const dialog = await screen.findByRole('dialog', { name: 'Send for review' });
    await user.click(within(dialog).getByRole('button', { name: /Send for review/ }));
    expect(await screen.findByText(/In review, and frozen/)).toBeTruthy();
    await waitFor(() => expect(told).toContainEqual({ kind: 'state' }));
  });
});

describe('a window that gets the focus again', () => {
  test('shows what was decided elsewhere meanwhile', async () => {
    let now = draftPage();
    open({ [READ]: () => ({ body: now }) });
    await editor();
    now = inReview();
    fireEvent.focus(window);
    expect(await screen.findByText(/In review, and frozen/)).toBeTruthy();
    now = draftPage({}, { sentBack: { by: 'Edda', at: '2026-05-18T10:00:00.000Z', reason: 'The limit is missing.' } });
    fireEvent.focus(window);
    expect(await screen.findByText(/The limit is missing/)).toBeTruthy();
    expect(screen.getByRole('button', { name: 'Send for review…' })).toBeTruthy();
  });

  test('never writes over what is typed while the draft is read', async () => {
    let release = () => {};
    const answered = new Promise<void>((done) => {
      release = done;
    });
    let reads = 0;
    const newest = draftPage({ text: TEXT.replace('Light.', 'Warm light.') }, { revision: 4 });
    const { heard } = open({
      [READ]: async () => {
        if (reads++ === 0) return { body: draftPage() };
        await answered;
        return { body: newest };
      },
      [SAVE]: { body: { revision: 5, hash: HASH, at: '2026-05-18T10:00:00.000Z' } },
    });
    await editor();
    fireEvent.focus(window);
    await waitFor(() => expect(reads).toBe(2));
    await type('title: A lamp', 'title: My lamp');
    await act(async () => release());
    await waitFor(() => expect(saves(heard)).toHaveLength(1));
    expect(saves(heard)[0]).toMatchObject({ baseRevision: 3, text: TEXT.replace('A lamp', 'My lamp') });
    expect(await sourceNow()).toBe(TEXT.replace('A lamp', 'My lamp'));
  });
});

describe('a save that is refused because of the state', () => {
  test.each([
    ['in-review', 'in review'],
    ['published', 'published'],
    ['discarded', 'put aside'],
  ] as const)('shows the state that the answer names in the bar: %s', async (state, words) => {
    let now = draftPage();
    open({ [READ]: () => ({ body: now }), [SAVE]: moved({ state, revision: 3 }) });
    expect((await bar())?.textContent).toContain('draft');
    now = draftPage({ mayWrite: false }, { state });
    await type('title: A lamp', 'title: My lamp');
    expect(await screen.findByRole('button', { name: 'Show the draft as it is' })).toBeTruthy();
    const mark = (await bar())?.querySelector('.state-line, h1 + .note')?.textContent;
    expect(mark).toContain(words);
    expect(mark).not.toContain('draft');
  });

  test('shows the server’s text once it may be written again', async () => {
    let now = draftPage();
    const { user } = open({ [READ]: () => ({ body: now }), [SAVE]: moved({ state: 'in-review', revision: 3 }) });
    await editor();
    now = inReview();
    await type('title: A lamp', 'title: My lamp');
    const show = await screen.findByRole('button', { name: 'Show the draft as it is' });
    now = draftPage();
    await user.click(show);
    await waitFor(async () => expect(await sourceNow()).toBe(TEXT));
    expect(screen.getByText('kept')).toBeTruthy();
  });
});
