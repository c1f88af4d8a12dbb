import { describe, expect, test, vi } from 'vitest';
import { request } from '../../src/lib/client.ts';
import { newId } from '../../src/lib/ids.ts';
import { wantedPath } from '../../src/lib/paths.ts';
import { serverNews, tellNews } from '../../src/lib/server-news.ts';
import { fakeServer } from './fake-server.ts';
import { expectedConsoleErrors } from './setup.ts';

const ID = '0192d3f4-7a5b-4c3d-8e2f-1a2b3c4d5e6f';
const people = {
  people: [{ id: 'p1', name: 'Ines', role: 'editor', active: true, since: '2026-05-18T08:00:00.000Z' }],
};

describe('a request of the contract', () => {
  test('puts params into the path and the query behind it', async () => {
    const heard = fakeServer({
      'GET /api/recipes/rail-splitter/text': { body: { slug: 'rail-splitter', version: 2, text: 'x' } },
    });
    const answer = await request('recipes.text', { params: { slug: 'rail-splitter' }, query: { version: 2 } });
    expect(heard).toMatchObject([{ method: 'GET', path: '/api/recipes/rail-splitter/text?version=2' }]);
    expect(answer).toEqual({ ok: true, value: { slug: 'rail-splitter', version: 2, text: 'x' } });
  });

  test('escapes what it puts into the path', async () => {
    const heard = fakeServer({ 'PATCH /api/people/a%2Fb': { body: people.people[0] } });
    await request('people.update', { params: { id: 'a/b' }, body: { requestId: newId(), active: false } });
    expect(heard[0]?.path).toBe('/api/people/a%2Fb');
  });

  test('gives a refusal with its fields, its code and its extra members', async () => {
    fakeServer({
      [`PUT /api/drafts/${ID}/text`]: {
        status: 409,
        body: {
          type: '/api/docs#stale',
          title: 'It changed',
          status: 409,
          code: 'stale',
          detail: 'Moved.',
          revision: 4,
        },
      },
    });
    const answer = await request('drafts.saveText', {
      params: { id: ID },
      body: { saveId: newId(), baseRevision: 3, text: '' },
    });
    expect(answer).toMatchObject({
      ok: false,
      error: { kind: 'refused', status: 409, code: 'stale', message: 'Moved.', problem: { revision: 4 } },
    });
  });

  test('tells a missing connection from a server that is slow', async () => {
    vi.stubGlobal('fetch', () => Promise.reject(new TypeError('Failed to fetch')));
    expect(await request('people.list', {})).toMatchObject({ ok: false, error: { kind: 'offline' } });

    vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] });
    vi.stubGlobal(
      'fetch',
      (_url: string, { signal }: { signal: AbortSignal }) =>
        new Promise((_answer, refuse) => {
          signal.addEventListener('abort', () => refuse(signal.reason));
        }),
    );
    const slow = request('people.list', {});
    await vi.advanceTimersByTimeAsync(30_000);
    expect(await slow).toMatchObject({ ok: false, error: { kind: 'timeout' } });
    vi.useRealTimers();
  });

  test('refuses an answer that does not follow the contract, in development and in tests', async () => {
    fakeServer({ 'GET /api/people': { body: { people: [{ id: 7 }] } } });
    expect(await request('people.list', {})).toMatchObject({ ok: false, error: { kind: 'unreadable' } });
    expect(expectedConsoleErrors()).toHaveLength(1);
  });

  test('notices that nobody is signed in any more', async () => {
    fakeServer({ 'GET /api/people': { status: 401, body: { code: 'not-signed-in', title: 'Sign in first' } } });
    await request('people.list', {});
    expect(serverNews().isSignedOut).toBe(true);
    tellNews({ isSignedOut: false });
  });

  test('notices another release than the one the page was made by', async () => {
    const meta = document.createElement('meta');
    meta.name = 'release';
    meta.content = '0.1.0+aaaa';
    document.head.append(meta);
    fakeServer({ 'GET /api/people': { body: people, headers: { 'quadrille-release': '0.1.0+aaaa' } } });
    await request('people.list', {});
    expect(serverNews().isUpdated).toBe(false);
    fakeServer({ 'GET /api/people': { body: people, headers: { 'quadrille-release': '0.2.0+bbbb' } } });
    await request('people.list', {});
    expect(serverNews().isUpdated).toBe(true);
    tellNews({ isUpdated: false });
    meta.remove();
  });
});

describe('ids', () => {
  test('fit the contract and do not repeat', () => {
    const ids = Array.from({ length: 200 }, newId);
    expect(new Set(ids).size).toBe(200);
    for (const id of ids) expect(id).toMatch(/^[A-Za-z0-9_-]{23}$/);
  });
});

describe('the page wanted after signing in', () => {
  test.each([
    ['?to=%2Frecipes%2Frail-splitter%3Fversion%3D2', '/recipes/rail-splitter?version=2'],
    ['', '/recipes'],
    ['?to=https%3A%2F%2Felsewhere.example', '/recipes'],
    ['?to=%2F%2Felsewhere.example', '/recipes'],
    ['?to=%2F%5Celsewhere.example', '/recipes'],
  ])('%s leads to %s', (search, path) => {
    expect(wantedPath(search)).toBe(path);
  });
});
