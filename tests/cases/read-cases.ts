import { readFileSync } from 'node:fs';

export interface CaseRow {
  /** Place in the file, from 1. */
  readonly line: number;
  readonly input: string;
  readonly expected: readonly string[];
}

export interface CaseFile {
  /** Lines before the first case: what holds in all of them. */
  readonly preamble: readonly string[];
  readonly cases: readonly { readonly title: string; readonly rows: readonly CaseRow[] }[];
}

/**
 * Reads a file of cases beside this one.
 * `# …` is prose, `--- title` begins a case, and each of its lines is `input → expected`; a line that begins with the
 * arrow adds to what is expected of the one above. Blank lines do not count.
 * Throws where a file has no case, a case no line, or a line no arrow.
 */
export function readCases(name: string): CaseFile {
  return parseCases(name, readFileSync(new URL(name, import.meta.url), 'utf8'));
}

export function parseCases(name: string, text: string): CaseFile {
  const preamble: string[] = [];
  const cases: { readonly title: string; readonly rows: { line: number; input: string; expected: string[] }[] }[] = [];
  for (const [index, line] of text.split('\n').entries()) {
    const current = cases.at(-1);
    if (line.startsWith('#') || line.trim() === '') continue;
    if (line.startsWith('--- ')) {
      cases.push({ title: line.slice(4), rows: [] });
      continue;
    }
    if (!current) {
      preamble.push(line);
      continue;
    }
    const [input, ...expected] = line.split('→').map((part) => part.trim());
    const above = current.rows.at(-1);
    if (input === undefined || expected.length === 0) throw new Error(`${name}:${index + 1} has no arrow`);
    if (input === '' && above) above.expected.push(...expected);
    else current.rows.push({ line: index + 1, input, expected });
  }
  if (cases.length === 0) throw new Error(`${name} has no cases`);
  for (const { title, rows } of cases) if (rows.length === 0) throw new Error(`${name}: "${title}" has no lines`);
  return { preamble, cases };
}
