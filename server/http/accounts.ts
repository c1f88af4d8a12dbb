import type { RequestHandler } from 'express';
import { AUTH_ROUTES } from '#api';
import { type PasswordHash, scryptHash } from '../services/accounts/passwords.ts';
import { ACCOUNT_ACTS, type AccountAct, type Desk } from './account-acts.ts';
import { makeAuth } from './auth.ts';
import { sendFailure } from './problem.ts';
import type { Accounts } from './session.ts';
import { makeSessionCache } from './session-cache.ts';

export interface AccountsDeps extends Omit<Desk, 'auth' | 'sessions' | 'password'> {
  /** scrypt unless given. */
  readonly password?: PasswordHash;
}

/** Puts sessions and the acts behind `AUTH_ROUTES` together. */
export function createAccounts(deps: AccountsDeps): Accounts {
  const password = deps.password ?? scryptHash;
  const auth = makeAuth({ ...deps, password });
  const sessions = makeSessionCache(auth, () => performance.now());
  const desk: Desk = { ...deps, password, auth, sessions };
  const handler: RequestHandler = async function accountAct(req, res) {
    const result = await actAt(req.path)(desk, req, res);
    if (result.ok) res.json({});
    else sendFailure(res, result.error);
  };
  return { sessions, handler };
}

function actAt(path: string): AccountAct {
  if (Object.hasOwn(AUTH_ROUTES, path)) return ACCOUNT_ACTS[path as keyof typeof AUTH_ROUTES];
  return async () => ({ ok: false, error: { kind: 'not-found', detail: 'There is nothing at this address.' } });
}
