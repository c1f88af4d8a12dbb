import { QueryClientProvider } from '@tanstack/react-query';
import { configure, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, Link, Outlet, RouterProvider } from 'react-router-dom';
import { describe, expect, test } from 'vitest';
import type { DesignRow, DesignPage as Page } from '#api';
import { COMPILER_VERSION } from '#recipe';
import { DesignPage } from '../../src/features/designs/design-page.tsx';
import { DesignsPage } from '../../src/features/designs/designs-page.tsx';
import { newQueryClient } from '../../src/lib/query-client.ts';
import { meReading } from '../../src/lib/session.ts';
import { LiveRegions } from '../../src/ui/announce.tsx';
import { shuntText } from '../shunt-recipe.ts';
import { fakeServer, type Heard, type Reply } from './fake-server.ts';
import { AUTHOR, meAs, READER } from './review-fixtures.ts';
import { compileText } from './starter-documents.ts';

// Parts of a page are loaded when they are wanted; on a busy machine that takes longer than the default second.
configure({ asyncUtilTimeout: 10_000 });

const ID = '5c3c1c86-7d8e-4f6a-9d15-0f3b5f7d2a01';
const COPY = '5c3c1c86-7d8e-4f6a-9d15-0f3b5f7d2a02';

function row(change: Partial<DesignRow> = {}): DesignRow {
  return {
    id: ID,
    name: 'Car 3, ammeter',
    project: 'Works car',
    owner: READER,
    visibility: 'team',
    recipe: { slug: 'shunt-reading', number: 'Q-001', title: 'Shunt reading for the works car' },
    version: 1,
    versionState: 'published',
    newestVersion: 1,
    limitsBroken: 0,
    updatedAt: '2026-05-18T12:00:00.000Z',
    ...change,
  };
}

/** 20 · 13 A · 10 mΩ: own arithmetic. */
const SHOWN: Page['shown'] = {
  engine: COMPILER_VERSION,
  calculators: {
    shunt: {
      results: { V_out: { text: '2.600\u2009V', low: 2.6, high: 2.6 } },
      limits: { 'meter range': 'within' },
    },
  },
};

function designPage(change: Partial<Page> = {}): Page {
  return {
    design: row(),
    inputs: { shunt: { I: '13 A' } },
    note: 'Beside the controller.',
    shown: SHOWN,
    document: compileText(shuntText({ gain: 20 })),
    mayChange: true,
    ...change,
  };
}

interface Settings {
  readonly page?: Page;
  readonly at?: string;
  readonly designs?: readonly DesignRow[];
  readonly update?: (heard: Heard) => Reply;
}

