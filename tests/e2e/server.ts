import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { TestProject } from 'vitest/node';

/** The built server as its own process. */
export interface BuiltServer {
  readonly url: string;
  /** Null once there is an admin. */
  readonly setUpLink: string | null;
  readonly process: ChildProcess;
  /** What it has written so far. */
  output(): string;
  /** Sends a signal and waits for the end; gives the exit code, null when a signal ended it. */
  stop(signal?: 'SIGTERM' | 'SIGKILL'): Promise<number | null>;
}

export function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer().once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address();
      const port = typeof address === 'object' && address !== null ? address.port : 0;
      probe.close(() => resolve(port));
    });
  });
}

/** Starts the built server over a data directory. Needs `npm run build`. Throws with its output when it ends before it listens. */
export async function startBuilt(
  dataDirectory: string,
  port: number,
  variables: Readonly<Record<string, string>> = {},
): Promise<BuiltServer> {
  if (!existsSync('dist/server/main.js')) throw new Error('there is no build: run "npm run build" first');
  const child = spawn(process.execPath, ['dist/server/main.js'], {
    env: { ...process.env, NODE_ENV: 'production', PORT: String(port), QUADRILLE_DATA: dataDirectory, ...variables },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let text = '';
  const ended = new Promise<number | null>((resolve) => child.once('exit', resolve));
  const listening = new Promise<string>((resolve) => {
    const read = (chunk: Buffer) => {
      text += chunk.toString('utf8');
      const url = /^Quadrille is at (\S+)$/m.exec(text)?.[1];
      if (url !== undefined) resolve(url);
    };
    child.stdout.on('data', read);
    child.stderr.on('data', read);
  });
  const url = await Promise.race([listening, ended.then(() => null)]);
  if (url === null) throw new Error(`the server ended before it listened:\n${text}`);
  return {
    url,
    setUpLink: /^Make the first admin .*: (\S+)$/m.exec(text)?.[1] ?? null,
    process: child,
    output: () => text,
    stop: (signal = 'SIGTERM') => {
      child.kill(signal);
      return ended;
    },
  };
}

/** One server for all end-to-end tests of a run. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const folder = mkdtempSync(join(tmpdir(), 'quadrille-e2e-'));
  const dataDirectory = join(folder, 'data');
  const server = await startBuilt(dataDirectory, await freePort());
  project.provide('baseUrl', server.url);
  project.provide('setUpLink', server.setUpLink ?? '');
  project.provide('dataDirectory', dataDirectory);
  return async () => {
    await server.stop();
    rmSync(folder, { recursive: true, force: true });
  };
}

declare module 'vitest' {
  export interface ProvidedContext {
    /** Address of the built server, such as http://localhost:41234. */
    baseUrl: string;
    /** By which the first admin is made; works once in a run. */
    setUpLink: string;
    dataDirectory: string;
  }
}
