import { readFileSync } from 'node:fs';

export interface PageCase {
  readonly title: string;
  /** Line of the title in the file, from 1. */
  readonly line: number;
  readonly text: string;
  readonly expected: readonly ExpectedProblem[];
}

export interface ExpectedProblem {
  readonly severity: string;
  readonly code: string;
  readonly start: number;
  readonly end: number;
}

/**
 * Reads a file of pages beside this one. Lines before the first case are prose.
 * `=== title` begins a case; its page runs to the first `=> …` and is taken as it is, but that ⟦ and ⟧ are left out and
 * mark the places of what is expected, in the order of the text. `=> code` or `=> warning code` names one problem for each
 * mark; `=> ok` says that there is none. A page that does not start with --- gets the front matter given here.
 */
export function readPages(name: string, frontMatter: string, lineEnd = '\n'): readonly PageCase[] {
  const file = readFileSync(new URL(name, import.meta.url), 'utf8');
  const cases = file.split(/^=== /m).slice(1);
  if (cases.length === 0) throw new Error(`${name} has no cases`);
  let line = file.split(/^=== /m)[0]?.split('\n').length ?? 0;
  return cases.map((source) => {
    const at = line;
    line += source.split('\n').length - 1;
    return readPage(source, `${name}:${at}`, at, frontMatter, lineEnd);
  });
}

function readPage(source: string, place: string, line: number, frontMatter: string, lineEnd: string): PageCase {
  const [title = '', ...lines] = source.split('\n');
  const first = lines.findIndex((text) => text.startsWith('=> '));
  if (first < 0) throw new Error(`${place} expects nothing`);
  const typed = lines.slice(0, first).join(lineEnd);
  const page = (/^⟦?---/.test(typed) ? '' : frontMatter.replaceAll('\n', lineEnd)) + typed;
  const marks: { start: number; end: number }[] = [];
  let text = '';
  for (const piece of page.split(/([⟦⟧])/)) {
    if (piece === '⟦') marks.push({ start: text.length, end: -1 });
    else if (piece === '⟧') {
      const open = marks.findLast((mark) => mark.end < 0);
      if (!open) throw new Error(`${place} has a ⟧ without ⟦`);
      open.end = text.length;
    } else text += piece;
  }
  const words = lines.slice(first).filter((expected) => expected.startsWith('=> '));
  if (words.length === 1 && words[0] === '=> ok') return { title, line, text, expected: [] };
  if (words.length !== marks.length) throw new Error(`${place} has ${marks.length} marks for ${words.length} problems`);
  const expected = words.map((word, index) => {
    const [code = '', severity = 'error'] = word.slice(3).split(' ').reverse();
    return { severity, code, start: marks[index]?.start ?? -1, end: marks[index]?.end ?? -1 };
  });
  return { title, line, text, expected };
}
