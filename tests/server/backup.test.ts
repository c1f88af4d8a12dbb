import {
  existsSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { sql } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { restoreBackup } from '../../server/backup/restore.ts';
import { tablesInOrder } from '../../server/backup/tables.ts';
import { writeBackup } from '../../server/backup/write.ts';
import { readJournal } from '../../server/database/migrate.ts';
import { openDatabase } from '../../server/database/open.ts';
import { draft, draftSave, keptInput, recipe, requestAnswer, session, team } from '../../server/database/schema.ts';
import { type FreshApp, freshApp } from './fresh-app.ts';
import { standIns } from './stand-ins.ts';

const migration = readJournal('drizzle').entries.at(-1)?.tag ?? '';
const facts = { migration, release: '0.1.0+test', now: new Date('2026-03-02T09:00:00.000Z') };
/** Every separator that a line reader might trip over, a letter outside of the basic plane, quotes and a backslash. */
const NASTY = 'R = 4k7 Ω\r\n"quoted" \\ \u2028 \u2029 \u0085 😀 \t end';

let folder: string;
let fresh: FreshApp;
beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'quadrille-backup-'));
  fresh = await freshApp({ services: standIns({}) });
  await fill(fresh);
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

async function fill({ db, people }: FreshApp): Promise<void> {
  await db.update(team).set({ timeZone: 'Europe/Vienna', topics: ['level shift'], hazardVolts: 30.1 });
  const [made] = await db.insert(recipe).values({ slug: 'rail-splitter' }).returning();
  const recipeId = made?.id ?? '';
  const [open] = await db.insert(draft).values({ recipeId, text: NASTY, ownerId: people.author.id }).returning();
  const saves = Array.from({ length: 1203 }, (_, i) => ({
    id: `save-${i}`,
    draftId: open?.id ?? '',
    userId: people.author.id,
    baseRevision: i,
    revision: i + 1,
    text: `${NASTY} ${i}`,
    createdAt: new Date(Date.UTC(2026, 2, 29, 0, 59, 59, i)),
  }));
  await db.insert(draftSave).values(saves);
  const fields = { V_d: '±2 V', note: NASTY };
  await db
    .insert(keptInput)
    .values({ userId: people.reader.id, recipeId, calculator: 'main', fields, lastSaveId: 's' });
  await db.insert(requestAnswer).values({ person: 'x', requestId: 'y', route: 'z', answer: {} });
  await db.insert(session).values({ id: 's', token: 'secret-token', userId: people.reader.id, expiresAt: facts.now });
}

async function allRows(db: FreshApp['db'], table: string): Promise<unknown> {
  return (await db.execute(sql`select * from ${sql.identifier(table)} order by 1::text collate "C", 2`)) as unknown;
}

// Making a database from nothing takes seconds of processor time.
describe('a backup', { timeout: 120_000 }, () => {
  test('put into an empty place gives every row of every table again', async () => {
    const file = join(folder, 'team.backup');
    const end = await writeBackup(fresh.db, file, facts);
    const place = join(folder, 'restored');
    expect(await restoreBackup(file, place, 'drizzle')).toBe(end.rows);
    const opened = await openDatabase({ folder: join(place, 'database') });
    try {
      for (const table of await tablesInOrder(fresh.db)) {
        const before = (await allRows(fresh.db, table)) as { rows: unknown[] };
        const after = (await allRows(opened.db, table)) as { rows: unknown[] };
        expect([table, after.rows]).toEqual([table, before.rows]);
      }
      expect(await opened.db.select().from(session)).toEqual([]);
    } finally {
      await opened.close();
    }
  });

  test('has mode 0600, leaves no part file, and holds no session', async () => {
    const file = join(folder, 'team.backup');
    await writeBackup(fresh.db, file, facts);
    expect(statSync(file).mode & 0o777).toBe(0o600);
    expect(readdirSync(folder)).toEqual(['team.backup']);
    expect(readFileSync(file, 'utf8')).not.toContain('secret-token');
  });

  test('names its schema, counts and hashes, table by table in an order that can be put back', async () => {
    const file = join(folder, 'team.backup');
    await writeBackup(fresh.db, file, facts);
    const lines = readFileSync(file, 'utf8').trimEnd().split('\n');
    const head = JSON.parse(lines[0] ?? '');
    expect(head).toMatchObject({ kind: 'quadrille-backup', format: 1, migration, release: '0.1.0+test' });
    expect(head.tables.indexOf('user')).toBeLessThan(head.tables.indexOf('draft'));
    const saves = lines.map((line) => JSON.parse(line)).find((line) => line.table === 'draft_save');
    expect(saves).toEqual({ table: 'draft_save', rows: 1203, sha256: expect.stringMatching(/^[0-9a-f]{64}$/) });
  });

  test('does not overwrite a file', async () => {
    const file = join(folder, 'team.backup');
    writeFileSync(file, 'mine');
    await expect(writeBackup(fresh.db, file, facts)).rejects.toThrow(`${file} is there already`);
    expect(readFileSync(file, 'utf8')).toBe('mine');
  });
});

describe('restoring', { timeout: 120_000 }, () => {
  const restoreChanged = async (change: (text: string) => string): Promise<string> => {
    const file = join(folder, 'team.backup');
    await writeBackup(fresh.db, file, facts);
    writeFileSync(file, change(readFileSync(file, 'utf8')));
    const place = join(folder, 'restored');
    const message = await restoreBackup(file, place, 'drizzle').then(
      () => 'restored',
      (error: Error) => error.message,
    );
    expect(existsSync(place)).toBe(false);
    expect(readdirSync(folder)).toEqual(['team.backup']);
    return message.replace(file, 'FILE');
  };

  test('refuses a file that was cut, changed, or comes from elsewhere, and leaves nothing behind', async () => {
    expect(await restoreChanged((text) => text.slice(0, text.lastIndexOf('{"end"')))).toMatch(
      /^FILE, line \d+: unexpected the end of the file, expected its closing line: the backup is not whole\.$/,
    );
    rmSync(join(folder, 'team.backup'));
    expect(await restoreChanged((text) => text.replace('4k7', '4k8'))).toContain('expected those its hash was made of');
    rmSync(join(folder, 'team.backup'));
    expect(await restoreChanged((text) => text.replace('0.1.0+test', '0.1.1+test'))).toContain(
      'expected that its hash was made of',
    );
    rmSync(join(folder, 'team.backup'));
    expect(await restoreChanged(() => 'PGDMP\n')).toBe(
      'FILE, line 1: unexpected text, expected JSON: the file was changed or cut.',
    );
  });

  test('refuses a place that holds something', async () => {
    const file = join(folder, 'team.backup');
    await writeBackup(fresh.db, file, facts);
    const place = join(folder, 'used');
    mkdirSync(place);
    writeFileSync(join(place, 'secret'), 'x');
    await expect(restoreBackup(file, place, 'drizzle')).rejects.toThrow(`${place} is not empty`);
    expect(readdirSync(place)).toEqual(['secret']);
  });

  test('refuses a schema that this release does not know, and says which', async () => {
    const file = join(folder, 'team.backup');
    await writeBackup(fresh.db, file, { ...facts, migration: '0099_later' });
    await expect(restoreBackup(file, join(folder, 'restored'), 'drizzle')).rejects.toThrow('"0099_later"');
    expect(existsSync(join(folder, 'restored'))).toBe(false);
  });
});
