import type { IncomingHttpHeaders } from 'node:http';
import { parseCookies } from 'better-auth/cookies';
import { fromNodeHeaders } from 'better-auth/node';
import { role } from '#api';
import type { Auth } from './auth.ts';
import type { Person } from './context.ts';
import type { SessionReader } from './session.ts';

/** How long an answer is remembered: looking a session up takes 3 ms of a database that does one thing at a time. */
const REMEMBERED_MS = 5000;
/** Far above the people of one team; reached only by cookies that somebody makes up. */
const MOST_ENTRIES = 5000;

/** A session as the database has it: whose it is, and whether they may act. */
interface Found {
  readonly userId: string | null;
  readonly person: Person | null;
}

interface Entry {
  readonly at: number;
  readonly found: Promise<Found>;
  /** Undefined while the database is asked; null for a session of nobody. */
  userId?: string | null;
}

export interface SessionCache extends SessionReader {
  /** Forgets one session, by the headers that carry it. */
  forgetOne(headers: IncomingHttpHeaders): Promise<void>;
}

/** Reads sessions through a short memory. `clock` gives milliseconds and never runs backwards. */
export function makeSessionCache(auth: Auth, clock: () => number): SessionCache {
  const entries = new Map<string, Entry>();
  const cookieOf = async (headers: IncomingHttpHeaders) => {
    const { name } = (await auth.$context).authCookies.sessionToken;
    return parseCookies(headers.cookie ?? '').get(name);
  };

  function remember(cookie: string, headers: IncomingHttpHeaders): Entry {
    if (entries.size >= MOST_ENTRIES) entries.clear();
    const entry: Entry = { at: clock(), found: readSession(auth, headers) };
    entries.set(cookie, entry);
    entry.found.then(
      ({ userId }) => {
        entry.userId = userId;
      },
      // Not remembered; whoever asked is told by the same promise.
      () => entries.get(cookie) === entry && entries.delete(cookie),
    );
    return entry;
  }

  return {
    async read(headers) {
      const cookie = await cookieOf(headers);
      if (cookie === undefined) return null;
      const known = entries.get(cookie);
      const fresh = known && clock() - known.at < REMEMBERED_MS ? known : remember(cookie, headers);
      return (await fresh.found).person;
    },
    forget(personId) {
      for (const [cookie, entry] of entries) {
        // One that is still being read may have been read before the change.
        if (entry.userId === undefined || entry.userId === personId) entries.delete(cookie);
      }
    },
    async forgetOne(headers) {
      const cookie = await cookieOf(headers);
      if (cookie !== undefined) entries.delete(cookie);
    },
  };
}

async function readSession(auth: Auth, headers: IncomingHttpHeaders): Promise<Found> {
  const found = await auth.api.getSession({ headers: fromNodeHeaders(headers) });
  if (!found) return { userId: null, person: null };
  const { id, name, email, deactivatedAt } = found.user;
  const person = deactivatedAt ? null : { id, name, email, role: role.parse(found.user.role) };
  return { userId: id, person };
}
