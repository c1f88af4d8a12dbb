import { type ChildProcess, spawn, spawnSync } from 'node:child_process';
import { cpSync, existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { networkInterfaces, tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { RELEASE_HEADER } from '#api';
import { readEnv, StartError } from '../../server/env.ts';
import { nodeProblem } from '../../server/node-version.mjs';
import { type BuiltServer, freePort, startBuilt } from '../e2e/server.ts';

/** Data of a first start that was stopped in good order: most tests begin with a copy of it. */
const original = mkdtempSync(join(tmpdir(), 'quadrille-started-'));
beforeAll(async () => {
  const server = await startBuilt(join(original, 'data'), await freePort());
  expect(await server.stop()).toBe(0);
}, 600_000);
afterAll(() => rmSync(original, { recursive: true, force: true }));
const useStartedData = () => cpSync(join(original, 'data'), data, { recursive: true });

let folder: string;
let data: string;
const started: BuiltServer[] = [];
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'quadrille-start-'));
  data = join(folder, 'data');
});
afterEach(async () => {
  for (const server of started.splice(0)) await server.stop('SIGKILL');
  rmSync(folder, { recursive: true, force: true });
});

async function start(variables: Readonly<Record<string, string>> = {}): Promise<BuiltServer> {
  const server = await startBuilt(data, await freePort(), variables);
  started.push(server);
  return server;
}

/** Runs the built program to its end. */
function runBuilt(words: readonly string[], variables: Readonly<Record<string, string>> = {}) {
  const { status, stdout, stderr } = spawnSync(process.execPath, ['dist/server/main.js', ...words], {
    env: { ...process.env, NODE_ENV: 'production', PORT: '0', QUADRILLE_DATA: data, ...variables },
    encoding: 'utf8',
  });
  return { status, stdout, stderr };
}

const mode = (path: string) => (statSync(path).mode & 0o777).toString(8);

describe('the first start', { timeout: 600_000 }, () => {
  test('makes a directory that only its owner opens, loads the starter recipes, and prints the set-up link', async () => {
    const server = await start();
    expect([mode(data), mode(join(data, 'secret')), mode(join(data, 'lock')), mode(join(data, 'socket'))]).toEqual([
      '700',
      '600',
      '600',
      '600',
    ]);
    expect(server.setUpLink).toMatch(new RegExp(`^${server.url}/\\S+#token=[\\w-]{43}$`));
    expect((await fetch(`${server.url}/readyz`)).status).toBe(200);
    const me = await (await fetch(`${server.url}/api/me`)).json();
    expect(me).toMatchObject({ person: null, team: { needsSetUp: true } });
    expect(runBuilt(['backup', join(folder, 'a.backup')]).status).toBe(0);
    const lines = readFileSync(join(folder, 'a.backup'), 'utf8').split('\n');
    expect(lines.filter((line) => line.startsWith('["recipe_version"'))).toHaveLength(8);
  });

  test('is the only one: a second start on the same data ends with a line that names the holder', async () => {
    useStartedData();
    const server = await start();
    const second = runBuilt([]);
    expect([second.status, second.stdout]).toEqual([1, '']);
    expect(second.stderr).toBe(
      `${data} is in use by process ${server.process.pid}. Stop it first, or set QUADRILLE_DATA to another folder.\n`,
    );
    expect((await fetch(`${server.url}/readyz`)).status).toBe(200);
  });
});

describe('stopping and starting again', { timeout: 600_000 }, () => {
  test('by SIGTERM closes in good order and leaves no lock; the next start makes a new set-up link', async () => {
    useStartedData();
    const first = await start();
    expect(await first.stop('SIGTERM')).toBe(0);
    expect(existsSync(join(data, 'lock'))).toBe(false);
    const second = await start();
    expect(second.setUpLink).not.toBe(first.setUpLink);
    expect(second.setUpLink).toContain('#token=');
  });

  test('after kill -9 takes the lock over', async () => {
    useStartedData();
    const first = await start();
    await first.stop('SIGKILL');
    expect(existsSync(join(data, 'lock'))).toBe(true);
    const second = await start();
    expect(JSON.parse(readFileSync(join(data, 'lock'), 'utf8')).pid).toBe(second.process.pid);
  });

  test('by SIGTERM to npm reaches the server', async () => {
    useStartedData();
    const port = await freePort();
    const npm = spawn('npm', ['start'], {
      env: { ...process.env, PORT: String(port), QUADRILLE_DATA: data },
      stdio: ['ignore', 'pipe', 'inherit'],
    });
    await untilPrinted(npm, /^Quadrille is at/m);
    const ended = new Promise((resolve) => npm.once('exit', resolve));
    npm.kill('SIGTERM');
    await ended;
    expect(existsSync(join(data, 'lock'))).toBe(false);
    await expect(fetch(`http://localhost:${port}/healthz`)).rejects.toThrow();
  });
});