function open(settings: Settings = {}) {
  const me = meAs(READER, 'reader');
  const page = settings.page ?? designPage();
  const heard = fakeServer({
    'GET /api/me': { body: me },
    'GET /api/designs': { body: { designs: settings.designs ?? [] } },
    [`GET /api/designs/${ID}`]: { body: page },
    [`PATCH /api/designs/${ID}`]:
      settings.update ??
      (({ body }) => {
        const { requestId: _id, note: _note, inputs: _inputs, shown: _shown, ...changes } = Object(body);
        return { body: { ...page.design, ...changes, updatedAt: '2026-05-18T12:05:00.000Z' } };
      }),
    [`POST /api/designs/${ID}/remove`]: { body: {} },
    'POST /api/designs': ({ body }) => ({ body: row({ id: COPY, name: Object(body).name }) }),
    [`GET /api/designs/${COPY}`]: { body: designPage({ design: row({ id: COPY, name: 'The copy' }) }) },
  });
  const queries = newQueryClient();
  queries.setQueryData(meReading.queryKey, me);
  const router = createMemoryRouter(
    [
      {
        element: (
          <>
            <Link to="/recipes">Away</Link>
            <Outlet />
            <LiveRegions />
          </>
        ),
        children: [
          { path: '/designs', Component: DesignsPage },
          { path: '/designs/:id', Component: DesignPage },
          { path: '*', element: <p>another page</p> },
        ],
      },
    ],
    { initialEntries: [settings.at ?? `/designs/${ID}`] },
  );
  render(
    <QueryClientProvider client={queries}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  const changes = () => heard.filter((one) => one.method !== 'GET');
  return { changes, router, user: userEvent.setup() };
}

const current = () => screen.findByRole<HTMLInputElement>('textbox', { name: 'Motor current' });
const result = () => screen.getByRole('button', { name: /^Output: / }).getAttribute('aria-label') ?? '';
const keepButton = () => screen.getByRole('button', { name: /Keep changes/ });

async function type(user: ReturnType<typeof userEvent.setup>, field: HTMLElement, text: string) {
  await user.clear(field);
  await user.type(field, text);
}

describe('a design', () => {
  test('shows the results of its own inputs on the version that it was kept with', async () => {
    open();
    expect((await current()).value).toBe('13 A');
    expect(result()).toContain('2.600');
    expect(screen.getByRole('link', { name: /version 1/ }).getAttribute('href')).toBe(
      '/recipes/shunt-reading?version=1',
    );
    expect(keepButton().getAttribute('aria-disabled')).toBe('true');
    expect(screen.getByText('Nothing has changed.')).toBeTruthy();
  });

  test('keeps a changed number with the results that it gives, and is then up to date', async () => {
    const { changes, user } = open();
    await type(user, await current(), '14');
    expect(screen.getByText('Changed and not kept yet: 1 number.')).toBeTruthy();
    await user.click(keepButton());
    expect(await screen.findByText('Nothing has changed.')).toBeTruthy();
    const [sent] = changes();
    expect(sent?.body).toMatchObject({
      updatedAt: '2026-05-18T12:00:00.000Z',
      inputs: { shunt: { I: '14 A' } },
      shown: { calculators: { shunt: { results: { V_out: { text: '2.800\u2009V' } } } } },
    });
    await type(user, screen.getByRole('textbox', { name: /^Name/ }), 'Car 5, ammeter');
    await user.click(keepButton());
    await waitFor(() => expect(changes()).toHaveLength(2));
    expect(changes()[1]?.body).toMatchObject({ name: 'Car 5, ammeter', updatedAt: '2026-05-18T12:05:00.000Z' });
    expect(changes()[1]?.body).not.toHaveProperty('inputs');
  });

  test('keeps nothing while a field is refused, and says which', async () => {
    const { changes, user } = open();
    await type(user, await current(), '14 V');
    await user.click(keepButton());
    expect(screen.getByText('A field needs a change first: I.')).toBeTruthy();
    expect(changes()).toEqual([]);
  });

  test('needs a name: the error stands at the field and the focus goes there', async () => {
    const { changes, user } = open();
    await current();
    const name = screen.getByRole('textbox', { name: /^Name/ });
    await user.clear(name);
    await user.click(keepButton());
    expect(await screen.findByText('Give the design a name.')).toBeTruthy();
    expect(document.activeElement).toBe(name);
    expect(changes()).toEqual([]);
  });

  test('puts back what was kept', async () => {
    const { user } = open();
    await type(user, await current(), '14 A');
    await user.click(screen.getByRole('button', { name: 'Put back as kept' }));
    expect((await current()).value).toBe('13 A');
    expect(screen.getByText('Nothing has changed.')).toBeTruthy();
  });

  test('after a lost answer keeps what was typed and sends the same request again', async () => {
    let isLost = true;
    const { changes, user } = open({
      update: () => {
        if (!isLost) return { body: row({ updatedAt: '2026-05-18T12:05:00.000Z' }) };
        isLost = false;
        throw new TypeError('the connection broke');
      },
    });
    await type(user, await current(), '14 A');
    await user.click(keepButton());
    expect(await screen.findByText(/What you typed is still here/)).toBeTruthy();
    expect((await current()).value).toBe('14 A');
    await user.click(keepButton());
    expect(await screen.findByText('Nothing has changed.')).toBeTruthy();
    expect(changes()[1]?.body).toEqual(changes()[0]?.body);
  });
});

describe('a design that was changed elsewhere', () => {
  const there = {
    design: row({ name: 'Car 3, big meter', updatedAt: '2026-05-18T12:02:00.000Z' }),
    inputs: { shunt: { I: '13 A', R_s: '12 mΩ' } },
    note: 'Beside the controller.',
    shown: SHOWN,
  };
  const conflictOnce = () => {
    let isFirst = true;
    return () => {
      if (!isFirst) return { body: row({ updatedAt: '2026-05-18T12:05:00.000Z' }) };
      isFirst = false;
      const detail = 'This design was changed in the meantime. Nothing was done.';
      return { status: 409, body: { code: 'stale', title: 'Moved', detail, ...there } };
    };
  };

  async function meet() {
    const opened = open({ update: conflictOnce() });
    await type(opened.user, await current(), '14 A');
    await opened.user.click(keepButton());
    const notice = await screen.findByRole('region', { name: 'The design has moved' });
    return { ...opened, notice };
  }

  test('shows what is there and what stands here, and loses neither', async () => {
    const { notice } = await meet();
    const rows = within(notice)
      .getAllByRole('row')
      .slice(1)
      .map((one) => [...one.children].map((cell) => cell.textContent));
    expect(rows).toEqual([
      ['Name', 'Car 3, big meter', 'Car 3, ammeter'],
      ['Motor current', '13 A', '14 A'],
      ['Shunt', '12 mΩ', 'the recipe’s own value'],
    ]);
    expect((await current()).value).toBe('14 A');
  });

  test('goes on with the changes made here over what is there now', async () => {
    const { notice, changes, user } = await meet();
    await user.click(within(notice).getByRole('button', { name: 'Go on with my changes' }));
    expect(screen.getByText('Changed and not kept yet: 1 number.')).toBeTruthy();
    await user.click(keepButton());
    await waitFor(() => expect(changes()).toHaveLength(2));
    expect(changes()[1]?.body).toMatchObject({
      name: 'Car 3, big meter',
      updatedAt: '2026-05-18T12:02:00.000Z',
      inputs: { shunt: { I: '14 A', R_s: '12 mΩ' } },
    });
  });

  test('or takes what is there', async () => {
    const { notice, user } = await meet();
    await user.click(within(notice).getByRole('button', { name: 'Take what is there now' }));
    expect((await current()).value).toBe('13 A');
    expect(screen.getByRole<HTMLInputElement>('textbox', { name: /^Name/ }).value).toBe('Car 3, big meter');
    expect(screen.getByText('Nothing has changed.')).toBeTruthy();
  });
});

describe('results that were kept', () => {
  const withResult = (text: string, volts: number, engine = COMPILER_VERSION, limit = 'within') => ({
    engine,
    calculators: {
      shunt: { results: { V_out: { text, low: volts, high: volts } }, limits: { 'meter range': limit } },
    },
  });

  test('stand beside what comes out now where the two differ, with the reason', async () => {
    open({ page: designPage({ shown: withResult('3.100\u2009V', 3.1, 0, 'exceeded') }) });
    const region = await screen.findByRole('region', { name: 'Results that differ from when this was kept' });
    const cells = (name: string) =>
      within(within(region).getByRole('row', { name: new RegExp(name) }))
        .getAllByRole('cell')
        .map((cell) => cell.textContent);
    expect(cells('^Output')).toEqual(['3.100\u2009V', '2.600\u2009V']);
    expect(cells('limit meter range')).toEqual(['exceeded', 'within']);
    expect(region.textContent).toContain(
      `engine 0 when they were kept; this page works with engine ${COMPILER_VERSION}`,
    );
  });

  test('that differ by rounding alone are no difference, also where the last digit moved', async () => {
    open({ page: designPage({ shown: withResult('2.601\u2009V', 2.6 + 1e-12) }) });
    await current();
    expect(screen.queryByRole('region', { name: /differ from when this was kept/ })).toBeNull();
  });

  test('are replaced by those of today when the owner says so', async () => {
    const { changes, user } = open({ page: designPage({ shown: withResult('3.100\u2009V', 3.1) }) });
    await user.click(await screen.findByRole('button', { name: 'Keep the numbers as they come out now' }));
    await waitFor(() => expect(screen.queryByRole('region', { name: /differ from when/ })).toBeNull());
    expect(changes()[0]?.body).toEqual({
      updatedAt: '2026-05-18T12:00:00.000Z',
      shown: SHOWN,
      requestId: expect.any(String),
    });
  });
});

describe('leaving a design', () => {
  test('with changes asks first, and staying loses nothing', async () => {
    const { router, user } = open();
    await type(user, await current(), '14 A');
    await user.click(screen.getByRole('link', { name: 'Away' }));
    await user.click(await screen.findByRole('button', { name: 'Stay here' }));
    expect(router.state.location.pathname).toBe(`/designs/${ID}`);
    expect((await current()).value).toBe('14 A');
    await user.click(screen.getByRole('link', { name: 'Away' }));
    await user.click(await screen.findByRole('button', { name: 'Leave and drop the changes' }));
    expect(await screen.findByText('another page')).toBeTruthy();
  });

  test('asks the browser to ask before a reload, as long as something is not kept', async () => {
    const { user } = open();
    const reload = () => {
      const event = new Event('beforeunload', { cancelable: true });
      window.dispatchEvent(event);
      return event.defaultPrevented;
    };
    await current();
    expect(reload()).toBe(false);
    await type(user, await current(), '14 A');
    expect(reload()).toBe(true);
  });

  test('without changes asks nothing', async () => {
    const { user } = open();
    await current();
    await user.click(screen.getByRole('link', { name: 'Away' }));
    expect(await screen.findByText('another page')).toBeTruthy();
  });
});

describe('what else can be done with a design', () => {
  test('another design is kept from the numbers that stand there, without a question about the old one', async () => {
    const { changes, router, user } = open();
    await type(user, await current(), '14 A');
    await user.click(screen.getByRole('button', { name: 'Keep as another design' }));
    const dialog = await screen.findByRole('dialog', { name: 'Keep as another design' });
    await type(user, within(dialog).getByRole('textbox', { name: 'Name' }), 'The copy');
    await user.click(within(dialog).getByRole('button', { name: /Keep as another design/ }));
    expect(await screen.findByRole('heading', { level: 1, name: 'The copy' })).toBeTruthy();
    expect(router.state.location.pathname).toBe(`/designs/${COPY}`);
    expect(changes()[0]?.body).toMatchObject({
      name: 'The copy',
      slug: 'shunt-reading',
      version: 1,
      inputs: { shunt: { I: '14 A' } },
    });
  });

  test('removing asks first, and leaving it removes nothing', async () => {
    const { changes, router, user } = open();
    await current();
    await user.click(screen.getByRole('button', { name: 'Remove…' }));
    await user.click(await screen.findByRole('button', { name: 'Leave it' }));
    expect(changes()).toEqual([]);
    await user.click(screen.getByRole('button', { name: 'Remove…' }));
    await user.click(await screen.findByRole('button', { name: /^Remove/ }));
    await waitFor(() => expect(router.state.location.pathname).toBe('/designs'));
    expect(changes().map((one) => one.body)).toEqual([
      { updatedAt: '2026-05-18T12:00:00.000Z', requestId: expect.any(String) },
    ]);
  });

  test('somebody else’s can be tried and copied, not changed', async () => {
    const { user } = open({ page: designPage({ design: row({ owner: AUTHOR }), mayChange: false }) });
    await type(user, await current(), '14 A');
    expect(result()).toContain('2.800');
    expect(screen.queryByRole('button', { name: /Keep changes|Remove/ })).toBeNull();
    expect(screen.getByRole('button', { name: 'Keep as another design' })).toBeTruthy();
    expect(screen.getByText('Beside the controller.')).toBeTruthy();
  });
});

describe('what keeps people safe', () => {
  const SAFETY = `<Caution kind="battery">
A shorted battery cable welds itself fast.
</Caution>

<Note kind="layout">Take the sense wires from inside the shunt.</Note>

<Note kind="measuring">Read with the motor stalled.</Note>

<Note>The car is green.</Note>
`;
  const text = shuntText({ gain: 20 }).replace('hazards: [none]', 'hazards: [battery]') + SAFETY;

  test('cautions and the notes on layout and measuring go with the design, other notes do not', async () => {
    open({ page: designPage({ document: compileText(text) }) });
    expect(await screen.findByRole('region', { name: 'Caution: Battery' })).toBeTruthy();
    expect(screen.getByText('A shorted battery cable welds itself fast.')).toBeTruthy();
    expect(screen.getByText(/Local codes and a licensed practitioner decide/)).toBeTruthy();
    expect(screen.getByText('Take the sense wires from inside the shunt.')).toBeTruthy();
    expect(screen.getByText('Read with the motor stalled.')).toBeTruthy();
    expect(screen.queryByText('The car is green.')).toBeNull();
  });

  test('a withdrawn version says in red words not to build', async () => {
    open({ page: designPage({ design: row({ versionState: 'withdrawn', newestVersion: 2 }) }) });
    expect(
      await screen.findByRole('region', { name: 'Version 1 was withdrawn. Do not build from this design.' }),
    ).toBeTruthy();
  });

  test('a superseded version names the newer one and says that nothing here changes', async () => {
    open({ page: designPage({ design: row({ versionState: 'superseded', newestVersion: 3 }) }) });
    const note = await screen.findByRole('note');
    expect(note.textContent).toContain('Version 3 is newer.');
    expect(within(note).getByRole('link').getAttribute('href')).toBe('/recipes/shunt-reading?version=3');
  });
});

describe('the register of designs', () => {
  const DESIGNS = [
    row({ newestVersion: 2, versionState: 'superseded', limitsBroken: 1 }),
    row({ id: COPY, name: 'Withdrawn one', versionState: 'withdrawn' }),
    row({ id: '5c3c1c86-7d8e-4f6a-9d15-0f3b5f7d2a03', name: 'Of a colleague', owner: AUTHOR }),
  ];

  test('lists one’s own with what is new, and the team’s on request', async () => {
    const { router, user } = open({ at: '/designs', designs: DESIGNS });
    const line = await screen.findByRole('row', { name: /Car 3, ammeter/ });
    expect(within(line).getByText('Version 2 is newer')).toBeTruthy();
    expect(within(line).getByText('1 broken')).toBeTruthy();
    const withdrawn = screen.getByRole('row', { name: /Withdrawn one/ });
    expect(within(withdrawn).getByText('do not build')).toBeTruthy();
    expect(screen.queryByText('Of a colleague')).toBeNull();

    await user.click(screen.getByRole('radio', { name: 'The team’s' }));
    const theirs = await screen.findByRole('row', { name: /Of a colleague/ });
    expect(within(theirs).getByText('Aren Tilling')).toBeTruthy();
    expect(within(theirs).getByText('up to date')).toBeTruthy();
    expect(screen.queryByText('Car 3, ammeter')).toBeNull();
    expect(router.state.location.search).toBe('?show=team');
  });

  test('when it is empty, leads to the recipes', async () => {
    open({ at: '/designs' });
    expect(await screen.findByText(/No design yet\./)).toBeTruthy();
    expect(screen.getByRole('link', { name: 'Open the recipes' }).getAttribute('href')).toBe('/recipes');
  });
});
