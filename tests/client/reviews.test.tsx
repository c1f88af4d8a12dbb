import { QueryClientProvider } from '@tanstack/react-query';
import { configure, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, Outlet, RouterProvider } from 'react-router-dom';
import { describe, expect, test } from 'vitest';
import type { Me, ReviewPage as Page } from '#api';
import { checkedForYou } from '../../src/features/reviews/checks-list.tsx';
import { withRangeSign } from '../../src/features/reviews/number-words.ts';
import { ReviewPage } from '../../src/features/reviews/review-page.tsx';
import { ReviewsPage } from '../../src/features/reviews/reviews-page.tsx';
import { textChanges } from '../../src/features/reviews/text-changes.ts';
import { newQueryClient } from '../../src/lib/query-client.ts';
import { meReading } from '../../src/lib/session.ts';
import { LiveRegions } from '../../src/ui/announce.tsx';
import { shuntText } from '../shunt-recipe.ts';
import { fakeServer, type Heard, type Reply } from './fake-server.ts';
import {
  AUTHOR,
  BROKEN_DESIGN,
  draftRow,
  EDITOR,
  HASH,
  meAs,
  NEW_TEXT,
  REVIEW_ID,
  reviewPage,
  TICKS,
} from './review-fixtures.ts';

// Parts of a page are loaded when they are wanted; on a busy machine that takes longer than the default second.
configure({ asyncUtilTimeout: 10_000 });

interface Settings {
  readonly me?: Me;
  readonly at?: string;
  /** One after the other; the last stays. */
  readonly pages?: readonly Page[];
  readonly reviews?: readonly Page['review'][];
  readonly signOff?: (heard: Heard) => Reply | Promise<Reply>;
  readonly sendBack?: (heard: Heard) => Reply;
}

