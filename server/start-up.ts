import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { resolve } from 'node:path';
import type { Logger } from 'pino';
import { fail, ok } from '#text';
import { createApp } from './app.ts';
import { writeBackup } from './backup/write.ts';
import { type CompilePool, createCompilePool } from './compile-pool.ts';
import { type OpenDirectory, openDataDirectory } from './data-directory.ts';
import { appliedMigration } from './database/migrate.ts';
import { type Env, StartError } from './env.ts';
import { createAccounts } from './http/accounts.ts';
import { type Frame, inTransaction } from './http/frame.ts';
import { randomIds } from './http/ids.ts';
import { builtPages, type Pages, releaseOf } from './http/pages.ts';
import { startJobs } from './jobs/schedule.ts';
import { type LocalActs, listenLocally } from './local-socket.ts';
import type { Place } from './place.ts';
import { createServices } from './routes.ts';
import { makeLinkByCommand } from './services/accounts/people.ts';
import { renewSetUpLink } from './services/accounts/setup.ts';
import { createRecipeSearch } from './services/search.ts';
import { loadStarters } from './services/starters.ts';

export interface StartOptions {
  readonly env: Env;
  readonly place: Place;
  readonly log: Logger;
  /** Pages made while developing, on the server that will listen; without it the built ones are served. */
  readonly developedPages?: (http: Server, release: string) => Promise<Pages>;
}

export interface Running {
  /** The address people are meant to open. */
  readonly url: string;
  /** By which the first admin is made; null when there is one. */
  readonly setUpLink: string | null;
  readonly frame: Frame;
  /** Answers what is under way, then closes everything and frees the directory. */
  close(): Promise<void>;
}

/** Opens the data, puts the application over it, and listens. When it cannot: throws `StartError` or `DirectoryHeld`, with all closed again. */
export async function startServer(options: StartOptions): Promise<Running> {
  const { env, place, log } = options;
  const release = options.developedPages ? `${place.version}+dev` : releaseOf(place.version, place.builtPages);
  const directory = await openDataDirectory(env.dataDirectory, place, { secret: env.secret, release, now: new Date() });
  const pool = createCompilePool(place.compileThread, (err) => log.warn({ err }, 'a compile thread ended'));
  const http = createServer();
  try {
    const frame = createFrame({ env, directory, pool, release, log });
    const search = createRecipeSearch();
    const loaded = await loadStarters({
      ...frame,
      now: frame.clock(),
      release: place.version,
      folder: place.starters,
    });
    if (loaded > 0) log.info({ loaded }, 'starter recipes loaded');
    const pages = options.developedPages
      ? await options.developedPages(http, release)
      : builtPages(place.builtPages, release);
    const app = createApp({
      frame,
      services: createServices(search),
      origins: env.origins,
      behindProxy: env.behindProxy,
      pages,
      securityHeaders: options.developedPages === undefined,
    });
    http.on('request', app);
    await listen(http, env);
    const closeSocket = await listenLocally(env.dataDirectory, localActs(frame, place));
    if (closeSocket === null) log.warn('the path of the data directory is too long for a local socket');
    const stopJobs = startJobs(frame);
    await search.build(frame.db);
    pool.warm();
    const setUp = await inTransaction(frame, operator(frame), async (context) => ok(await renewSetUpLink(context)));
    return {
      url: env.publicUrl,
      setUpLink: setUp.ok ? (setUp.value?.url ?? null) : null,
      frame,
      close: async () => {
        stopJobs();
        await closeSocket?.();
        await closeHttp(http);
        await pool.close();
        await directory.close();
      },
    };
  } catch (error) {
    http.close();
    await pool.close();
    await directory.close();
    throw error;
  }
}

interface FrameParts {
  readonly env: Env;
  readonly directory: OpenDirectory;
  readonly pool: CompilePool;
  readonly release: string;
  readonly log: Logger;
}

/** Makes what every request and command works with, over an open data directory. */
export function createFrame({ env, directory, pool, release, log }: FrameParts): Frame {
  const settings = { publicUrl: env.publicUrl, release, secret: directory.secret };
  const parts = { db: directory.db, clock: () => new Date(), ids: randomIds, settings, log };
  return { ...parts, accounts: createAccounts({ ...parts, origins: env.origins }), compile: pool.compile };
}

/** Who acts when the server's own machine asks. */
function operator(frame: Frame) {
  return { person: null, address: '', log: frame.log };
}

/** What commands on this machine may ask of the running server. */
export function localActs(frame: Frame, place: Place): LocalActs {
  return {
    async link(email) {
      const made = await inTransaction(frame, operator(frame), (context) => makeLinkByCommand(context, email));
      if (made.ok) return ok(`${made.value.url}\nIt works once, until ${made.value.expiresAt.toISOString()}.`);
      return fail('detail' in made.error ? made.error.detail : made.error.kind);
    },
    async backup(file) {
      const migration = await appliedMigration(frame.db, place.migrations);
      const facts = { migration, release: frame.settings.release, now: frame.clock() };
      try {
        const end = await writeBackup(frame.db, file, facts);
        return ok(`${resolve(file)}: ${end.rows} rows, SHA-256 of its lines ${end.sha256}`);
      } catch (error) {
        if (error instanceof StartError) return fail(error.message);
        throw error;
      }
    },
  };
}

function listen(http: Server, { host, port }: Env): Promise<AddressInfo> {
  return new Promise((resolveListening, reject) => {
    http.once('error', (error: NodeJS.ErrnoException) => {
      if (error.code === 'EADDRINUSE') {
        reject(
          new StartError(`Port ${port} is taken, but Quadrille needs one of its own. Set PORT to another number.`),
        );
      } else {
        reject(new StartError(`Quadrille cannot listen on ${host}, port ${port}: ${error.message}.`));
      }
    });
    http.listen(port, host, () => resolveListening(http.address() as AddressInfo));
  });
}

/** How long an answer under way may take before its connection is cut, in milliseconds. */
const LAST_ANSWERS_MS = 5000;

function closeHttp(http: Server): Promise<void> {
  return new Promise((resolveClosed) => {
    const timer = setTimeout(() => http.closeAllConnections(), LAST_ANSWERS_MS);
    http.close(() => {
      clearTimeout(timer);
      resolveClosed();
    });
    http.closeIdleConnections();
  });
}
