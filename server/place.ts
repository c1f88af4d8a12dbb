import { existsSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import * as z from 'zod';

/** Where this program lies: the same folder for the sources and for the build. */
export interface Place {
  readonly root: string;
  readonly version: string;
  readonly migrations: string;
  readonly starters: string;
  readonly builtPages: string;
  readonly compileThread: URL;
}

/** Finds the program around the file that runs. */
export function findPlace(entry: string): Place {
  let root = dirname(fileURLToPath(entry));
  while (!existsSync(join(root, 'package.json'))) {
    const above = dirname(root);
    if (above === root) throw new Error('no package.json above the running file');
    root = above;
  }
  const { version } = z
    .object({ version: z.string() })
    .parse(JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')));
  return {
    root,
    version,
    migrations: join(root, 'drizzle'),
    starters: join(root, 'content'),
    builtPages: join(root, 'dist', 'web'),
    compileThread: new URL(entry.endsWith('.ts') ? './compile-thread.ts' : './compile-thread.js', entry),
  };
}
