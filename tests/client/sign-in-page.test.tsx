import { QueryClientProvider } from '@tanstack/react-query';
import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { describe, expect, test } from 'vitest';
import type { Me } from '#api';
import { SignInPage } from '../../src/features/session/sign-in-page.tsx';
import { newQueryClient } from '../../src/lib/query-client.ts';
import { fakeServer, type Reply } from './fake-server.ts';

const nobody: Me = {
  person: null,
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
const ines: Me = { ...nobody, person: { id: 'p1', name: 'Ines', email: 'ines@example.org', role: 'reader' } };

function open(settings: { me?: Me; signIn?: Reply; to?: string } = {}) {
  let isSignedIn = false;
  const heard = fakeServer({
    'GET /api/me': () => ({ body: isSignedIn ? ines : (settings.me ?? nobody) }),
    'POST /api/auth/sign-in/email': () => {
      isSignedIn = settings.signIn === undefined;
      return settings.signIn ?? {};
    },
  });
  const router = createMemoryRouter(
    [
      { path: '/sign-in', Component: SignInPage },
      { path: '*', element: <p>another page</p> },
    ],
    { initialEntries: [settings.to === undefined ? '/sign-in' : `/sign-in?to=${encodeURIComponent(settings.to)}`] },
  );
  render(
    <QueryClientProvider client={newQueryClient()}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  return { heard, router, user: userEvent.setup() };
}

async function signIn(user: ReturnType<typeof userEvent.setup>) {
  await user.type(await screen.findByLabelText('Work e-mail'), 'ines@example.org');
  await user.type(screen.getByLabelText('Password'), 'eleven squared sheets');
  await user.click(screen.getByRole('button', { name: 'Sign in' }));
}

const PAIR = 'This address and this password do not belong together.';

describe('the sign-in page', () => {
  test('signs in and opens the page that was wanted', async () => {
    const { heard, router, user } = open({ to: '/recipes/rail-splitter?version=2' });
    await signIn(user);
    expect(await screen.findByText('another page')).toBeTruthy();
    expect(router.state.location).toMatchObject({ pathname: '/recipes/rail-splitter', search: '?version=2' });
    expect(heard.find((one) => one.method === 'POST')?.body).toEqual({
      email: 'ines@example.org',
      password: 'eleven squared sheets',
    });
  });

  test('says once what the server says about the pair, by its field, and goes there', async () => {
    const { user } = open({
      signIn: {
        status: 400,
        body: { code: 'invalid', title: 'x', detail: PAIR, fields: [{ field: 'password', message: PAIR }] },
      },
    });
    await signIn(user);
    expect(await screen.findAllByText(PAIR)).toHaveLength(1);
    expect(document.activeElement).toBe(screen.getByLabelText('Password'));
  });

  test('says how long to wait, and does not send before', async () => {
    const { heard, user } = open({
      signIn: {
        status: 429,
        body: { code: 'too-many', title: 'Too many tries', retryAfterSeconds: 40, detail: 'Slow.' },
      },
    });
    await signIn(user);
    expect(await screen.findByText('In 40 seconds')).toBeTruthy();
    await user.click(screen.getByRole('button', { name: 'Sign in' }));
    expect(heard.filter((one) => one.method === 'POST')).toHaveLength(1);
  });

  test('names the address to use when it was opened at another', async () => {
    open({ me: { ...nobody, team: { ...nobody.team, publicUrl: 'https://recipes.example.org' } } });
    const link = await screen.findByRole('link', { name: 'https://recipes.example.org' });
    expect(link.getAttribute('href')).toBe('https://recipes.example.org');
  });

  test('names no address when it is the right one', async () => {
    open();
    expect(await screen.findByText('Signals and power')).toBeTruthy();
    expect(screen.queryByText(/another address/)).toBeNull();
  });

  test('points to the set-up link while nobody can sign in', async () => {
    open({ me: { ...nobody, team: { ...nobody.team, needsSetUp: true } } });
    expect(await screen.findByText(/set-up link that the server printed/)).toBeTruthy();
  });
});
