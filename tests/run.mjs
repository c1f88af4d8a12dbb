// `npm test`: everything, from nothing. Installs what is missing, builds, checks, tests, and ends with the line "N passed, N failed".
import { spawn, spawnSync } from 'node:child_process';
import { existsSync, statSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const ROOT = join(dirname(fileURLToPath(import.meta.url)), '..');
const BIN = join(ROOT, 'node_modules', '.bin');
const BROWSERS = ['/usr/bin/chromium', '/usr/bin/chromium-browser'];
const TALLY = /^(\d+) passed, (\d+) failed$/;

let passed = 0;
let failed = 0;

/** Runs a command with its output shown; gives its exit code (1 for a signal) and the last tally line it printed. */
function run(command, words) {
  return new Promise((resolve) => {
    const child = spawn(command, words, { cwd: ROOT, stdio: ['ignore', 'pipe', 'inherit'] });
    let rest = '';
    let tally = null;
    child.stdout.setEncoding('utf8').on('data', (chunk) => {
      const lines = (rest + chunk).split('\n');
      rest = lines.pop() ?? '';
      for (const line of lines) {
        const found = TALLY.exec(line);
        // Ours is printed once, at the end.
        if (found) tally = found;
        else process.stdout.write(`${line}\n`);
      }
    });
    child.once('error', (error) => {
      process.stdout.write(`${command}: ${error.message}\n`);
      resolve({ code: 1, tally: null });
    });
    child.once('close', (code) => resolve({ code: code ?? 1, tally }));
  });
}

/** A step that counts as one. */
async function check(title, command, words) {
  process.stdout.write(`\n== ${title}\n`);
  const { code } = await run(command, words);
  if (code === 0) passed++;
  else failed++;
  process.stdout.write(code === 0 ? `${title}: passed\n` : `${title}: FAILED (code ${code})\n`);
  return code === 0;
}

function finish() {
  process.stdout.write(`\n${passed} passed, ${failed} failed\n`);
  process.exit(failed === 0 && passed > 0 ? 0 : 1);
}

function installIsOld() {
  const installed = join(ROOT, 'node_modules', '.package-lock.json');
  return !existsSync(installed) || statSync(installed).mtimeMs < statSync(join(ROOT, 'package-lock.json')).mtimeMs;
}

/** The end-to-end tests need Debian's browser; it is installed only where that is allowed. */
async function needBrowser() {
  if (BROWSERS.some((path) => existsSync(path))) return true;
  const mayInstall = process.getuid?.() === 0 && spawnSync('apt-get', ['--version']).status === 0;
  if (mayInstall) {
    await run('apt-get', ['update']);
    await run('apt-get', ['install', '--yes', '--no-install-recommends', 'chromium']);
    if (BROWSERS.some((path) => existsSync(path))) return true;
  }
  process.stdout.write(
    'Chromium is missing, but the tests in the browser need it. Type:\n  sudo apt-get install chromium\n',
  );
  return false;
}

if (installIsOld() && !(await check('packages', 'npm', ['ci', '--include=dev']))) finish();
if (!(await needBrowser())) failed++;
const built = await check('build', process.execPath, ['server/build.mjs']);
await check('format, lint', join(BIN, 'biome'), ['check', '--error-on-warnings', '.']);
await check('types', join(BIN, 'tsc'), ['--noEmit']);
await check('types of shared/ without DOM and Node', join(BIN, 'tsc'), [
  '--noEmit',
  '-p',
  'tests/tsconfig.shared.json',
]);

process.stdout.write('\n== tests\n');
// Without a build there is nothing for the browser to open: the rest is run all the same, and the missing part counts as failed.
if (!built) failed++;
const projects = ['unit', 'server', 'client', ...(built ? ['e2e'] : [])];
const { code, tally } = await run(join(BIN, 'vitest'), ['run', ...projects.flatMap((name) => ['--project', name])]);
if (tally) {
  passed += Number(tally[1]);
  failed += Number(tally[2]);
}
// A run that ends badly without a failed test, or without a tally, is a failure of its own.
if (!tally || (code !== 0 && tally[2] === '0')) failed++;
finish();