function open(settings: Settings = {}) {
  const me = settings.me ?? meAs(EDITOR, 'editor');
  const pages = [...(settings.pages ?? [reviewPage()])];
  const review = `/api/reviews/${REVIEW_ID}`;
  const heard = fakeServer({
    'GET /api/me': { body: me },
    'GET /api/reviews': { body: { reviews: settings.reviews ?? [] } },
    [`GET ${review}`]: () => ({ body: pages.length > 1 ? pages.shift() : pages[0] }),
    [`POST ${review}/sign-off`]: settings.signOff ?? { body: { slug: 'shunt-reading', version: 2 } },
    [`POST ${review}/send-back`]: settings.sendBack ?? {
      body: draftRow({ state: 'draft', sentBy: null, sentAt: null }),
    },
  });
  const queries = newQueryClient();
  queries.setQueryData(meReading.queryKey, me);
  const router = createMemoryRouter(
    [
      {
        element: (
          <>
            <Outlet />
            <LiveRegions />
          </>
        ),
        children: [
          { path: '/reviews', Component: ReviewsPage },
          { path: '/reviews/:id', Component: ReviewPage },
          { path: '*', element: <p>another page</p> },
        ],
      },
    ],
    { initialEntries: [settings.at ?? `/reviews/${REVIEW_ID}`] },
  );
  render(
    <QueryClientProvider client={queries}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  const posts = () => heard.filter((one) => one.method === 'POST');
  return { posts, router, user: userEvent.setup() };
}

const signOffButton = () => screen.findByRole('button', { name: /Sign off and publish/ });
const noteBox = () =>
  screen.findByRole<HTMLTextAreaElement>('textbox', { name: 'What you checked, or what should change' });

async function tickAll(user: ReturnType<typeof userEvent.setup>) {
  for (const tick of TICKS) await user.click(await screen.findByRole('checkbox', { name: tick }));
}

describe('the numbers of a review', () => {
  test('stand before and after, at the recipe’s own values and in each example', async () => {
    open();
    const table = await screen.findByRole('table', { name: 'Numbers of worked examples that move' });
    const cells = (name: string) =>
      within(within(table).getByRole('row', { name: new RegExp(name) }))
        .getAllByRole('cell')
        .map((cell) => cell.textContent);
    // 25 · 5 A · 10 mΩ and 25 · 10 A · 10 mΩ, against gain 20: own arithmetic.
    expect(cells('the recipe’s own values')).toEqual(['1.000\u2009V', '1.250\u2009V', '']);
    expect(cells('Pulling away at 10 A')).toEqual([
      '2.000\u2009V',
      '2.500\u2009V',
      'the example agrees with the text in review',
    ]);
    expect(
      screen.getByText(/1 of 1 result moves, at the recipe’s own values and in 1 of 1 worked example\./),
    ).toBeTruthy();
  });

  test('mark a newly broken design in words, and count private ones without a name', async () => {
    open({
      pages: [reviewPage({ designs: { seen: [BROKEN_DESIGN], unchanged: 2, privateCount: 3, privateNewlyBroken: 1 } })],
    });
    const table = await screen.findByRole('table', { name: 'Numbers of kept designs that would move' });
    const broken = within(table).getByRole('row', { name: /meter range/ });
    expect(
      within(broken)
        .getAllByRole('cell')
        .map((cell) => cell.textContent),
    ).toEqual(['within', 'exceeded', 'newly broken']);
    expect(screen.getByText(/1 of 3 designs would move\. The other 2 would come out the same/)).toBeTruthy();
    expect(screen.getByText(/And 3 private designs would move, 1 of them would break a limit\./)).toBeTruthy();
  });

  test('are written as ranges in one way, whether of an example or of a design', async () => {
    const row = { calculator: 'shunt', example: 'Cold', result: 'V', label: 'Output' };
    const design = {
      label: 'Output',
      before: '0.245 … 4.235\u2009V',
      after: '0.300 … 4.300\u2009V',
      newlyBroken: false,
    };
    open({
      pages: [
        reviewPage({
          numbers: [
            { ...row, before: '0.245 to 4.235\u2009V', after: '500.0\u2009mV to 1.200\u2009kV, not everywhere' },
          ],
          designs: {
            seen: [{ ...BROKEN_DESIGN, changes: [design] }],
            unchanged: 0,
            privateCount: 0,
            privateNewlyBroken: 0,
          },
        }),
      ],
    });
    const cells = async (name: string) => {
      const table = await screen.findByRole('table', { name });
      return within(table)
        .getAllByRole('cell')
        .map((cell) => cell.textContent);
    };
    expect((await cells('Numbers of worked examples that move')).slice(0, 2)).toEqual([
      '0.245 … 4.235\u2009V',
      '500.0\u2009mV … 1.200\u2009kV, not everywhere',
    ]);
    expect((await cells('Numbers of kept designs that would move')).slice(0, 2)).toEqual([
      '0.245 … 4.235\u2009V',
      '0.300 … 4.300\u2009V',
    ]);
  });

  test('keep their words where they are no range', () => {
    expect(withRangeSign('unbounded to 5.000\u2009V')).toBe('unbounded … 5.000\u2009V');
    expect(withRangeSign('−2.000 to −1.000\u2009V')).toBe('−2.000 … −1.000\u2009V');
    expect(withRangeSign('no value: the log of 0 to 1')).toBe('no value: the log of 0 to 1');
    expect(withRangeSign('waiting for R1')).toBe('waiting for R1');
  });

  test('of a first version there are none: the page itself stands first', async () => {
    open({
      pages: [
        reviewPage({
          base: null,
          numbers: [],
          review: { draft: draftRow({ from: null }), mayDecide: true, whyNot: null },
        }),
      ],
    });
    expect(await screen.findByRole('tab', { name: 'The page as readers will see it', selected: true })).toBeTruthy();
    expect(await screen.findByRole('textbox', { name: 'Motor current' })).toBeTruthy();
  });
});

describe('the words of a review', () => {
  test('say what was removed and what was added, by section and line', async () => {
    open();
    const change = await screen.findByRole('region', { name: 'Section 1, What it is for, line 10' });
    expect(change.querySelector('ins')?.textContent).toBe(' added: very. ');
    const given = screen.getByRole('region', { name: 'Calculator “Your numbers”, line 15' });
    expect(given.querySelector('del')?.textContent).toBe(' removed: 20. ');
    expect(given.querySelector('ins')?.textContent).toBe(' added: 25. ');
  });

  const words = (before: string, after: string) =>
    textChanges(before, after).changes.map((change) => change.words.map((run) => [run.kind, run.text]));

  test('keep a number whole: 2 V to 2.5 V is a number for a number', () => {
    expect(words('to="2 V"', 'to="2.5 V"')).toEqual([
      [
        ['same', 'to="'],
        ['removed', '2 '],
        ['added', '2.5 '],
        ['same', 'V"\n'],
      ],
    ]);
  });

  test('name paragraphs that were only broken into lines otherwise', () => {
    const { changes } = textChanges('One two three\nfour five.\n', 'One two\nthree four five.\n');
    expect(changes.map((change) => change.isLayoutOnly)).toEqual([true]);
  });

  test('number sections as the page does, and leave out headings inside a fence', () => {
    const before = '---\ntitle: A\n---\n\n## One\n\n```\n## not one\n```\n\n### Part\n\nOld.\n\n## Two\n\nSame.\n';
    const { changes, unchanged } = textChanges(before, before.replace('Old.', 'New.'));
    expect(changes.map(({ place, line }) => [place, line])).toEqual([['Section 1.1, Part', 13]]);
    expect(unchanged).toEqual(['Front matter', 'Section 1, One', 'Section 2, Two']);
  });

  test('give the place in the old text of what was only taken out', () => {
    const { changes } = textChanges('## One\n\nGone.\n', '## One\n');
    expect(changes.map(({ place, line, isOldLine }) => ({ place, line, isOldLine }))).toEqual([
      { place: 'Section 1, One', line: 2, isOldLine: true },
    ]);
  });

  test('of equal texts there are none, whatever ends their lines', () => {
    expect(textChanges('a\r\nb', 'a\nb\n').changes).toEqual([]);
  });
});

describe('signing off', () => {
  test('is not possible before every box is ticked, and says how many are left', async () => {
    const { posts, user } = open();
    const button = await signOffButton();
    expect(button.getAttribute('aria-disabled')).toBe('true');
    expect(screen.getByText('2 boxes left to tick.')).toBeTruthy();
    await user.click(button);
    await user.click(screen.getByRole('checkbox', { name: TICKS[0] }));
    expect(screen.getByText('One box left to tick.')).toBeTruthy();
    expect(posts()).toEqual([]);
  });

  test('sends the revision and the hash of what was read, and ends at the result', async () => {
    const { posts, user } = open();
    await tickAll(user);
    await user.type(await noteBox(), 'Done by hand.');
    await user.click(await signOffButton());
    const result = await screen.findByRole('heading', { name: 'Signed off: version 2 is published' });
    expect(document.activeElement).toBe(result);
    expect(posts().map((one) => one.body)).toEqual([
      { revision: 3, hash: HASH, ticks: [...TICKS], note: 'Done by hand.', requestId: expect.any(String) },
    ]);
    expect(screen.queryByRole('button', { name: /Sign off/ })).toBeNull();
  });

  test('has one effect when it is pressed twice', async () => {
    let answer: (reply: Reply) => void = () => undefined;
    const { posts, user } = open({ signOff: () => new Promise<Reply>((resolve) => (answer = resolve)) });
    await tickAll(user);
    await user.dblClick(await signOffButton());
    expect(posts()).toHaveLength(1);
    answer({ body: { slug: 'shunt-reading', version: 2 } });
    expect(await screen.findByText('Signed off: version 2 is published', { selector: 'h2' })).toBeTruthy();
  });

  test('after a lost answer keeps note and ticks, and sends the same request again', async () => {
    let isLost = true;
    const { posts, user } = open({
      signOff: () => {
        if (!isLost) return { body: { slug: 'shunt-reading', version: 2 } };
        isLost = false;
        throw new TypeError('the connection broke');
      },
    });
    await tickAll(user);
    await user.type(await noteBox(), 'Seen.');
    await user.click(await signOffButton());
    expect(await screen.findByText(/Your note and ticks are still here/)).toBeTruthy();
    expect((await noteBox()).value).toBe('Seen.');
    await user.click(await signOffButton());
    await screen.findByRole('heading', { name: 'Signed off: version 2 is published' });
    const [first, second] = posts().map((one) => one.body);
    expect(second).toEqual(first);
  });

  test('of a draft that moved signs nothing, shows what changed, and keeps the note', async () => {
    const moved = shuntText({ gain: 25, words: 'A shunt turns current into a tiny voltage.' });
    const conflict = { state: 'in-review', revision: 5, text: moved, baseText: NEW_TEXT, savedBy: 'Aren Tilling' };
    const detail = 'This draft is at revision 5, but you saw revision 3. Nothing was done.';
    const { user } = open({
      pages: [
        reviewPage(),
        reviewPage({
          text: moved,
          hash: 'b'.repeat(64),
          review: { draft: draftRow({ revision: 5 }), mayDecide: true, whyNot: null },
        }),
      ],
      signOff: () => ({
        status: 409,
        body: { code: 'stale', title: 'Moved', detail, hash: 'b'.repeat(64), ...conflict },
      }),
    });
    await tickAll(user);
    await user.type(await noteBox(), 'Seen.');
    await user.click(await signOffButton());
    const notice = await screen.findByRole('region', { name: 'The draft has moved' });
    expect(within(notice).getByText(/Nothing was signed and nothing was sent back/)).toBeTruthy();
    expect(document.activeElement?.textContent).toBe('Not signed off. The draft has moved.');
    expect((await within(notice).findByRole('insertion')).textContent).toBe(' added: tiny. ');
    expect(screen.getByText('The draft has moved: read it as it is now first.')).toBeTruthy();

    await user.click(within(notice).getByRole('button', { name: 'Read it as it is now' }));
    expect(await screen.findByText('2 boxes left to tick.')).toBeTruthy();
    expect(screen.getAllByText('You ticked this for the text as it was before.')).toHaveLength(2);
    expect((await noteBox()).value).toBe('Seen.');
    expect(screen.queryByRole('region', { name: 'The draft has moved' })).toBeNull();
  });

  test('is not possible while a check fails', async () => {
    const { user } = open({
      pages: [reviewPage({ checks: [{ kind: 'example', title: 'An example', passed: false, detail: 'V_out: 1 V' }] })],
    });
    await tickAll(user);
    expect((await signOffButton()).getAttribute('aria-disabled')).toBe('true');
    expect(screen.getByText('A check fails, so it cannot be published. Send it back.')).toBeTruthy();
  });

  test('counts hazards and cautions as one check', async () => {
    const caution = (passed: boolean) => ({ kind: 'caution' as const, title: 'A hazard', passed, detail: '' });
    open({ pages: [reviewPage({ checks: [caution(true)] })] });
    expect(await screen.findByText('Hazards and cautions agree')).toBeTruthy();
    const failing = checkedForYou(reviewPage({ checks: [caution(true), caution(false)] }));
    expect(failing.at(-1)).toEqual({ words: 'Hazards and cautions do not agree', passed: false });
  });

  test('is told to this person’s tabs that show the draft', async () => {
    const told: unknown[] = [];
    const other = new BroadcastChannel(`quadrille:draft/${EDITOR.id}/${REVIEW_ID}`);
    other.onmessage = ({ data }: MessageEvent<unknown>) => void told.push(data);
    const { user } = open();
    await tickAll(user);
    await user.click(await signOffButton());
    await waitFor(() => expect(told).toEqual([{ kind: 'state' }]));
    other.close();
  });

  test('is refused to whoever wrote a part, with the reason in place of the buttons', async () => {
    const whyNot = 'You wrote a part of this text, so it needs a second person to decide.';
    open({
      pages: [reviewPage({ review: { draft: draftRow(), mayDecide: false, whyNot } })],
      me: meAs(AUTHOR, 'editor'),
    });
    expect(await screen.findByText(whyNot)).toBeTruthy();
    expect(screen.queryByRole('button', { name: /Sign off|Send back/ })).toBeNull();
    expect(screen.getByRole('link', { name: 'open the draft' }).getAttribute('href')).toBe(`/write/${REVIEW_ID}`);
  });

  test('of one’s own work, where the team allows it, says what the title block will say', async () => {
    open({ me: meAs(AUTHOR, 'editor') });
    expect(await screen.findByText(/will then say “signed off by its author”/)).toBeTruthy();
  });
});

describe('sending back', () => {
  test('needs a reason: without one nothing is sent and the focus goes to the field', async () => {
    const { posts, user } = open();
    await user.click(await screen.findByRole('button', { name: 'Send back' }));
    expect(await screen.findByText('Say what should change.')).toBeTruthy();
    expect(document.activeElement).toBe(await noteBox());
    expect(posts()).toEqual([]);
  });

  test('carries the reason and needs no tick', async () => {
    const { posts, user } = open();
    await user.type(await noteBox(), 'The meter reads to 2.5 V only.');
    await user.click(screen.getByRole('button', { name: 'Send back' }));
    await screen.findByRole('heading', { name: 'Sent back' });
    expect(posts().map((one) => one.body)).toEqual([
      { revision: 3, hash: HASH, reason: 'The meter reads to 2.5 V only.', requestId: expect.any(String) },
    ]);
  });
});

describe('the list of reviews', () => {
  const other = { ...draftRow({ id: '77aa1c86-7d8e-4f6a-9d15-0f3b5f7d2a01', title: 'Lamp driver', from: null }) };

  test('parts what waits for this person from what waits for others, with the reason', async () => {
    open({
      at: '/reviews',
      reviews: [
        { draft: draftRow(), mayDecide: true, whyNot: null },
        {
          draft: other,
          mayDecide: false,
          whyNot: 'You wrote a part of this text, so it needs a second person to decide.',
        },
      ],
    });
    const mine = await screen.findByRole('table', { name: 'Waiting for you' });
    expect(within(mine).getByRole('link', { name: 'Shunt reading for the works car' }).getAttribute('href')).toBe(
      `/reviews/${REVIEW_ID}`,
    );
    const others = screen.getByRole('table', { name: 'Waiting for somebody else' });
    expect(within(others).getByText(/needs a second person/)).toBeTruthy();
    expect(within(others).getByText(/a new recipe/)).toBeTruthy();
  });

  test('puts first what has waited longest', async () => {
    const sent = (title: string, id: string, sentAt: string) => ({
      draft: draftRow({ title, id, sentAt }),
      mayDecide: true,
      whyNot: null,
    });
    open({
      at: '/reviews',
      reviews: [
        sent('Second', REVIEW_ID, '2026-05-12T09:05:00.000Z'),
        sent('Third', '77aa1c86-7d8e-4f6a-9d15-0f3b5f7d2a01', '2026-05-14T08:00:00.000Z'),
        sent('First', '77aa1c86-7d8e-4f6a-9d15-0f3b5f7d2a02', '2026-04-30T16:00:00.000Z'),
      ],
    });
    const table = await screen.findByRole('table', { name: 'Waiting for you' });
    const links = within(table).getAllByRole('link');
    expect(links.map((link) => link.textContent)).toEqual(['First', 'Second', 'Third']);
  });

  test('when nothing waits, leads to writing', async () => {
    open({ at: '/reviews' });
    expect(await screen.findByText('Nothing is in review.')).toBeTruthy();
    expect(screen.getByRole('link', { name: /Write a recipe/ }).getAttribute('href')).toBe('/write');
  });
});
