import type { Logger } from 'pino';
import type { Failure } from '#api';
import type { Result } from '#text';
import type { Db } from '../database/open.ts';
import type { Context, Person, Settings } from './context.ts';
import type { Ids } from './ids.ts';
import type { Accounts } from './session.ts';

/** What lives as long as the server and every request works with. */
export interface Frame {
  readonly db: Db;
  readonly accounts: Accounts;
  readonly clock: () => Date;
  readonly ids: Ids;
  readonly settings: Settings;
  readonly compile: Context['compile'];
  readonly log: Logger;
}

/** Who asks, from where. */
export interface Caller {
  readonly person: Person | null;
  readonly address: string;
  readonly log: Logger;
}

/** Undoes a transaction whose act was refused; never leaves this file. */
class RolledBack extends Error {
  readonly result: Result<never, Failure>;
  constructor(result: Result<never, Failure>) {
    super('rolled back');
    this.result = result;
  }
}

/** Makes the context of one call on the database itself, for reading. */
export function readingContext(frame: Frame, caller: Caller): Context {
  return contextOn(frame, caller, frame.db, (act) => act());
}

/**
 * Runs an act in one transaction: committed when it answers `ok` (or, with `keepsFailures`, whatever it answers), rolled back when it answers
 * a failure or throws. What the act left with `afterCommit` runs then, and only then.
 */
export async function inTransaction<T>(
  frame: Frame,
  caller: Caller,
  act: (context: Context) => Promise<Result<T, Failure>>,
  keepsFailures = false,
): Promise<Result<T, Failure>> {
  const later: (() => void)[] = [];
  try {
    const result = await frame.db.transaction(async (tx) => {
      const given = await act(contextOn(frame, caller, tx, (done) => later.push(done)));
      if (!given.ok && !keepsFailures) throw new RolledBack(given);
      return given;
    });
    for (const done of later) done();
    return result;
  } catch (error) {
    if (error instanceof RolledBack) return error.result;
    throw error;
  }
}

function contextOn(frame: Frame, caller: Caller, db: Db, afterCommit: Context['afterCommit']): Context {
  return {
    db,
    person: caller.person,
    now: frame.clock(),
    address: caller.address,
    ids: frame.ids,
    settings: frame.settings,
    compile: frame.compile,
    afterCommit,
    forgetSessions: (personId) => frame.accounts.sessions.forget(personId),
    log: caller.log,
  };
}
