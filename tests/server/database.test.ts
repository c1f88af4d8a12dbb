import { execFileSync } from 'node:child_process';
import { cpSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, relative } from 'node:path';
import { sql } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, inject, test } from 'vitest';
import { migrateDatabase, planMigration, readJournal } from '../../server/database/migrate.ts';
import { type Opened, openDatabase } from '../../server/database/open.ts';
import { rows } from '../../server/database/rows.ts';
import { team } from '../../server/database/schema.ts';

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'quadrille-database-'));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

/** A database that this release has migrated: the template of all tests. */
const migrated = (options: { folder?: string } = {}) =>
  openDatabase({ ...options, image: new Uint8Array(readFileSync(inject('databaseImage'))) });

/** A copy of the migrations with one more, written by the test. */
function withOneMore(statements: string): string {
  const copy = join(folder, 'drizzle');
  cpSync('drizzle', copy, { recursive: true });
  const journal = readJournal(copy);
  const last = journal.entries.at(-1);
  const entry = { ...last, idx: journal.entries.length, tag: '9999_next', when: (last?.when ?? 0) + 1 };
  writeFileSync(
    join(copy, 'meta', '_journal.json'),
    JSON.stringify({ ...journal, entries: [...journal.entries, entry] }),
  );
  writeFileSync(join(copy, '9999_next.sql'), statements);
  return copy;
}

async function columnsOfTeam(opened: Opened): Promise<readonly string[]> {
  const found = await rows<{ name: string }>(
    opened.db,
    sql`select column_name as name from information_schema.columns where table_name = 'team' order by ordinal_position`,
  );
  return found.map((row) => row.name);
}

describe('the migrations', () => {
  // The migrator applies an entry only when its time is later than that of the last applied one: one out of order is lost silently.
  test('stand in the journal with times that strictly rise, and each has its file', () => {
    const { entries } = readJournal('drizzle');
    expect(entries.length).toBeGreaterThan(0);
    for (const [index, entry] of entries.entries()) {
      expect(entry.when).toBeGreaterThan(entries[index - 1]?.when ?? 0);
      expect(readFileSync(join('drizzle', `${entry.tag}.sql`), 'utf8')).not.toBe('');
    }
  });

  test('say what the schema says: generating gives nothing new', () => {
    const copy = join(folder, 'drizzle');
    cpSync('drizzle', copy, { recursive: true });
    const before = readdirSync(copy);
    // It puts "./" before the folder's name, whatever it is.
    const out = relative(process.cwd(), copy);
    const words = ['generate', '--dialect', 'postgresql', '--schema', './server/database/schema.ts', '--out', out];
    const said = execFileSync('node_modules/.bin/drizzle-kit', words, { encoding: 'utf8' });
    expect(said).toContain('No schema changes');
    expect(readdirSync(copy)).toEqual(before);
  });
});

// Making a database from nothing takes seconds of processor time.
describe('migrating', { timeout: 120_000 }, () => {
  test('an empty database makes the tables and the row of the team, without a backup', async () => {
    const opened = await openDatabase();
    const asked: unknown[] = [];
    const plan = await migrateDatabase(opened, 'drizzle', async (pending) => void asked.push(pending));
    expect(plan.state).toBe('new');
    expect(asked).toEqual([]);
    expect(await opened.db.select({ id: team.id }).from(team)).toEqual([{ id: 1 }]);
    expect(await planMigration(opened.db, 'drizzle')).toEqual({ state: 'current', pending: [] });
    await opened.close();
  });

  test('existing data asks for a backup first, and does nothing when that fails', async () => {
    const opened = await migrated();
    const next = withOneMore('alter table team add column motto text;');
    const full = new Error('no space left');
    await expect(migrateDatabase(opened, next, () => Promise.reject(full))).rejects.toBe(full);
    expect(await columnsOfTeam(opened)).not.toContain('motto');
    const asked: unknown[] = [];
    await migrateDatabase(opened, next, async (pending) => void asked.push(pending));
    expect(asked).toEqual([['9999_next']]);
    expect(await columnsOfTeam(opened)).toContain('motto');
    await opened.close();
  });

  test('that fails half-way leaves the data as the old release left them, and it opens them again', async () => {
    const data = join(folder, 'database');
    const opened = await migrated({ folder: data });
    await opened.db.insert(team).values({ id: 1, name: 'Fernhollow' });
    const before = await columnsOfTeam(opened);
    const broken = withOneMore(
      'alter table team add column motto text;--> statement-breakpoint\nalter table team add column motto text;',
    );
    await expect(migrateDatabase(opened, broken, async () => undefined)).rejects.toThrow();
    await opened.close();
    const again = await openDatabase({ folder: data });
    expect(await planMigration(again.db, 'drizzle')).toEqual({ state: 'current', pending: [] });
    expect(await columnsOfTeam(again)).toEqual(before);
    expect(await again.db.select({ name: team.name }).from(team)).toEqual([{ name: 'Fernhollow' }]);
    await again.close();
  });

  test('by an older release is refused', async () => {
    const opened = await migrated();
    await migrateDatabase(opened, withOneMore('select 1;'), async () => undefined);
    await expect(migrateDatabase(opened, 'drizzle', async () => undefined)).rejects.toThrow(
      'written by a newer release',
    );
    await opened.close();
  });
});
