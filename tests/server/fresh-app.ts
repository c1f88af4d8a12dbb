import { readFileSync } from 'node:fs';
import { eq, sql } from 'drizzle-orm';
import type { Express } from 'express';
import { pino } from 'pino';
import request, { type Test } from 'supertest';
import { inject } from 'vitest';
import { type Failure, ROLES, type Role } from '#api';
import type { Compiled } from '#recipe';
import type { Result } from '#text';
import { createApp } from '../../server/app.ts';
import { ensureTeam } from '../../server/database/migrate.ts';
import { type Db, type Opened, openDatabase } from '../../server/database/open.ts';
import { rows } from '../../server/database/rows.ts';
import { user } from '../../server/database/schema.ts';
import type { Context, Person } from '../../server/http/context.ts';
import { type Frame, inTransaction } from '../../server/http/frame.ts';
import { randomIds } from '../../server/http/ids.ts';
import { noPages } from '../../server/http/pages.ts';
import type { Services } from '../../server/http/route.ts';
import type { Accounts } from '../../server/http/session.ts';

export const ORIGIN = 'http://quadrille.test';
/** The fake clock's start. */
export const START = new Date('2026-03-02T09:00:00.000Z');
const PERSON_HEADER = 'x-test-person';

export interface FreshApp {
  readonly app: Express;
  readonly db: Db;
  readonly frame: Frame;
  /** One invented person per role. */
  readonly people: Readonly<Record<Role, Person>>;
  /** Moves the clock on. */
  advance(milliseconds: number): void;
  /** A request as a person or as nobody, from our own page. */
  send(who: Person | null, method: 'GET' | 'POST' | 'PUT' | 'PATCH', path: string, body?: object): Test;
  /** Calls a service as the frame does, in a transaction. */
  act<T>(who: Person | null, act: (context: Context) => Promise<Result<T, Failure>>): Promise<Result<T, Failure>>;
}

export interface FreshOptions {
  readonly services: Services;
  /** What compiles; without it a test that compiles fails. */
  readonly compile?: Context['compile'];
  /** The real accounts; without them requests are signed in by a header that only tests know. */
  readonly accounts?: (parts: Pick<Frame, 'db' | 'clock' | 'settings' | 'ids' | 'log'>) => Accounts;
}

let opened: Promise<Opened> | undefined;

/** One database per worker (`isolate: false` keeps this module), emptied. */
export async function freshDatabase(): Promise<Db> {
  opened ??= openDatabase({ image: new Uint8Array(readFileSync(inject('databaseImage'))) });
  const { db } = await opened;
  const [tables] = await rows<{ names: string }>(
    db,
    sql`select string_agg(format('%I.%I', schemaname, tablename), ',') as names from pg_tables where schemaname = 'public'`,
  );
  await db.execute(sql.raw(`truncate ${tables?.names} restart identity cascade`));
  await ensureTeam(db);
  return db;
}

/** The application over an emptied database, with one person per role and a clock that only moves when told. */
export async function freshApp(options: FreshOptions): Promise<FreshApp> {
  const db = await freshDatabase();
  let now = START;
  const parts = {
    db,
    clock: () => now,
    ids: randomIds,
    settings: { publicUrl: ORIGIN, release: '0.0.0+test', secret: 'a secret of tests that is long enough' },
    log: pino({ level: 'silent' }),
  };
  const frame: Frame = {
    ...parts,
    accounts: options.accounts?.(parts) ?? headerAccounts(db),
    compile: options.compile ?? refuseToCompile,
  };
  const people = await invent(db);
  const app = createApp({
    frame,
    services: options.services,
    origins: [ORIGIN],
    behindProxy: false,
    pages: noPages,
    securityHeaders: true,
  });
  return {
    app,
    db,
    frame,
    people,
    advance: (milliseconds) => {
      now = new Date(now.getTime() + milliseconds);
    },
    send(who, method, path, body) {
      const verb = method.toLowerCase() as 'get' | 'post' | 'put' | 'patch';
      const call = request(app)[verb](path).set('Origin', ORIGIN);
      if (who) call.set(PERSON_HEADER, who.id);
      return body === undefined ? call : call.send(body);
    },
    act: (who, act) => inTransaction(frame, { person: who, address: '192.0.2.7', log: frame.log }, act),
  };
}

/** Reads the person named by a header; deactivated people are nobody. */
function headerAccounts(db: Db): Accounts {
  return {
    sessions: {
      async read(headers) {
        const id = headers[PERSON_HEADER];
        if (typeof id !== 'string') return null;
        const [found] = await db.select().from(user).where(eq(user.id, id));
        if (!found || found.deactivatedAt) return null;
        return { id: found.id, name: found.name, email: found.email, role: found.role };
      },
      forget: () => undefined,
    },
    handler: (_req, res) => {
      res.json({ handledByAccounts: true });
    },
  };
}

async function refuseToCompile(): Promise<Compiled> {
  throw new Error('this test compiles: pass `compile` to freshApp');
}

const NAMES = {
  reader: 'Rhea Dallow',
  author: 'Aren Tilling',
  editor: 'Edda Marsh',
  admin: 'Ada Quill',
} satisfies Record<Role, string>;

async function invent(db: Db): Promise<Record<Role, Person>> {
  const people = ROLES.map((role) => ({
    id: `person-${role}`,
    name: NAMES[role],
    email: `${role}@railway.example`,
    role,
  }));
  await db.insert(user).values(people.map((person) => ({ ...person, createdAt: START, updatedAt: START })));
  return Object.fromEntries(people.map((person) => [person.role, person])) as Record<Role, Person>;
}
