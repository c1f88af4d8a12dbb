import { EditorView } from '@codemirror/view';
import { QueryClientProvider } from '@tanstack/react-query';
import { act, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { vi } from 'vitest';
import type { DraftPage, Me, SaveConflict } from '#api';
import { compileRecipe } from '#recipe';
import type { CompileRequest } from '../../src/features/writing/compile.worker.ts';
import { StartPage } from '../../src/features/writing/start-page.tsx';
import { WritePage } from '../../src/features/writing/write-page.tsx';
import { newQueryClient } from '../../src/lib/query-client.ts';
import { LiveRegions } from '../../src/ui/announce.tsx';
import { fakeServer, type Heard, type Reply } from './fake-server.ts';

/** Compiles in the page itself, a moment later, as the worker would. */
class PageWorker {
  onmessage: ((event: { data: unknown }) => void) | null = null;
  onerror = null;
  constructor() {
    setTimeout(() => this.onmessage?.({ data: { ready: true } }), 0);
  }
  postMessage({ version, text, facts }: CompileRequest) {
    setTimeout(() => this.onmessage?.({ data: { version, compiled: compileRecipe(text, facts) } }), 0);
  }
  terminate() {
    this.onmessage = null;
  }
}

/** jsdom has no worker and lays nothing out; the editor asks for the places of its lines all the same. */
export function standIns(): void {
  vi.stubGlobal('Worker', PageWorker);
  const nowhere = () => ({ length: 0, item: () => null, [Symbol.iterator]: [][Symbol.iterator] });
  Object.assign(Range.prototype, { getClientRects: nowhere, getBoundingClientRect: () => new DOMRect() });
}

export const ID = '0c7f6f0e-9a1d-4c4e-8d53-0e2f5c6f7a10';
export const HASH = 'a'.repeat(64);
export const TEXT = `---
title: A lamp
slug: a-lamp
summary: Light.
hazards: [none]
---

<Calculator id="lamp" title="Numbers">
  <Given name="V" label="Voltage" quantity="voltage" value="6 V" />
  <Given name="R" label="Resistance" quantity="resistance" value="12 Ω" />
  <Result name="I" label="Current" formula="V / R" />
  <Example title="Half an ampere" source="own arithmetic">
    <Expect name="I" to="0.5 A" />
  </Example>
</Calculator>
`;

const aren: Me = {
  person: { id: 'p1', name: 'Aren', email: 'aren@example.org', role: 'author' },
  team: {
    name: 'Workshop',
    timeZone: 'UTC',
    allowSelfSignOff: false,
    publicUrl: 'http://localhost',
    needsSetUp: false,
  },
  notices: [],
  reviewsWaiting: 0,
  release: '0.1.0',
};

export function draftPage(change: Partial<DraftPage> = {}, row: Partial<DraftPage['draft']> = {}): DraftPage {
  return {
    draft: {
      id: ID,
      title: 'A lamp',
      number: '',
      slug: 'a-lamp',
      state: 'draft',
      revision: 3,
      from: null,
      owner: { id: 'p1', name: 'Aren' },
      authors: [],
      writtenBy: [{ id: 'p1', name: 'Aren' }],
      updatedAt: '2026-05-18T10:00:00.000Z',
      sentBy: null,
      sentAt: null,
      note: '',
      sentBack: null,
      ...row,
    },
    text: TEXT,
    hash: HASH,
    mayWrite: true,
    mayTakeBack: false,
    base: null,
    facts: { recipes: {}, topics: [], hazardVolts: 42.4 },
    ...change,
  };
}

export type Answers = Readonly<Record<string, Reply | ((heard: Heard) => Reply | Promise<Reply>)>>;

export function open(answers: Answers, at = `/write/${ID}`) {
  const heard = fakeServer({ 'GET /api/me': { body: aren }, ...answers });
  const queries = newQueryClient();
  queries.setQueryData(['me.read', {}], aren);
  const router = createMemoryRouter(
    [
      { path: '/write', Component: StartPage },
      { path: '/write/:id', Component: WritePage },
      { path: '*', element: <p>another page</p> },
    ],
    { initialEntries: [at] },
  );
  render(
    <QueryClientProvider client={queries}>
      <RouterProvider router={router} />
      <LiveRegions />
    </QueryClientProvider>,
  );
  return { heard, router, user: userEvent.setup() };
}

export const READ = `GET /api/drafts/${ID}`;
export const SAVE = `PUT /api/drafts/${ID}/text`;
export const saves = (heard: readonly Heard[]) => heard.filter((one) => one.method === 'PUT').map((one) => one.body);
export const moved = (change: Partial<SaveConflict> = {}): Reply => ({
  status: 409,
  body: {
    type: 'x',
    title: 'It changed in the meantime',
    status: 409,
    code: 'stale',
    saveId: 'a-save-of-this-tab',
    state: 'draft',
    revision: 4,
    text: TEXT.replace('Light.', 'Warm light.'),
    baseText: TEXT,
    savedBy: 'Ines',
    ...change,
  },
});

export async function editor(): Promise<EditorView> {
  const content = await screen.findByRole('textbox', { name: /^Source of/ });
  const view = EditorView.findFromDOM(content);
  if (view === null) throw new Error('no editor stands there');
  return view;
}

export async function type(before: string, after: string): Promise<void> {
  const view = await editor();
  const from = view.state.doc.toString().indexOf(before);
  act(() => view.dispatch({ changes: { from, to: from + before.length, insert: after } }));
}

export const sourceNow = async () => (await editor()).state.doc.toString();
