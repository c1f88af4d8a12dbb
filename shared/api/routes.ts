import type { Action } from './permissions.ts';

/** Method, path and first gate of every endpoint: plain data, so that the reader's page carries no schema. */
export interface RouteRow {
  readonly method: 'GET' | 'POST' | 'PUT' | 'PATCH';
  readonly path: string;
  readonly action: Action;
}

/** better-auth's own paths that are let through, with the gate each stands behind; every other path under /api/auth is 404. */
export const AUTH_ROUTES = {
  '/api/auth/sign-in/email': 'use a link',
  '/api/auth/sign-out': 'see who is signed in',
  '/api/auth/request-password-reset': 'use a link',
  '/api/auth/reset-password': 'use a link',
  '/api/auth/change-password': 'manage own account',
  '/api/auth/revoke-other-sessions': 'manage own account',
} as const satisfies Record<string, Action>;

export const ROUTES = {
  'me.read': { method: 'GET', path: '/api/me', action: 'see who is signed in' },
  'me.dismissNotice': { method: 'POST', path: '/api/me/notices/:id/seen', action: 'manage own account' },

  'setup.check': { method: 'POST', path: '/api/setup/check', action: 'use a link' },
  'setup.finish': { method: 'POST', path: '/api/setup', action: 'use a link' },
  'invitations.check': { method: 'POST', path: '/api/invitations/check', action: 'use a link' },
  'invitations.accept': { method: 'POST', path: '/api/invitations/accept', action: 'use a link' },

  'invitations.list': { method: 'GET', path: '/api/invitations', action: 'run the team' },
  'invitations.create': { method: 'POST', path: '/api/invitations', action: 'run the team' },
  'invitations.resend': { method: 'POST', path: '/api/invitations/:id/resend', action: 'run the team' },
  'invitations.revoke': { method: 'POST', path: '/api/invitations/:id/revoke', action: 'run the team' },
  'invitations.makeLink': { method: 'POST', path: '/api/invitations/:id/link', action: 'run the team' },

  'people.list': { method: 'GET', path: '/api/people', action: 'read recipes' },
  'people.update': { method: 'PATCH', path: '/api/people/:id', action: 'run the team' },
  'people.makeLink': { method: 'POST', path: '/api/people/:id/link', action: 'run the team' },

  'team.read': { method: 'GET', path: '/api/team', action: 'run the team' },
  'team.update': { method: 'PATCH', path: '/api/team', action: 'run the team' },
  'team.mail': { method: 'GET', path: '/api/team/mail', action: 'run the team' },
  'team.audit': { method: 'GET', path: '/api/team/audit', action: 'run the team' },

  'recipes.list': { method: 'GET', path: '/api/recipes', action: 'read recipes' },
  'recipes.search': { method: 'GET', path: '/api/recipes/search', action: 'read recipes' },
  'recipes.read': { method: 'GET', path: '/api/recipes/:slug', action: 'read recipes' },
  'recipes.text': { method: 'GET', path: '/api/recipes/:slug/text', action: 'read recipes' },
  'recipes.signOffSupplied': { method: 'POST', path: '/api/recipes/:slug/sign-off', action: 'decide reviews' },

  'inputs.read': { method: 'GET', path: '/api/recipes/:slug/inputs', action: 'keep inputs' },
  'inputs.keep': { method: 'PATCH', path: '/api/recipes/:slug/inputs/:calculator', action: 'keep inputs' },

  'drafts.list': { method: 'GET', path: '/api/drafts', action: 'write drafts' },
  'drafts.start': { method: 'POST', path: '/api/drafts', action: 'write drafts' },
  'drafts.read': { method: 'GET', path: '/api/drafts/:id', action: 'write drafts' },
  // Gated for readers too: somebody who could write it and was made a reader meanwhile still gets their last words kept to the side.
  'drafts.saveText': { method: 'PUT', path: '/api/drafts/:id/text', action: 'read recipes' },
  'drafts.saves': { method: 'GET', path: '/api/drafts/:id/saves', action: 'write drafts' },
  'drafts.readSave': { method: 'GET', path: '/api/drafts/:id/saves/:saveId', action: 'write drafts' },
  'drafts.setAuthors': { method: 'POST', path: '/api/drafts/:id/authors', action: 'write drafts' },
  'drafts.discard': { method: 'POST', path: '/api/drafts/:id/discard', action: 'write drafts' },
  'drafts.send': { method: 'POST', path: '/api/drafts/:id/send', action: 'write drafts' },
  'drafts.takeBack': { method: 'POST', path: '/api/drafts/:id/take-back', action: 'write drafts' },

  'reviews.list': { method: 'GET', path: '/api/reviews', action: 'see reviews' },
  'reviews.read': { method: 'GET', path: '/api/reviews/:id', action: 'see reviews' },
  'reviews.signOff': { method: 'POST', path: '/api/reviews/:id/sign-off', action: 'decide reviews' },
  'reviews.sendBack': { method: 'POST', path: '/api/reviews/:id/send-back', action: 'decide reviews' },

  'designs.list': { method: 'GET', path: '/api/designs', action: 'keep designs' },
  'designs.keep': { method: 'POST', path: '/api/designs', action: 'keep designs' },
  'designs.read': { method: 'GET', path: '/api/designs/:id', action: 'keep designs' },
  'designs.update': { method: 'PATCH', path: '/api/designs/:id', action: 'keep designs' },
  'designs.remove': { method: 'POST', path: '/api/designs/:id/remove', action: 'keep designs' },
} as const satisfies Record<string, RouteRow>;

export type RouteName = keyof typeof ROUTES;

/** Every answer under /api carries the release that gave it, so that a page of an older release can say so. */
export const RELEASE_HEADER = 'quadrille-release';

/** Pages that a link in a mail, in the terminal or from an admin opens; the token follows in the fragment: `/invitation#token=…`. */
export const LINK_PATHS = { setUp: '/setup', invitation: '/invitation', password: '/password' } as const;
