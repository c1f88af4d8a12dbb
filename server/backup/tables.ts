import { sql } from 'drizzle-orm';
import type { Db, Tx } from '../database/open.ts';
import { rows } from '../database/rows.ts';

/** Not kept: sessions end with a restore (it makes a new secret), and first answers live for 24 hours only. */
const LEFT_OUT: ReadonlySet<string> = new Set(['session', 'request_answer']);
/** Rows fetched at a time. */
const PAGE = 500;

/** Names the tables of a database in an order in which rows can be put back: what is pointed at comes first. */
export async function tablesInOrder(db: Db): Promise<readonly string[]> {
  const all = await rows<{ name: string }>(
    db,
    sql`select tablename as name from pg_tables where schemaname = 'public' order by tablename`,
  );
  const links = await rows<{ name: string; needs: string }>(
    db,
    sql`select child.relname as name, parent.relname as needs from pg_constraint c
        join pg_class child on child.oid = c.conrelid join pg_class parent on parent.oid = c.confrelid
        where c.contype = 'f' and c.conrelid <> c.confrelid`,
  );
  const placed = new Set<string>();
  const waiting = new Set(all.map((row) => row.name));
  while (waiting.size > 0) {
    const ready = [...waiting].filter((name) => links.every((link) => link.name !== name || placed.has(link.needs)));
    if (ready.length === 0) throw new Error(`tables point at each other: ${[...waiting].join(', ')}`);
    for (const name of ready) {
      placed.add(name);
      waiting.delete(name);
    }
  }
  return [...placed].filter((name) => !LEFT_OUT.has(name));
}

/** Reads a table as JSON texts, one a row, in pages. Needs the transaction: its cursor lives there. */
export async function* tableRows(tx: Tx, table: string): AsyncGenerator<string> {
  const name = sql.identifier(table);
  // Instants are written in the session's zone; hashes need one form.
  await tx.execute(sql`set local time zone 'UTC'`);
  await tx.execute(sql`declare reading no scroll cursor for select to_jsonb(t)::text as "row" from ${name} t`);
  for (;;) {
    const page = await rows<{ row: string }>(tx, sql.raw(`fetch ${PAGE} from reading`));
    for (const { row } of page) yield row;
    if (page.length < PAGE) break;
  }
  await tx.execute(sql`close reading`);
}

/** Puts rows into a table. Columns that a row lacks become null: a backup is put back on the schema it was made with. */
export async function insertRows(tx: Tx, table: string, texts: readonly string[]): Promise<void> {
  const name = sql.identifier(table);
  const list = `[${texts.join(',')}]`;
  await tx.execute(sql`insert into ${name} select * from jsonb_populate_recordset(null::${name}, ${list}::jsonb)`);
}
