import { type Span, span } from '#text';
import type { Problems } from './problems.ts';
import type { TagScan } from './scan-tags.ts';

/**
 * What a text may hold at most, so that compiling stays within a second or so even for a hostile one.
 * Source: the recipe language, sections 0 and 2. From `markers` on: measured on the MDX package, whose cost grows with the
 * square of them (25,000 list items took 9 s, 2,000 marks of emphasis in one paragraph 0.4 s).
 */
export const LIMITS = {
  characters: 100_000,
  line: 20_000,
  depth: 32,
  elements: 2000,
  formulas: 500,
  formula: 2000,
  frontMatter: 10_000,
  address: 2000,
  markers: 20,
  allMarkers: 1500,
  brackets: 400,
  marksOfBlock: 2000,
  allMarks: 10_000,
  cells: 10_000,
  blocks: 5000,
  braces: 200,
} as const;

const MARKER = /[ \t]*(?:>|[-*+](?=[ \t])|\d{1,9}[.)](?=[ \t]))/y;
const LINE = /[^\r\n]*/y;
const BRACKET = /[[\](){}<>]/g;
const MARK = /[*_~[\]$`|]/g;
/** Inline code and maths, as far as they can be told without parsing. */
const QUOTED = /(`{1,3}|\$\$?)(?:(?!\1)[\s\S]){1,2000}?\1/g;

/** Looks for what nothing may be run on. True if the text may be scanned. */
export function checkSize(text: string, problems: Problems): boolean {
  if (text.length > LIMITS.characters) {
    problems.error('text-too-long', span(LIMITS.characters, text.length), { most: LIMITS.characters });
    return false;
  }
  if (text.charCodeAt(0) === 0xfeff) {
    problems.error('byte-order-mark', span(0, 1));
    return false;
  }
  return true;
}

/** Looks for what the MDX parser must not see. True if it may see the text. Cost: a few passes. */
export function checkLimits(text: string, scan: TagScan, problems: Problems): boolean {
  const before = problems.list.length;
  checkTags(scan, problems);
  const block = { start: 0, marks: 0, lines: 0, pipes: 0 };
  let markers = 0;
  let marks = 0;
  let blocks = 0;
  for (let at = 0; at <= text.length; ) {
    LINE.lastIndex = at;
    const length = LINE.exec(text)?.[0].length ?? 0;
    const line = scan.plain.slice(at, at + length);
    const place = span(at, at + length);
    markers += checkLine(line, place, problems);
    if (text.slice(at, at + length).trim() === '') Object.assign(block, { start: at, marks: 0, lines: 0, pipes: 0 });
    else {
      if (block.lines === 0 && ++blocks > LIMITS.blocks) {
        problems.error('too-many-blocks', place, { most: LIMITS.blocks });
        return false;
      }
      const found = line.match(MARK) ?? [];
      block.marks += found.length;
      marks += found.length;
      block.lines++;
      block.pipes = Math.max(block.pipes, found.filter((mark) => mark === '|').length);
    }
    const isOver = block.marks > LIMITS.marksOfBlock || block.pipes * block.lines > LIMITS.cells;
    if (isOver || markers > LIMITS.allMarkers || marks > LIMITS.allMarks) {
      problems.error('too-many-marks', place);
      return false;
    }
    at += length + 1;
  }
  checkBraces(scan.plain, problems);
  return problems.list.length === before;
}

function checkTags({ tags }: TagScan, problems: Problems): void {
  let depth = 0;
  let count = 0;
  for (const tag of tags) {
    if (tag.kind === 'close') {
      depth = Math.max(0, depth - 1);
      continue;
    }
    count++;
    if (tag.kind === 'open') depth++;
    if (depth > LIMITS.depth) {
      problems.error('nesting-too-deep', tag.span, { most: LIMITS.depth });
      return;
    }
    if (count > LIMITS.elements) {
      problems.error('too-many-elements', tag.span, { most: LIMITS.elements });
      return;
    }
  }
}

/** Gives the number of list and quote markers that the line starts with. */
function checkLine(line: string, place: Span, problems: Problems): number {
  if (line.length > LIMITS.line) problems.error('line-too-long', place, { most: LIMITS.line, length: line.length });
  let markers = 0;
  MARKER.lastIndex = 0;
  while (MARKER.test(line)) markers++;
  if (markers > LIMITS.markers) problems.error('too-many-markers', place, { most: LIMITS.markers, found: markers });
  const brackets = line.length > LIMITS.brackets ? (line.match(BRACKET)?.length ?? 0) : 0;
  if (brackets > LIMITS.brackets) {
    problems.error('too-many-brackets', place, { most: LIMITS.brackets, found: brackets });
  }
  return markers;
}

/** The MDX parser tries a script parser at every brace that closes, over all that stands since the one that opened. */
function checkBraces(plain: string, problems: Problems): void {
  const prose = plain.replace(QUOTED, (quoted) => ' '.repeat(quoted.length));
  let closing = 0;
  for (let at = prose.indexOf('}'); at >= 0; at = prose.indexOf('}', at + 1)) {
    if (++closing > LIMITS.braces) {
      problems.error('too-many-braces', span(at, at + 1), { most: LIMITS.braces });
      return;
    }
  }
}
