import { resolve } from 'node:path';
import { pino } from 'pino';
import { restoreBackup } from './backup/restore.ts';
import { startDemo } from './commands/demo.ts';
import { actLocally } from './commands/local.ts';
import { DirectoryHeld } from './database/lock.ts';
import { developedPages } from './dev-pages.ts';
import { readEnv, StartError } from './env.ts';
import { findPlace } from './place.ts';
import { type Running, startServer } from './start-up.ts';

/** The only file that acts when it is loaded: the first word of the command line says what to do, nothing means serving. */
const COMMANDS = { serve, dev, demo, admin, backup, restore };

const place = findPlace(import.meta.url);
const [command = 'serve', ...words] = process.argv.slice(2);

try {
  if (!Object.hasOwn(COMMANDS, command)) {
    throw new StartError(`Unexpected command "${command}", expected ${Object.keys(COMMANDS).join(', ')}.`);
  }
  await COMMANDS[command as keyof typeof COMMANDS]();
} catch (error) {
  if (!(error instanceof StartError || error instanceof DirectoryHeld)) throw error;
  process.stderr.write(`${error.message}\n`);
  process.exit(1);
}

async function serve(): Promise<void> {
  const env = readEnv(process.env);
  announce(await startServer({ env, place, log: logger(env.logLevel) }));
}

async function dev(): Promise<void> {
  const env = readEnv(process.env);
  const running = await startServer({
    env,
    place,
    log: logger(env.logLevel),
    developedPages: (http, release) => developedPages(place.root, http, release),
  });
  announce(running);
}

async function demo(): Promise<void> {
  const { running, table } = await startDemo(process.env, place, logger('warn'));
  announce(running);
  process.stdout.write(
    `\nA demo: everything in it is an invented example and is thrown away when it stops.\n\n${table}\n`,
  );
}

async function admin(): Promise<void> {
  const [act, email] = words;
  if (act !== 'link' || email === undefined || words.length > 2) {
    throw new StartError('Write: npm run admin -- link EMAIL');
  }
  await local('link', email);
}

async function backup(): Promise<void> {
  const [file] = words;
  if (file === undefined || words.length > 1) throw new StartError('Write: npm run backup -- FILE');
  await local('backup', resolve(file));
}

async function restore(): Promise<void> {
  const [file] = words;
  if (file === undefined || words.length > 1) throw new StartError('Write: npm run restore -- FILE');
  const { dataDirectory } = readEnv(process.env);
  const rows = await restoreBackup(resolve(file), dataDirectory, place.migrations);
  process.stdout.write(`${rows} rows restored into ${dataDirectory}. Everybody signs in again.\n`);
}

async function local(act: 'link' | 'backup', argument: string): Promise<void> {
  const result = await actLocally(readEnv(process.env), place, act, argument);
  if (!result.ok) throw new StartError(result.error);
  process.stdout.write(`${result.value}\n`);
}

function logger(level: string) {
  return pino({ level, base: null, timestamp: pino.stdTimeFunctions.isoTime });
}

/** Says where the program is, and stops it in good order when the system asks. */
function announce(running: Running): void {
  const link = running.setUpLink;
  const setUp = link === null ? '' : `Make the first admin here, within 24 hours: ${link}\n`;
  // In one piece, so that whoever reads the address from a pipe has the link with it.
  process.stdout.write(`Quadrille is at ${running.url}\n${setUp}`);
  let stopping = false;
  for (const signal of ['SIGTERM', 'SIGINT'] as const) {
    process.on(signal, () => {
      // A second one means now.
      if (stopping) process.exit(1);
      stopping = true;
      running.close().then(
        () => process.exit(0),
        (error: unknown) => {
          process.stderr.write(`Stopping failed: ${String(error)}\n`);
          process.exit(1);
        },
      );
    });
  }
}
