/**
 * `npm run bench` measures speed and size against peers in the same run; `-- --json` prints the rows only, `-- NAME…` runs the files named.
 * Each file beside this one exports `measure(): Promise<Row[]>`.
 */
export interface Row {
  readonly name: string;
  readonly value: number;
  readonly unit: string;
  /** The largest value that is good enough ('≤') or the least ('≥'); null: reported only. */
  readonly goal: string | null;
  readonly met: boolean | null;
}

const FILES = ['formula', 'calculator', 'compile', 'search', 'page', 'start'] as const;
const args = process.argv.slice(2);
const json = args.includes('--json');
const wanted = args.filter((arg) => !arg.startsWith('--'));

const rows: Row[] = [];
for (const file of FILES) {
  if (wanted.length > 0 && !wanted.includes(file)) continue;
  const { measure } = (await import(`./${file}.ts`)) as { measure(): Promise<readonly Row[]> };
  const measured = await measure();
  rows.push(...measured);
  if (!json) for (const row of measured) console.log(line(row));
}
if (json) console.log(JSON.stringify(rows, null, 2));

function line(row: Row): string {
  const mark = row.met === null ? '' : row.met ? 'met' : 'NOT MET';
  return `${row.name.padEnd(76)} ${row.value.toPrecision(4).padStart(9)} ${row.unit.padEnd(8)} ${(row.goal ?? 'reported').padEnd(12)} ${mark}`;
}
