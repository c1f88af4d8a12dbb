import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { sql } from 'drizzle-orm';
import { StartError } from '../env.ts';
import type { Db, Opened } from './open.ts';
import { rows } from './rows.ts';
import { team } from './schema.ts';

interface Journal {
  readonly entries: readonly { readonly tag: string; readonly when: number }[];
}

/** Reads which migrations a folder holds, in order. */
export function readJournal(folder: string): Journal {
  return JSON.parse(readFileSync(join(folder, 'meta', '_journal.json'), 'utf8'));
}

export interface MigrationPlan {
  /** `new`: no table yet. */
  readonly state: 'new' | 'behind' | 'current';
  readonly pending: readonly string[];
}

/**
 * Compares a database with the migrations of a folder.
 * When it cannot: throws when the database is ahead of the folder, because an older release must not write to it.
 */
export async function planMigration(db: Db, folder: string): Promise<MigrationPlan> {
  const { entries } = readJournal(folder);
  const applied = await lastApplied(db);
  if (applied === null) return { state: 'new', pending: entries.map((entry) => entry.tag) };
  const newest = entries.at(-1)?.when ?? 0;
  if (applied > newest) {
    throw new StartError(
      'The data were written by a newer release. Start that release, or restore a backup into an empty place.',
    );
  }
  const pending = entries.filter((entry) => entry.when > applied).map((entry) => entry.tag);
  return { state: pending.length > 0 ? 'behind' : 'current', pending };
}

async function lastApplied(db: Db): Promise<number | null> {
  const [journal] = await rows<{ table: string | null }>(
    db,
    sql`select to_regclass('drizzle.__drizzle_migrations')::text as "table"`,
  );
  if (journal?.table == null) return null;
  const [last] = await rows<{ when: string | null }>(
    db,
    sql`select max(created_at)::text as "when" from drizzle.__drizzle_migrations`,
  );
  return last?.when == null ? null : Number(last.when);
}

/** Names the last migration that a database has seen. Throws when it has seen none of the folder's. */
export async function appliedMigration(db: Db, folder: string): Promise<string> {
  const when = await lastApplied(db);
  const entry = readJournal(folder).entries.find((one) => one.when === when);
  if (!entry) throw new StartError('The data were not written by this release or an earlier one.');
  return entry.tag;
}

/** Makes the one row of team settings that every part of the program reads. */
export async function ensureTeam(db: Db): Promise<void> {
  await db.insert(team).values({ id: 1 }).onConflictDoNothing();
}

/**
 * Brings the database to the folder's last migration. All pending ones run in one transaction: when one fails, the data stay as the
 * old release left them. Before anything changes on existing data, `keepBackup` is awaited.
 */
export async function migrateDatabase(
  opened: Opened,
  folder: string,
  keepBackup: (pending: readonly string[]) => Promise<void>,
): Promise<MigrationPlan> {
  const plan = await planMigration(opened.db, folder);
  if (plan.state === 'current') return plan;
  if (plan.state === 'behind') await keepBackup(plan.pending);
  await opened.migrate(folder);
  await ensureTeam(opened.db);
  return plan;
}
