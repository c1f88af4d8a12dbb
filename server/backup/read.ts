import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import * as z from 'zod';
import { StartError } from '../env.ts';

const head = z.object({
  kind: z.literal('quadrille-backup'),
  format: z.literal(1),
  migration: z.string(),
  release: z.string(),
  at: z.iso.datetime(),
  tables: z.array(z.string().regex(/^[a-z_]+$/)),
});
const tableEnd = z.object({ table: z.string(), rows: z.int(), sha256: z.string() });
const backupEnd = z.object({ end: z.literal(true), rows: z.int(), sha256: z.string() });

export type ReadHead = z.infer<typeof head>;
export type ReadTableEnd = z.infer<typeof tableEnd>;

/** What a backup's lines are told to, in order. */
export interface BackupSink {
  head(head: ReadHead): Promise<void>;
  row(table: string, row: string): Promise<void>;
  tableEnd(end: ReadTableEnd): Promise<void>;
}

/**
 * Reads a backup line by line and checks it while it goes: order, counts, the hash of each table and of the whole.
 * When it cannot: throws `StartError` that names the line and what was expected there. Gives the number of rows.
 */
export async function readBackup(path: string, sink: BackupSink): Promise<number> {
  const reader = new BackupReader(path, sink);
  try {
    for await (const line of linesOf(path)) await reader.line(line);
  } catch (error) {
    if (error instanceof Error && 'code' in error && error.code === 'ENOENT') {
      throw new StartError(`${path} is not there, but restoring needs a backup file.`);
    }
    throw error;
  }
  return reader.finish();
}

/** Splits at line feeds only: texts hold the other separators that Node's own line reader would split at. */
async function* linesOf(path: string): AsyncGenerator<string> {
  let rest = '';
  for await (const chunk of createReadStream(path, 'utf8')) {
    const lines = `${rest}${chunk}`.split('\n');
    rest = lines.pop() ?? '';
    yield* lines;
  }
  if (rest !== '') yield rest;
}

class BackupReader {
  readonly #path: string;
  readonly #sink: BackupSink;
  readonly #all = createHash('sha256');
  #table = createHash('sha256');
  #tables: string[] | null = null;
  #line = 0;
  #rows = 0;
  #total = 0;
  #state: 'open' | 'ended' = 'open';

  constructor(path: string, sink: BackupSink) {
    this.#path = path;
    this.#sink = sink;
  }

  async line(line: string): Promise<void> {
    this.#line++;
    if (this.#state === 'ended') throw this.#unexpected('a line after the last one', 'the end of the file');
    const text = `${line}\n`;
    const value = this.#json(line);
    const end = backupEnd.safeParse(value);
    if (end.success) {
      this.#checkEnd(end.data);
      return;
    }
    this.#all.update(text);
    if (this.#tables === null) return this.#readHead(value);
    if (Array.isArray(value)) return this.#readRow(line, text, value);
    return this.#readTableEnd(value);
  }

  finish(): number {
    if (this.#state !== 'ended')
      throw this.#unexpected('the end of the file', 'its closing line: the backup is not whole');
    return this.#total;
  }

  async #readHead(value: unknown): Promise<void> {
    const parsed = head.safeParse(value);
    if (!parsed.success) throw this.#unexpected('first line', 'that of a backup of Quadrille, format 1');
    this.#tables = [...parsed.data.tables];
    await this.#sink.head(parsed.data);
  }

  async #readRow(line: string, text: string, value: readonly unknown[]): Promise<void> {
    const table = this.#tables?.[0];
    if (table === undefined || value.length !== 2 || value[0] !== table) {
      throw this.#unexpected(`row of ${String(value[0])}`, `a row of ${table ?? 'no more tables'}`);
    }
    this.#rows++;
    this.#total++;
    this.#table.update(text);
    // The row goes on as it was written, not as JavaScript would write its numbers again.
    await this.#sink.row(table, line.slice(JSON.stringify(table).length + 2, -1));
  }

  async #readTableEnd(value: unknown): Promise<void> {
    const parsed = tableEnd.safeParse(value);
    const table = this.#tables?.shift();
    if (!parsed.success || parsed.data.table !== table)
      throw this.#unexpected('line', `the end of ${table ?? 'the backup'}`);
    const hash = this.#table.digest('hex');
    if (parsed.data.rows !== this.#rows)
      throw this.#unexpected(`${this.#rows} rows of ${table}`, String(parsed.data.rows));
    if (parsed.data.sha256 !== hash) throw this.#unexpected(`rows of ${table}`, 'those its hash was made of');
    this.#table = createHash('sha256');
    this.#rows = 0;
    await this.#sink.tableEnd(parsed.data);
  }

  #checkEnd(end: z.infer<typeof backupEnd>): void {
    if (this.#tables === null || this.#tables.length > 0) throw this.#unexpected('closing line', 'more tables');
    if (end.rows !== this.#total) throw this.#unexpected(`${this.#total} rows`, String(end.rows));
    if (end.sha256 !== this.#all.digest('hex')) throw this.#unexpected('text', 'that its hash was made of');
    this.#state = 'ended';
  }

  #json(line: string): unknown {
    try {
      return JSON.parse(line);
    } catch {
      throw this.#unexpected('text', 'JSON: the file was changed or cut');
    }
  }

  #unexpected(found: string, expected: string): StartError {
    return new StartError(`${this.#path}, line ${this.#line}: unexpected ${found}, expected ${expected}.`);
  }
}