/** What a process printed up to the words. */
function untilPrinted(child: ChildProcess, words: RegExp): Promise<string> {
  return new Promise((resolve, reject) => {
    let text = '';
    child.stdout?.on('data', (chunk: Buffer) => {
      text += chunk.toString('utf8');
      if (words.test(text)) resolve(text);
    });
    child.once('exit', () => reject(new Error(`ended before it printed ${String(words)}:\n${text}`)));
  });
}

describe('a start that cannot be', { timeout: 600_000 }, () => {
  test('for a taken port says so in one line', async () => {
    useStartedData();
    const other = createServer();
    await new Promise<void>((resolve) => other.listen(0, '127.0.0.1', resolve));
    const address = other.address();
    const port = typeof address === 'object' && address !== null ? String(address.port) : '';
    const ended = runBuilt([], { PORT: port });
    other.close();
    expect([ended.status, ended.stderr]).toEqual([
      1,
      `Port ${port} is taken, but Quadrille needs one of its own. Set PORT to another number.\n`,
    ]);
    expect(existsSync(join(data, 'lock'))).toBe(false);
  });

  test('for a directory that cannot be written says so in one line', () => {
    writeFileSync(join(folder, 'a-file'), '');
    const place = join(folder, 'a-file', 'data');
    const ended = runBuilt([], { QUADRILLE_DATA: place });
    expect([ended.status, ended.stderr]).toEqual([
      1,
      `${place} cannot be written (ENOTDIR), but Quadrille keeps its data there. Give it a folder of its own by QUADRILLE_DATA.\n`,
    ]);
  });

  test('for an address without a public one says so in one line', () => {
    const ended = runBuilt([], { HOST: '0.0.0.0' });
    expect(ended.status).toBe(1);
    expect(ended.stderr).toMatch(
      /^HOST is 0\.0\.0\.0, but an address other machines can reach needs PUBLIC_URL: [^\n]*\n$/,
    );
  });

  test('for an unknown command names the known ones', () => {
    const ended = runBuilt(['fly']);
    expect([ended.status, ended.stderr]).toEqual([
      1,
      'Unexpected command "fly", expected serve, dev, demo, admin, backup, restore.\n',
    ]);
  });
});

describe('the pages of a built server', { timeout: 600_000 }, () => {
  test('carry the nonce of their policy and the release, and are not stored; a missing asset is not the page', async () => {
    useStartedData();
    const server = await start();
    const page = await fetch(`${server.url}/recipes/anything`);
    const html = await page.text();
    const policy = page.headers.get('content-security-policy') ?? '';
    const nonce = /<meta name="csp-nonce" content="([^"]+)">/.exec(html)?.[1];
    expect(policy).toContain(`style-src-elem 'self' 'nonce-${nonce}'`);
    expect(policy).toContain("script-src 'self';");
    const release = (await fetch(`${server.url}/api/me`)).headers.get(RELEASE_HEADER);
    expect(release).toMatch(/^\d+\.\d+\.\d+\+[0-9a-f]{8}$/);
    expect(html).toContain(`<meta name="release" content="${release}">`);
    expect(page.headers.get('cache-control')).toBe('no-store');
    const asset = /src="(\/assets\/[^"]+\.js)"/.exec(html)?.[1] ?? '';
    const found = await fetch(`${server.url}${asset}`);
    expect([found.status, found.headers.get('cache-control')]).toEqual([200, 'public, max-age=31536000, immutable']);
    const missing = await fetch(`${server.url}/assets/of-an-older-release.js`);
    expect([missing.status, missing.headers.get('content-type'), missing.headers.get('cache-control')]).toEqual([
      404,
      'application/problem+json; charset=utf-8',
      'no-store',
    ]);
  });

  test('are served to another machine by its public address, and changes are taken from there alone', async () => {
    useStartedData();
    const outside = Object.values(networkInterfaces())
      .flatMap((list) => list ?? [])
      .find((one) => one.family === 'IPv4' && !one.internal)?.address;
    // A machine without a network has no other address; loopback's second one stands for it.
    const host = outside ?? '127.0.0.2';
    const port = await freePort();
    const url = `http://${host}:${port}`;
    const server = await startBuilt(data, port, { HOST: host, PUBLIC_URL: url });
    started.push(server);
    expect(server.url).toBe(url);
    const check = (origin: string) =>
      fetch(`${url}/api/setup/check`, {
        method: 'POST',
        headers: { origin, 'content-type': 'application/json' },
        body: JSON.stringify({ token: server.setUpLink?.split('#token=')[1] }),
      });
    expect((await check(url)).status).toBe(200);
    const foreign = await check(`http://localhost:${port}`);
    expect([foreign.status, (await foreign.json()).detail]).toEqual([
      403,
      `The page was opened at http://localhost:${port}, but Quadrille is used at ${url}.`,
    ]);
  });
});

