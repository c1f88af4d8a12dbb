import { accessSync, chmodSync, constants, existsSync, mkdirSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { writeBackup } from './backup/write.ts';
import { lockDirectory } from './database/lock.ts';
import { appliedMigration, migrateDatabase } from './database/migrate.ts';
import { type Opened, openDatabase } from './database/open.ts';
import { StartError } from './env.ts';
import type { Place } from './place.ts';
import { loadSecret } from './secret.ts';

/** An open data directory: locked, with its secret, its database at the schema of this release. */
export interface OpenDirectory extends Opened {
  readonly secret: string;
}

/**
 * Opens (first: makes) a data directory. Before a migration changes existing data, a backup is kept beside the directory.
 * When it cannot: throws `StartError` or `DirectoryHeld` with one line; everything that was opened is closed again.
 */
export async function openDataDirectory(
  path: string,
  place: Place,
  options: { readonly secret: string | undefined; readonly release: string; readonly now: Date },
): Promise<OpenDirectory> {
  makeDirectory(path);
  const unlock = lockDirectory(path);
  try {
    const secret = loadSecret(path, options.secret);
    const opened = await openDatabase({ folder: join(path, 'database') });
    try {
      await migrateDatabase(opened, place.migrations, async () => {
        const migration = await appliedMigration(opened.db, place.migrations);
        const stamp = options.now.toISOString().replace(/[:.]/g, '-');
        const facts = { migration, release: options.release, now: options.now };
        await writeBackup(opened.db, `${path}-before-migration-${stamp}.backup`, facts);
      });
    } catch (error) {
      await opened.close();
      throw error;
    }
    const close = async () => {
      await opened.close();
      unlock();
    };
    return { ...opened, secret, close };
  } catch (error) {
    unlock();
    throw error;
  }
}

function makeDirectory(path: string): void {
  try {
    const isNew = !existsSync(path);
    mkdirSync(path, { recursive: true, mode: 0o700 });
    // The umask may have taken rights away; others have none in any case.
    if (isNew) chmodSync(path, 0o700);
    accessSync(path, constants.R_OK | constants.W_OK | constants.X_OK);
    accessSync(dirname(path), constants.X_OK);
  } catch (error) {
    const code = error instanceof Error && 'code' in error ? ` (${String(error.code)})` : '';
    throw new StartError(
      `${path} cannot be written${code}, but Quadrille keeps its data there. Give it a folder of its own by QUADRILLE_DATA.`,
    );
  }
}
