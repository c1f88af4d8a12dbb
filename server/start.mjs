// Starts Quadrille on a machine that has Node and npm and nothing else: installs and builds what is missing, then becomes the server.
// Plain JavaScript with Node's own modules, because it runs before any package is there.
import { spawn } from 'node:child_process';
import { existsSync, readdirSync, readFileSync, statSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { nodeProblem } from './node-version.mjs';

const ROOT = join(dirname(fileURLToPath(import.meta.url)), '..');
const SOURCES = [
  'src',
  'server',
  'shared',
  'public',
  'index.html',
  'vite.config.ts',
  'package.json',
  'package-lock.json',
];

function stop(line) {
  process.stderr.write(`${line}\n`);
  process.exit(1);
}

const modified = (path) => (existsSync(join(ROOT, path)) ? statSync(join(ROOT, path)).mtimeMs : 0);

/** The latest change under a path; folders count too, because they tell of files that went away. */
function newestUnder(path) {
  const full = join(ROOT, path);
  if (!existsSync(full)) return 0;
  const own = statSync(full).mtimeMs;
  if (!statSync(full).isDirectory()) return own;
  return Math.max(own, ...readdirSync(full).map((name) => newestUnder(join(path, name))));
}

/** Runs a step to its end; a signal to us reaches it, and ends us with it. */
function run(command, words) {
  return new Promise((resolve) => {
    // The steps' own output goes to stderr: stdout belongs to what the command prints.
    const child = spawn(command, words, { cwd: ROOT, stdio: ['ignore', 2, 2] });
    const pass = (signal) => child.kill(signal);
    for (const signal of ['SIGTERM', 'SIGINT']) process.on(signal, pass);
    child.once('error', (error) => stop(`"${command}" cannot be started (${error.message}), but Quadrille needs it.`));
    child.once('exit', (code, signal) => {
      for (const name of ['SIGTERM', 'SIGINT']) process.off(name, pass);
      if (code === 0) resolve();
      else stop(`"${command} ${words.join(' ')}" ended with ${signal ?? `code ${code}`}.`);
    });
  });
}

async function start() {
  const { engines } = JSON.parse(readFileSync(join(ROOT, 'package.json'), 'utf8'));
  const problem = nodeProblem(process.versions.node, engines.node);
  if (problem !== null) stop(problem);

  const developing = process.argv[2] === 'dev';
  if (modified('node_modules/.package-lock.json') < modified('package-lock.json')) {
    await run('npm', ['ci', '--include=dev']);
  }
  if (!developing && modified('dist/built') < Math.max(...SOURCES.map(newestUnder))) {
    await run(process.execPath, [join('server', 'build.mjs')]);
  }
  process.env.NODE_ENV = developing ? 'development' : 'production';
  process.setSourceMapsEnabled(true);
  // This process becomes the server: a signal to npm reaches it without anyone in between.
  if (developing) {
    const { register } = await import('tsx/esm/api');
    register();
    await import('./main.ts');
  } else {
    await import('../dist/server/main.js');
  }
}

start().catch((error) => stop(error.stack));