describe('commands on the server’s machine', { timeout: 600_000 }, () => {
  test('reach the running server, and the data itself when none runs', async () => {
    useStartedData();
    const server = await start();
    const nobody = 'Nobody in the team has the address no@railway.example, and nobody is invited there.\n';
    expect(runBuilt(['admin', 'link', 'no@railway.example'])).toEqual({ status: 1, stdout: '', stderr: nobody });
    const live = join(folder, 'live.backup');
    expect(runBuilt(['backup', live]).stdout).toContain(`${live}: `);
    await server.stop();
    expect(runBuilt(['admin', 'link', 'no@railway.example'])).toEqual({ status: 1, stdout: '', stderr: nobody });
    const quiet = join(folder, 'quiet.backup');
    expect(runBuilt(['backup', quiet]).status).toBe(0);
    const place = join(folder, 'restored');
    const restored = runBuilt(['restore', quiet], { QUADRILLE_DATA: place });
    expect([restored.status, restored.stderr]).toEqual([0, '']);
    expect(mode(place)).toBe('700');
    expect(runBuilt(['restore', quiet], { QUADRILLE_DATA: place }).stderr).toContain(`${place} is not empty`);
  });
});

describe('the demo', { timeout: 600_000 }, () => {
  test('prints an account for each role that can sign in, and throws its data away when it stops', async () => {
    const port = await freePort();
    const demo = spawn(process.execPath, ['dist/server/main.js', 'demo'], {
      env: { ...process.env, NODE_ENV: 'production', PORT: String(port), TMPDIR: folder },
      stdio: ['ignore', 'pipe', 'inherit'],
    });
    const text = await untilPrinted(demo, /^admin .*\n/m);
    const accounts = [...text.matchAll(/^(reader|author|editor|admin) +(\S+@\S+) +(\S+)$/gm)];
    expect(accounts.map(([, role]) => role)).toEqual(['reader', 'author', 'editor', 'admin']);
    const url = `http://localhost:${port}`;
    for (const [, role, email, password] of accounts) {
      const signedIn = await fetch(`${url}/api/auth/sign-in/email`, {
        method: 'POST',
        headers: { origin: url, 'content-type': 'application/json' },
        body: JSON.stringify({ email, password }),
      });
      const cookie = signedIn.headers
        .getSetCookie()
        .map((one) => one.split(';', 1)[0])
        .join('; ');
      const me = await (await fetch(`${url}/api/me`, { headers: { cookie } })).json();
      expect([signedIn.status, me.person?.role]).toEqual([200, role]);
    }
    expect(readdirSync(folder).filter((name) => name.startsWith('quadrille-demo-'))).toHaveLength(1);
    const ended = new Promise((resolve) => demo.once('exit', resolve));
    demo.kill('SIGTERM');
    expect(await ended).toBe(0);
    expect(readdirSync(folder).filter((name) => name.startsWith('quadrille-demo-'))).toEqual([]);
  });
});

describe('the settings', () => {
  test('have defaults for one’s own machine', () => {
    expect(readEnv({ PORT: '' })).toMatchObject({
      port: 3000,
      host: '127.0.0.1',
      publicUrl: 'http://localhost:3000',
      origins: ['http://localhost:3000', 'http://127.0.0.1:3000', 'http://[::1]:3000'],
      behindProxy: false,
    });
  });

  test.each([
    [{ PORT: '70000' }, 'Unexpected PORT "70000", expected a port number from 0 to 65535.'],
    [{ PORT: '3000a' }, 'Unexpected PORT "3000a", expected a port number from 0 to 65535.'],
    [
      { PUBLIC_URL: 'bench' },
      'Unexpected PUBLIC_URL "bench", expected the address people open, such as http://bench.example:3000.',
    ],
    [{ LOG_LEVEL: 'loud' }, 'Unexpected LOG_LEVEL "loud", expected fatal, error, warn, info, debug or silent.'],
    [{ QUADRILLE_SECRET: 'short-one' }, 'Unexpected QUADRILLE_SECRET, expected at least 32 characters.'],
  ])('that cannot be are refused by name: %j', (variables, message) => {
    expect(() => readEnv(variables)).toThrow(new StartError(message));
  });

  test('name the versions of Node that can run the program', () => {
    expect(nodeProblem('20.20.2', '>=20.20.2 <21')).toBeNull();
    expect(nodeProblem('20.21.0', '>=20.20.2 <21')).toBeNull();
    expect(nodeProblem('20.9.0', '>=20.20.2 <21')).toBe(
      'Node is 20.9.0, but Quadrille needs 20.20.2 or a later one below 21.',
    );
    expect(nodeProblem('22.1.0', '>=20.20.2 <21')).toBe(
      'Node is 22.1.0, but Quadrille needs 20.20.2 or a later one below 21.',
    );
  });
});
