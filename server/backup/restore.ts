import { createHash } from 'node:crypto';
import {
  cpSync,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  renameSync,
  rmdirSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join, resolve } from 'node:path';
import { readJournal } from '../database/migrate.ts';
import { type Opened, openDatabase, type Tx } from '../database/open.ts';
import { StartError } from '../env.ts';
import { type ReadHead, type ReadTableEnd, readBackup } from './read.ts';
import { insertRows, tableRows } from './tables.ts';
import { rowLine, syncFolder } from './write.ts';

/** Rows put in at a time. */
const PAGE = 200;

/**
 * Puts a backup into a data directory that is not there yet or is empty. The file is read whole and checked first; the rows go into a folder
 * beside it, on the schema they were made with; what then stands in the database is read back and its hashes compared; later migrations are
 * applied; only then does the folder take its name. Gives the number of rows.
 * When it cannot: throws `StartError` with one line, and leaves nothing behind.
 */
export async function restoreBackup(file: string, dataDirectory: string, migrations: string): Promise<number> {
  const target = resolve(dataDirectory);
  if (existsSync(target) && readdirSync(target).length > 0) {
    throw new StartError(
      `${target} is not empty, but restoring needs an empty place. Set QUADRILLE_DATA to a new folder.`,
    );
  }
  const head = await checkWhole(file);
  const beside = `${target}.restoring-${process.pid}`;
  mkdirSync(dirname(target), { recursive: true });
  mkdirSync(beside, { mode: 0o700 });
  try {
    const count = await fill(file, head, join(beside, 'database'), migrations);
    if (existsSync(target)) rmdirSync(target);
    renameSync(beside, target);
    await syncFolder(dirname(target));
    return count;
  } finally {
    rmSync(beside, { recursive: true, force: true });
  }
}

async function checkWhole(file: string): Promise<ReadHead> {
  let found: ReadHead | undefined;
  await readBackup(file, {
    head: async (head) => {
      found = head;
    },
    row: async () => undefined,
    tableEnd: async () => undefined,
  });
  if (!found) throw new StartError(`${file} is empty, but restoring needs a backup file.`);
  return found;
}

async function fill(file: string, head: ReadHead, folder: string, migrations: string): Promise<number> {
  const opened = await openDatabase({ folder });
  try {
    await migrateUpTo(opened, migrations, head.migration);
    const count = await opened.db.transaction((tx) => insertAll(tx, file));
    await opened.migrate(migrations);
    return count;
  } finally {
    await opened.close();
  }
}

/** Applies the migrations up to and with the named one. */
async function migrateUpTo(opened: Opened, folder: string, tag: string): Promise<void> {
  const journal = readJournal(folder);
  const last = journal.entries.findIndex((entry) => entry.tag === tag);
  if (last < 0) {
    throw new StartError(
      `The backup needs the schema "${tag}", but this release does not know it. Restore with a newer release.`,
    );
  }
  const partial = mkdtempSync(join(tmpdir(), 'quadrille-migrations-'));
  try {
    cpSync(folder, partial, { recursive: true });
    const entries = journal.entries.slice(0, last + 1);
    writeFileSync(join(partial, 'meta', '_journal.json'), JSON.stringify({ ...journal, entries }));
    await opened.migrate(partial);
  } finally {
    rmSync(partial, { recursive: true, force: true });
  }
}

async function insertAll(tx: Tx, file: string): Promise<number> {
  let waiting: string[] = [];
  const flush = async (table: string) => {
    if (waiting.length > 0) await insertRows(tx, table, waiting);
    waiting = [];
  };
  return readBackup(file, {
    head: async () => undefined,
    row: async (table, row) => {
      waiting.push(row);
      if (waiting.length >= PAGE) await flush(table);
    },
    tableEnd: async (end) => {
      await flush(end.table);
      await compare(tx, end);
    },
  });
}

/** Reads a restored table back: the database must hold what the backup's hash was made of. */
async function compare(tx: Tx, end: ReadTableEnd): Promise<void> {
  const hash = createHash('sha256');
  for await (const row of tableRows(tx, end.table)) hash.update(rowLine(end.table, row));
  if (hash.digest('hex') !== end.sha256) {
    throw new StartError(`The rows of ${end.table} read back differently from the backup. Nothing was restored.`);
  }
}
