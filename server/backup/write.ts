import { createHash } from 'node:crypto';
import { existsSync } from 'node:fs';
import { type FileHandle, open, rename, rm } from 'node:fs/promises';
import { basename, dirname, resolve } from 'node:path';
import type { Db } from '../database/open.ts';
import { StartError } from '../env.ts';
import { tableRows, tablesInOrder } from './tables.ts';

/** The first line of a backup. */
export interface BackupHead {
  readonly kind: 'quadrille-backup';
  readonly format: 1;
  /** Name of the last migration, the state of the schema that the rows need. */
  readonly migration: string;
  readonly release: string;
  readonly at: string;
  readonly tables: readonly string[];
}

/** Closes a table. */
export interface TableEnd {
  readonly table: string;
  readonly rows: number;
  /** SHA-256 over the lines of its rows, each with its line end. */
  readonly sha256: string;
}

/** The last line. */
export interface BackupEnd {
  readonly end: true;
  readonly rows: number;
  /** SHA-256 over all lines before this one. */
  readonly sha256: string;
}

export interface BackupFacts {
  readonly migration: string;
  readonly release: string;
  readonly now: Date;
}

/**
 * Writes a backup: a head, then for each table its rows as JSON lines (`[table, row]`) and a line with their count and hash, then the hash of
 * everything. All of it is one moment of the database. The file has mode 0600, is flushed to the disk, and takes its name only when it is whole.
 * When it cannot: throws `StartError` with one line where the file is there already or its folder is not.
 */
export async function writeBackup(db: Db, path: string, facts: BackupFacts): Promise<BackupEnd> {
  const file = resolve(path);
  if (existsSync(file)) throw new StartError(`${file} is there already, but a backup needs a name of its own.`);
  const part = `${file}.${process.pid}.part`;
  const handle = await open(part, 'wx', 0o600).catch((error: Error) => {
    throw new StartError(`${file} cannot be written: ${error.message}.`);
  });
  try {
    const end = await writeLines(db, handle, facts);
    await handle.sync();
    await handle.close();
    await rename(part, file);
    await syncFolder(dirname(file));
    return end;
  } catch (error) {
    await handle.close();
    await rm(part, { force: true });
    throw new Error(`the backup ${basename(file)} was not finished`, { cause: error });
  }
}

async function writeLines(db: Db, handle: FileHandle, facts: BackupFacts): Promise<BackupEnd> {
  const all = createHash('sha256');
  let pending = '';
  const write = async (line: string, flush: boolean) => {
    all.update(line);
    pending += line;
    if (!flush && pending.length < 1 << 20) return;
    await handle.write(pending);
    pending = '';
  };
  const count = await db.transaction(
    async (tx) => {
      const tables = await tablesInOrder(tx);
      const { migration, release, now } = facts;
      const head: BackupHead = {
        kind: 'quadrille-backup',
        format: 1,
        migration,
        release,
        at: now.toISOString(),
        tables,
      };
      await write(`${JSON.stringify(head)}\n`, false);
      let total = 0;
      for (const table of tables) {
        const hash = createHash('sha256');
        let rows = 0;
        for await (const row of tableRows(tx, table)) {
          const line = rowLine(table, row);
          hash.update(line);
          rows++;
          await write(line, false);
        }
        const end: TableEnd = { table, rows, sha256: hash.digest('hex') };
        await write(`${JSON.stringify(end)}\n`, false);
        total += rows;
      }
      return total;
    },
    { isolationLevel: 'repeatable read' },
  );
  const end: BackupEnd = { end: true, rows: count, sha256: all.copy().digest('hex') };
  await write(`${JSON.stringify(end)}\n`, true);
  return end;
}

/** One row as it stands in a backup. */
export function rowLine(table: string, row: string): string {
  return `[${JSON.stringify(table)},${row}]\n`;
}

/** Flushes a folder, so that a new name in it outlives a power cut. */
export async function syncFolder(path: string): Promise<void> {
  const folder = await open(path, 'r');
  try {
    await folder.sync();
  } finally {
    await folder.close();
  }
}
