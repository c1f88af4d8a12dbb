import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { hostname, tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { DirectoryHeld, lockDirectory } from '../../server/database/lock.ts';

let folder: string;
const children: ChildProcess[] = [];
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'quadrille-lock-'));
});
afterEach(() => {
  for (const child of children.splice(0)) child.kill('SIGKILL');
  rmSync(folder, { recursive: true, force: true });
});

/** Another process that holds the lock of a directory until it is killed. */
async function holder(directory: string): Promise<ChildProcess> {
  const script = `import { lockDirectory } from './server/database/lock.ts';
    lockDirectory(${JSON.stringify(directory)}); console.log('held'); setInterval(() => {}, 1000);`;
  const child = spawn(process.execPath, ['--import', 'tsx', '--input-type=module', '-e', script]);
  children.push(child);
  await new Promise<void>((resolve, reject) => {
    child.stdout.once('data', () => resolve());
    child.once('exit', (code) => reject(new Error(`the holder ended with ${code}`)));
  });
  return child;
}

const exited = (child: ChildProcess) => new Promise((resolve) => child.once('exit', resolve));
const lockFile = () => join(folder, 'lock');
const written = () => JSON.parse(readFileSync(lockFile(), 'utf8'));

describe('the lock of a data directory', () => {
  test('is held by a living process, which the refusal names', async () => {
    const child = await holder(folder);
    expect(() => lockDirectory(folder)).toThrow(
      `${folder} is in use by process ${child.pid}. Stop it first, or set QUADRILLE_DATA to another folder.`,
    );
  });

  test('is taken over from a process that was killed', async () => {
    const child = await holder(folder);
    const gone = exited(child);
    child.kill('SIGKILL');
    await gone;
    expect(existsSync(lockFile())).toBe(true);
    const free = lockDirectory(folder);
    expect(written().pid).toBe(process.pid);
    free();
    expect(existsSync(lockFile())).toBe(false);
  });

  test('is readable by its owner only, and names process, start, machine and directory', () => {
    const free = lockDirectory(folder);
    expect(statSync(lockFile()).mode & 0o777).toBe(0o600);
    expect(written()).toEqual({
      pid: process.pid,
      start: expect.stringMatching(/^\d+$/),
      host: hostname(),
      directory: folder,
    });
    free();
  });

  test('is taken over when the process id now belongs to another process', () => {
    writeFileSync(lockFile(), JSON.stringify({ pid: process.pid, start: '1', host: hostname(), directory: folder }));
    lockDirectory(folder)();
    expect(existsSync(lockFile())).toBe(false);
  });

  test('that came along with a copy of a directory holds nothing', async () => {
    const original = join(folder, 'original');
    mkdirSync(original);
    await holder(original);
    const copy = join(folder, 'copy');
    mkdirSync(copy);
    writeFileSync(join(copy, 'lock'), readFileSync(join(original, 'lock')));
    lockDirectory(copy)();
    expect(() => lockDirectory(original)).toThrow(DirectoryHeld);
  });

  test('of another machine is never taken over', () => {
    writeFileSync(lockFile(), JSON.stringify({ pid: 1, start: '1', host: 'elsewhere', directory: folder }));
    expect(() => lockDirectory(folder)).toThrow('is in use by process 1 on elsewhere');
    expect(written().host).toBe('elsewhere');
  });

  test('that was cut short by a crash is taken over', () => {
    writeFileSync(lockFile(), '{"pid":');
    lockDirectory(folder)();
    expect(existsSync(lockFile())).toBe(false);
  });

  test('is given to one of several starts at once', async () => {
    writeFileSync(lockFile(), JSON.stringify({ pid: 2 ** 22, start: '1', host: hostname(), directory: folder }));
    const starts = await Promise.allSettled([holder(folder), holder(folder), holder(folder)]);
    expect(starts.map((start) => start.status).sort()).toEqual(['fulfilled', 'rejected', 'rejected']);
  });
});
