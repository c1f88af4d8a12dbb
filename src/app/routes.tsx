import { createBrowserRouter, Navigate, type RouteObject } from 'react-router-dom';
import { paths } from '../lib/paths.ts';
import { Bare } from './bare.tsx';
import { NotFoundPage } from './not-found-page.tsx';
import { RouteProblem } from './route-problem.tsx';
import { SessionGate } from './session-gate.tsx';
import { Shell } from './shell.tsx';

/** Pages that need no sign-in: they stand on the drawing sheet, without the header strip. */
const openPages: RouteObject[] = [
  {
    path: paths.signIn(),
    lazy: async () => ({ Component: (await import('../features/session/sign-in-page.tsx')).SignInPage }),
  },
  {
    path: paths.setUp(),
    lazy: async () => ({ Component: (await import('../features/session/set-up-page.tsx')).SetUpPage }),
  },
  {
    path: paths.invitation(),
    lazy: async () => ({ Component: (await import('../features/session/invitation-page.tsx')).InvitationPage }),
  },
  {
    path: paths.forgotten(),
    lazy: async () => ({ Component: (await import('../features/session/forgotten-page.tsx')).ForgottenPage }),
  },
  {
    path: paths.password(),
    lazy: async () => ({ Component: (await import('../features/session/password-page.tsx')).PasswordPage }),
  },
];

const teamPages: RouteObject[] = [
  { index: true, element: <Navigate to={paths.recipes()} replace /> },
  {
    path: paths.recipes(),
    lazy: async () => ({ Component: (await import('../features/recipes/recipes-page.tsx')).RecipesPage }),
  },
  {
    path: '/recipes/:slug',
    lazy: async () => ({ Component: (await import('../features/recipes/recipe-page.tsx')).RecipePage }),
  },
  {
    path: paths.start(),
    lazy: async () => ({ Component: (await import('../features/writing/start-page.tsx')).StartPage }),
  },
  {
    path: '/write/:id',
    lazy: async () => ({ Component: (await import('../features/writing/write-page.tsx')).WritePage }),
  },
  {
    path: paths.reviews(),
    lazy: async () => ({ Component: (await import('../features/reviews/reviews-page.tsx')).ReviewsPage }),
  },
  {
    path: '/reviews/:id',
    lazy: async () => ({ Component: (await import('../features/reviews/review-page.tsx')).ReviewPage }),
  },
  {
    path: paths.designs(),
    lazy: async () => ({ Component: (await import('../features/designs/designs-page.tsx')).DesignsPage }),
  },
  {
    path: '/designs/:id',
    lazy: async () => ({ Component: (await import('../features/designs/design-page.tsx')).DesignPage }),
  },
  {
    path: paths.team(),
    lazy: async () => ({ Component: (await import('../features/team/team-page.tsx')).TeamPage }),
  },
  {
    path: paths.account(),
    lazy: async () => ({ Component: (await import('../features/session/account-page.tsx')).AccountPage }),
  },
  { path: '*', Component: NotFoundPage },
];

/** Every page, each in a chunk of its own. */
export const routeTable: RouteObject[] = [
  {
    ErrorBoundary: RouteProblem,
    HydrateFallback: Bare,
    children: [
      {
        Component: SessionGate,
        children: [{ element: <Shell />, children: [{ ErrorBoundary: RouteProblem, children: teamPages }] }],
      },
      { Component: Bare, children: openPages },
    ],
  },
];

export function newRouter(): ReturnType<typeof createBrowserRouter> {
  return createBrowserRouter(routeTable);
}
