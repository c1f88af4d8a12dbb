import type { Express } from 'express';
import request, { type Test } from 'supertest';
import { expect } from 'vitest';
import type { Role } from '#api';
import { ok } from '#text';
import { account, user } from '../../server/database/schema.ts';
import { createAccounts } from '../../server/http/accounts.ts';
import type { Services } from '../../server/http/route.ts';
import {
  acceptInvitation,
  checkInvitation,
  createInvitation,
  listInvitations,
  makeInvitationLink,
  resendInvitation,
  revokeInvitation,
} from '../../server/services/accounts/invitations.ts';
import { type PasswordHash, scryptHash } from '../../server/services/accounts/passwords.ts';
import { listPeople, makePersonLink, updatePerson } from '../../server/services/accounts/people.ts';
import { checkSetUp, finishSetUp, renewSetUpLink } from '../../server/services/accounts/setup.ts';
import { dismissNotice, readMe } from '../../server/services/me.ts';
import { readTeamSettings, updateTeam } from '../../server/services/team.ts';
import { readAudit, readMail } from '../../server/services/team-log.ts';
import { type FreshApp, freshApp, ORIGIN, START } from './fresh-app.ts';
import { standIns } from './stand-ins.ts';

export const PASSWORD = 'seven kettles over Bramley';

/** Remembers what was asked of it; a hash of its own making is compared at once, any other by scrypt. */
export interface QuickHash extends PasswordHash {
  readonly asked: string[];
}

export function quickHash(): QuickHash {
  const asked: string[] = [];
  return {
    asked,
    async hash(password) {
      asked.push('hash');
      return `quick:${password}`;
    },
    async verify({ hash, password }) {
      asked.push('verify');
      return hash.startsWith('quick:') ? hash === `quick:${password}` : scryptHash.verify({ hash, password });
    },
  };
}

/** The services behind accounts and the team, as the server names them. */
export const ACCOUNT_SERVICES: Partial<Services> = {
  'me.read': { act: readMe },
  'me.dismissNotice': { act: dismissNotice },
  'setup.check': { act: checkSetUp },
  'setup.finish': { act: finishSetUp },
  'invitations.check': { act: checkInvitation },
  'invitations.accept': { act: acceptInvitation },
  'invitations.list': { act: listInvitations },
  'invitations.create': { act: createInvitation },
  'invitations.resend': { act: resendInvitation },
  'invitations.revoke': { act: revokeInvitation },
  'invitations.makeLink': { act: makeInvitationLink, sealsAnswer: true },
  'people.list': { act: listPeople },
  'people.update': { act: updatePerson },
  'people.makeLink': { act: makePersonLink, sealsAnswer: true },
  'team.read': { act: readTeamSettings },
  'team.update': { act: updateTeam },
  'team.mail': { act: readMail },
  'team.audit': { act: readAudit },
};

export interface AccountApp extends FreshApp {
  readonly hash: QuickHash;
  /** A browser of its own: keeps cookies, sends from an address. */
  browser(address?: string): Browser;
  /** Adds a person who can sign in with `PASSWORD`. */
  add(name: string, role: Role): Promise<string>;
}

export interface Browser {
  get(path: string): Test;
  post(path: string, body: object): Test;
  patch(path: string, body: object): Test;
  signIn(email: string, password?: string): Test;
}

/** The application with the real accounts; the invented people of `freshApp` get `PASSWORD`. A proxy on this machine names addresses. */
export async function accountApp(): Promise<AccountApp> {
  const hash = quickHash();
  const fresh = await freshApp({
    services: standIns(ACCOUNT_SERVICES),
    accounts: (parts) => createAccounts({ ...parts, origins: [ORIGIN], password: hash }),
  });
  fresh.app.set('trust proxy', 'loopback');
  for (const { id } of Object.values(fresh.people)) await giveQuickPassword(fresh, id);
  return {
    ...fresh,
    hash,
    browser: (address = '192.0.2.1') => openBrowser(fresh.app, address),
    async add(name, role) {
      const id = `person-${name}`;
      const email = `${name}@railway.example`;
      await fresh.db.insert(user).values({ id, name, email, role, createdAt: START, updatedAt: START });
      await giveQuickPassword(fresh, id);
      return email;
    },
  };
}

async function giveQuickPassword({ db }: FreshApp, userId: string): Promise<void> {
  const row = { id: `account-${userId}`, accountId: userId, providerId: 'credential', userId };
  await db.insert(account).values({ ...row, password: `quick:${PASSWORD}` });
}

export function openBrowser(app: Express, address: string): Browser {
  const agent = request.agent(app);
  const ours = (call: Test) => call.set('Origin', ORIGIN).set('X-Forwarded-For', address);
  const post = (path: string, body: object) => ours(agent.post(path)).send(body);
  return {
    get: (path) => ours(agent.get(path)),
    post,
    patch: (path, body) => ours(agent.patch(path)).send(body),
    signIn: (email, password = PASSWORD) => post('/api/auth/sign-in/email', { email, password }),
  };
}

let requests = 0;
/** An id for one more request. */
export function requestId(): string {
  requests += 1;
  return `request-${String(requests).padStart(12, '0')}`;
}

/** Takes the token out of a link, insisting that it stands in the fragment. */
export function tokenIn(url: string): string {
  const { hash, search } = new URL(url);
  expect(search).toBe('');
  return new URLSearchParams(hash.slice(1)).get('token') ?? '';
}

/** A set-up link, made as the server makes it at each start. */
export async function setUpToken(fresh: FreshApp): Promise<string | null> {
  const made = await fresh.act(null, async (context) => ok(await renewSetUpLink(context)));
  if (!made.ok) throw new Error('making a set-up link is never refused');
  return made.value && tokenIn(made.value.url);
}
