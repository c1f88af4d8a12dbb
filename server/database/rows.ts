import type { SQL } from 'drizzle-orm';
import type { Db } from './open.ts';

/**
 * Runs one statement written by hand and gives its rows.
 * The caller names the shape: write `::int` behind counts and read instants through typed queries, since drivers differ there.
 */
export async function rows<Row>(db: Db, statement: SQL): Promise<readonly Row[]> {
  const answer = (await db.execute(statement)) as { readonly rows: readonly Row[] };
  return answer.rows;
}
