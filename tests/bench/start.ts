import { execFileSync } from 'node:child_process';
import { randomUUID } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { openDatabase } from '../../server/database/open.ts';
import { recipe, recipeVersion } from '../../server/database/schema.ts';
import { freePort, startBuilt } from '../e2e/server.ts';
import type { Row } from './run.ts';

const RECIPES = 100;
const STARTS = 5;
/** How often it is asked whether the server is ready: the error of one measurement, in milliseconds. */
const ASKED_EVERY_MS = 10;

/** Fills up the supplied recipes to 100 with copies of them. */
async function copyRecipes(dataDirectory: string): Promise<void> {
  const opened = await openDatabase({ folder: join(dataDirectory, 'database') });
  const recipes = await opened.db.select().from(recipe);
  const versions = await opened.db.select().from(recipeVersion);
  for (let n = recipes.length; n < RECIPES; n++) {
    const model = recipes[n % recipes.length];
    const version = versions.find((one) => one.recipeId === model?.id);
    if (!model || !version) throw new Error('the server supplied no recipe to copy');
    const id = randomUUID();
    await opened.db.insert(recipe).values({ ...model, id, slug: `${model.slug}-${n}`, number: `Q-${n}` });
    await opened.db.insert(recipeVersion).values({ ...version, recipeId: id });
  }
  await opened.close();
}

/** Seconds from starting the process until /readyz says that it is ready, and the memory it then holds. */
async function start(dataDirectory: string): Promise<{ seconds: number; megabytes: number }> {
  const port = await freePort();
  const begun = performance.now();
  const starting = startBuilt(dataDirectory, port);
  while (!(await isReady(port))) await wait(ASKED_EVERY_MS);
  const seconds = (performance.now() - begun) / 1000;
  const server = await starting;
  const kibibytes = Number(execFileSync('ps', ['-o', 'rss=', '-p', String(server.process.pid)], { encoding: 'utf8' }));
  await server.stop();
  return { seconds, megabytes: (kibibytes * 1024) / 1e6 };
}

async function isReady(port: number): Promise<boolean> {
  try {
    return (await fetch(`http://127.0.0.1:${port}/readyz`)).ok;
  } catch (error) {
    // Nobody listens yet.
    if (error instanceof TypeError) return false;
    throw error;
  }
}

/** The built server over 100 recipes, from exec to ready. Needs `npm run build`. */
export async function measure(): Promise<readonly Row[]> {
  const folder = mkdtempSync(join(tmpdir(), 'quadrille-bench-'));
  try {
    const data = join(folder, 'data');
    const first = await startBuilt(data, await freePort());
    await first.stop();
    await copyRecipes(data);
    const starts = [];
    for (let n = 0; n < STARTS; n++) starts.push(await start(data));
    const seconds = starts.map((one) => one.seconds).sort((a, b) => a - b);
    const median = seconds[STARTS >> 1] ?? Number.NaN;
    const memory = Math.max(...starts.map((one) => one.megabytes));
    return [
      {
        name: `start with ${RECIPES} recipes until ready, median of ${STARTS}`,
        value: median,
        unit: 's',
        goal: '≤ 2 s',
        met: median <= 2,
      },
      {
        name: `start with ${RECIPES} recipes until ready, fastest of ${STARTS}`,
        value: seconds[0] ?? Number.NaN,
        unit: 's',
        goal: null,
        met: null,
      },
      { name: 'resident memory when ready', value: memory, unit: 'MB', goal: null, met: null },
    ];
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
