import {
  closeSync,
  fsyncSync,
  linkSync,
  openSync,
  readFileSync,
  realpathSync,
  renameSync,
  rmSync,
  writeSync,
} from 'node:fs';
import { hostname } from 'node:os';
import { join } from 'node:path';

/** Who holds a data directory. */
interface Holder {
  readonly pid: number;
  /** Start time of that process, so that a recycled process id is not taken for it; empty where the system does not tell. */
  readonly start: string;
  readonly host: string;
  /** Real path of the directory: a copy of it brings its lock along and is not held by it. */
  readonly directory: string;
}

/** The directory is held by a living process, or by another machine. The message is one line for the terminal. */
export class DirectoryHeld extends Error {}

const FILE = 'lock';
/** Two starts that both find a dead holder may each remove and make the file; a few rounds decide. */
const ROUNDS = 5;

/**
 * Locks a data directory for this process; PGlite does not guard its files, and two writers destroy them. A lock is taken over only when its
 * process is dead, never by age: a busy process looks dead to a clock. Gives the function that frees it.
 * When it cannot: throws `DirectoryHeld`, naming the holder.
 */
export function lockDirectory(path: string): () => void {
  const directory = realpathSync(path);
  const file = join(directory, FILE);
  const mine: Holder = { pid: process.pid, start: startOf(process.pid), host: hostname(), directory };
  for (let round = 0; round < ROUNDS; round++) {
    if (create(file, mine)) {
      const free = () => removeOwn(file, mine);
      process.once('exit', free);
      return free;
    }
    const holder = readHolder(file);
    if (holder?.directory === directory) refuseLiving(holder, file);
    removeDead(file, holder);
  }
  throw new DirectoryHeld(`${path} is being locked by several starts at once. Start it once.`);
}

function refuseLiving(holder: Holder, file: string): void {
  if (holder.host !== hostname()) {
    throw new DirectoryHeld(
      `${holder.directory} is in use by process ${holder.pid} on ${holder.host}. Stop it there; if that machine is gone, delete ${file}.`,
    );
  }
  if (!isAlive(holder)) return;
  throw new DirectoryHeld(
    `${holder.directory} is in use by process ${holder.pid}. Stop it first, or set QUADRILLE_DATA to another folder.`,
  );
}

function create(file: string, holder: Holder): boolean {
  try {
    const descriptor = openSync(file, 'wx', 0o600);
    writeSync(descriptor, JSON.stringify(holder));
    fsyncSync(descriptor);
    closeSync(descriptor);
    return true;
  } catch (error) {
    if (isErrno(error, 'EEXIST')) return false;
    throw error;
  }
}

/** Moves a dead lock aside before removing it: if another start was faster, what was moved is that start's lock, and is put back. */
function removeDead(file: string, dead: Holder | null): void {
  const aside = `${file}.${process.pid}`;
  try {
    renameSync(file, aside);
    const moved = readHolder(aside);
    if (moved !== null && JSON.stringify(moved) !== JSON.stringify(dead)) linkSync(aside, file);
  } catch (error) {
    if (!isErrno(error, 'ENOENT') && !isErrno(error, 'EEXIST')) throw error;
  } finally {
    rmSync(aside, { force: true });
  }
}

/** Null when the file went away or was cut short by a crash of its writer. */
function readHolder(file: string): Holder | null {
  try {
    const value: unknown = JSON.parse(readFileSync(file, 'utf8'));
    return isHolder(value) ? value : null;
  } catch (error) {
    if (isErrno(error, 'ENOENT') || error instanceof SyntaxError) return null;
    throw error;
  }
}

function isHolder(value: unknown): value is Holder {
  return typeof value === 'object' && value !== null && 'pid' in value && 'host' in value && 'directory' in value;
}

function removeOwn(file: string, mine: Holder): void {
  const holder = readHolder(file);
  if (holder?.pid === mine.pid && holder.start === mine.start) rmSync(file, { force: true });
}

function isAlive({ pid, start }: Holder): boolean {
  try {
    process.kill(pid, 0);
  } catch (error) {
    if (!isErrno(error, 'EPERM')) return false;
  }
  return start === '' || startOf(pid) === start;
}

/**
 * Field 22 of /proc/PID/stat (proc_pid_stat(5)): the process's start time; `dead` for one that ended and that nobody has reaped, which still
 * answers a signal 0; empty where there is no /proc.
 */
function startOf(pid: number): string {
  try {
    const text = readFileSync(`/proc/${pid}/stat`, 'utf8');
    // The name in field 2 may hold spaces and brackets: count from its last bracket.
    const fields = text.slice(text.lastIndexOf(')') + 2).split(' ');
    return fields[0] === 'Z' || fields[0] === 'X' ? 'dead' : (fields[19] ?? '');
  } catch (error) {
    if (isErrno(error, 'ENOENT') || isErrno(error, 'ESRCH')) return '';
    throw error;
  }
}

function isErrno(error: unknown, code: string): boolean {
  return error instanceof Error && 'code' in error && error.code === code;
}
