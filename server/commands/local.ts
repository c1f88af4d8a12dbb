import { pino } from 'pino';
import type { Result } from '#text';
import { createCompilePool } from '../compile-pool.ts';
import { openDataDirectory } from '../data-directory.ts';
import { DirectoryHeld } from '../database/lock.ts';
import type { Env } from '../env.ts';
import { askServer, type LocalActs } from '../local-socket.ts';
import type { Place } from '../place.ts';
import { createFrame, localActs } from '../start-up.ts';

/**
 * Does a local act: through the server that holds the data directory while one runs, else on the directory itself. Both do the same, by the
 * same function.
 */
export async function actLocally(
  env: Env,
  place: Place,
  act: keyof LocalActs,
  argument: string,
): Promise<Result<string, string>> {
  try {
    return await actOffline(env, place, act, argument);
  } catch (error) {
    if (error instanceof DirectoryHeld) return askServer(env.dataDirectory, act, argument);
    throw error;
  }
}

async function actOffline(
  env: Env,
  place: Place,
  act: keyof LocalActs,
  argument: string,
): Promise<Result<string, string>> {
  const release = place.version;
  const directory = await openDataDirectory(env.dataDirectory, place, { secret: env.secret, release, now: new Date() });
  const log = pino({ level: 'silent' });
  const pool = createCompilePool(place.compileThread, (err) => log.warn({ err }, 'a compile thread ended'));
  try {
    const frame = createFrame({ env, directory, pool, release, log });
    return await localActs(frame, place)[act](argument);
  } finally {
    await pool.close();
    await directory.close();
  }
}
