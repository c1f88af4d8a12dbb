import { PGlite } from '@electric-sql/pglite';
import type { PgDatabase, PgQueryResultHKT } from 'drizzle-orm/pg-core';
import { drizzle } from 'drizzle-orm/pglite';
import { migrate } from 'drizzle-orm/pglite/migrator';
import * as schema from './schema.ts';

/** The database, or a transaction of it: services take either. This file alone knows that PGlite is underneath. */
export type Db = PgDatabase<PgQueryResultHKT, typeof schema>;
/** A transaction, where a caller must be inside one. */
export type Tx = Parameters<Parameters<Db['transaction']>[0]>[0];

export interface Opened {
  readonly db: Db;
  /** Applies the migrations of a folder that are later than the last applied one. Throws what the database throws. */
  migrate(folder: string): Promise<void>;
  /** The whole data directory as an uncompressed tar file, for `image`. */
  dumpImage(): Promise<Uint8Array<ArrayBuffer>>;
  close(): Promise<void>;
}

export interface OpenOptions {
  /** Folder of the data files; without it the database lives in memory. */
  readonly folder?: string;
  /** What `dumpImage` gave, to start from. */
  readonly image?: Uint8Array<ArrayBuffer>;
}

/** Opens (first: makes) a database. The caller holds the lock of the data directory: PGlite itself does not guard its files. */
export async function openDatabase({ folder, image }: OpenOptions = {}): Promise<Opened> {
  const lite = await PGlite.create({
    ...(folder === undefined ? {} : { dataDir: folder }),
    ...(image === undefined ? {} : { loadDataDir: new Blob([image]) }),
  });
  const db = drizzle(lite, { schema });
  return {
    db,
    migrate: (migrationsFolder) => migrate(db, { migrationsFolder }),
    dumpImage: async () => new Uint8Array(await (await lite.dumpDataDir('none')).arrayBuffer()),
    close: () => lite.close(),
  };
}
