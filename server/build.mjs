// Builds the pages (Vite) and the server (esbuild) into dist/.
import { mkdirSync, rmSync, utimesSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build as bundle } from 'esbuild';
import { build as buildPages } from 'vite';

const ROOT = join(dirname(fileURLToPath(import.meta.url)), '..');
const begun = new Date();
process.env.NODE_ENV = 'production';

rmSync(join(ROOT, 'dist', 'server'), { recursive: true, force: true });
await Promise.all([
  buildPages({ root: ROOT, logLevel: 'warn' }),
  bundle({
    absWorkingDir: ROOT,
    entryPoints: ['server/main.ts', 'server/compile-thread.ts'],
    outdir: 'dist/server',
    bundle: true,
    platform: 'node',
    target: 'node20',
    format: 'esm',
    // The packages ride along, since looking up their thousand files took a fifth of a start; but for those that open files beside
    // themselves, and what only development needs.
    external: ['@electric-sql/pglite', 'piscina', 'pino', 'pino-http', 'vite'],
    banner: {
      js: "import { createRequire as requireBeside } from 'node:module'; const require = requireBeside(import.meta.url);",
    },
    sourcemap: true,
    logLevel: 'warning',
  }),
]);

// The stamp carries the moment the build began: what was changed while it ran is newer, and is built again.
mkdirSync(join(ROOT, 'dist'), { recursive: true });
writeFileSync(join(ROOT, 'dist', 'built'), `${begun.toISOString()}\n`);
utimesSync(join(ROOT, 'dist', 'built'), begun, begun);
