import { createProcessor } from '@mdx-js/mdx';
import rehypeKatex from 'rehype-katex';
import remarkFrontmatter from 'remark-frontmatter';
import remarkGfm from 'remark-gfm';
import remarkMath from 'remark-math';
import { type Span, span } from '#text';
import { LIMITS } from './limits.ts';
import type { Problems } from './problems.ts';
import type { TagScan } from './scan-tags.ts';

/** A node of the tree that the MDX packages give, as far as it is read here (HAST with MDX nodes). */
export interface TreeNode {
  readonly type: string;
  readonly tagName?: string;
  readonly name?: string | null;
  readonly value?: string;
  readonly properties?: Readonly<Record<string, unknown>>;
  readonly attributes?: readonly TreeAttribute[];
  readonly children?: readonly TreeNode[];
  readonly position?: TreePosition;
}

export interface TreeAttribute {
  readonly type: string;
  readonly name?: string;
  readonly value?: unknown;
  readonly position?: TreePosition;
}

interface TreePosition {
  readonly start: { readonly offset?: number };
  readonly end: { readonly offset?: number };
}

/** Reads a text; null where MDX could not, the problems then say why. */
export type MdxReader = (text: string, scan: TagScan, problems: Problems) => TreeNode | null;

/** What KaTeX says about a formula it cannot read. */
interface MathsMessage {
  readonly place?: unknown;
  readonly cause?: unknown;
}

interface Kept {
  tree: TreeNode | null;
  messages: readonly MathsMessage[];
}

/** A text with many slips of the same kind is told of these at a time. */
const MOST_TRIES = 12;

/**
 * Builds the pipeline: Markdown with tables, footnotes and maths, KaTeX to MathML, and a last step that keeps the tree
 * and leaves an empty one, so that no script is ever made. Cost: about a millisecond to build; keep it.
 */
export function createMdxReader(): MdxReader {
  const kept: Kept = { tree: null, messages: [] };
  const keepTree = () => (tree: TreeNode, file: { readonly messages: readonly MathsMessage[] }) => {
    kept.tree = tree;
    kept.messages = [...file.messages];
    return { type: 'root', children: [] };
  };
  const processor = createProcessor({
    format: 'mdx',
    remarkPlugins: [remarkFrontmatter, remarkGfm, remarkMath],
    // `strict: ignore` keeps KaTeX from writing to the console over an Ω; errors are still thrown.
    rehypePlugins: [[rehypeKatex, { output: 'mathml', trust: false, maxExpand: 100, strict: 'ignore' }], keepTree],
  });
  const readOnce = (text: string, problems: Problems): TreeNode | null => {
    const file = { value: text };
    const page = processor.parse(file) as TreeNode;
    if (!isWithinLimits(page, problems)) return null;
    kept.tree = null;
    processor.runSync(page as Parameters<typeof processor.runSync>[0], file);
    reportMaths(kept.messages, problems);
    return kept.tree;
  };
  return (text, scan, problems) => {
    let masked = withoutModules(text, scan, problems);
    let isWhole = true;
    for (let tries = 0; tries < MOST_TRIES; tries++) {
      try {
        const tree = readOnce(masked, problems);
        return isWhole ? tree : null;
      } catch (thrown) {
        isWhole = false;
        const slip = syntaxProblem(thrown, masked, scan, problems);
        if (slip === null) return null;
        masked = `${masked.slice(0, slip)} ${masked.slice(slip + 1)}`;
      }
    }
    return null;
  };
}

/** Lines that MDX would hand to a script parser are told here and given to it as plain words of the same length. */
function withoutModules(text: string, { plain }: TagScan, problems: Problems): string {
  let masked = text;
  for (const match of plain.matchAll(/(?<=^|\n[ \t]*\r?\n)(import|export)(?=[ {*])[^\r\n]*/g)) {
    const [line, word = ''] = match;
    problems.error('import-export', span(match.index, match.index + line.length), { word });
    masked = masked.slice(0, match.index) + word.toUpperCase() + masked.slice(match.index + word.length);
  }
  return masked;
}

/** Looks at the Markdown tree without recursion before anything recursive does. */
function isWithinLimits(page: TreeNode, problems: Problems): boolean {
  const stack: { readonly node: TreeNode; readonly depth: number }[] = [{ node: page, depth: 0 }];
  let formulas = 0;
  for (let top = stack.pop(); top !== undefined; top = stack.pop()) {
    const { node, depth } = top;
    if (depth > LIMITS.depth) {
      problems.error('nesting-too-deep', spanOf(node), { most: LIMITS.depth });
      return false;
    }
    if (node.type === 'math' || node.type === 'inlineMath') {
      if (++formulas > LIMITS.formulas) {
        problems.error('too-many-formulas', spanOf(node), { most: LIMITS.formulas });
        return false;
      }
      if ((node.value?.length ?? 0) > LIMITS.formula) {
        problems.error('maths-too-long', spanOf(node), { most: LIMITS.formula });
        return false;
      }
    }
    for (const child of [...(node.children ?? [])].reverse()) stack.push({ node: child, depth: depth + 1 });
  }
  return true;
}

/** The place of a node; the whole rest of the page where the packages give none, which no node of a page lacks. */
export function spanOf(node: { readonly position?: TreePosition }): Span {
  const start = node.position?.start.offset ?? 0;
  return span(start, node.position?.end.offset ?? start);
}

function reportMaths(messages: readonly MathsMessage[], problems: Problems): void {
  for (const { place, cause } of messages) {
    const said = cause instanceof Error ? cause.message : '';
    const reason = said.replace(/^KaTeX parse error: /, '').replace(/ at (?:position \d+|end of input).*$/s, '');
    problems.error('maths-syntax', spanOf({ position: place as TreePosition }), { reason });
  }
}

interface SyntaxMessage {
  readonly reason: string;
  readonly ruleId: string;
  readonly offset: number | null;
}

/** Reports what the MDX packages threw, at its true place. Gives the offset of a sign to leave out for another try, or null. */
function syntaxProblem(thrown: unknown, text: string, scan: TagScan, problems: Problems): number | null {
  const message = syntaxMessage(thrown);
  if (message === null) {
    // Only a stack that is too small gets here: the packages throw nothing else on a text.
    problems.error('page-too-complex', span(0, text.length), { reason: thrown instanceof Error ? thrown.name : '' });
    return null;
  }
  const { reason, ruleId, offset } = message;
  if (ruleId === 'end-tag-mismatch' || ruleId === 'unexpected-closing-slash') {
    reportTags(reason, offset, text, scan, problems);
    return null;
  }
  if (ruleId === 'acorn' || reason.includes('expression')) return reportBrace(reason, offset, text, problems);
  const at = Math.min(offset ?? 0, text.length);
  const before = text.lastIndexOf('<', at);
  if (ruleId === 'unexpected-character' && before >= 0 && before === at - 1) {
    const isComment = text.startsWith('<!--', before);
    const found = text.slice(before, before + 2);
    problems.error(isComment ? 'html-comment' : 'less-than-sign', span(before, at + 1), { found });
    return before;
  }
  reportTag(reason, ruleId, at, Math.max(before, 0), text, problems);
  return null;
}

function syntaxMessage(thrown: unknown): SyntaxMessage | null {
  if (!(thrown instanceof Error) || !('reason' in thrown)) return null;
  const { reason, ruleId, place } = thrown as { reason: unknown; ruleId?: unknown; place?: unknown };
  const at = place as { offset?: number; start?: { offset?: number } } | undefined;
  return { reason: String(reason), ruleId: String(ruleId), offset: at?.offset ?? at?.start?.offset ?? null };
}

/** A brace outside maths and code. The one that opened is the last before the place that nothing has closed. */
function reportBrace(reason: string, offset: number | null, text: string, problems: Problems): number | null {
  const end = Math.min(offset ?? text.length, text.length);
  const open = unclosedBrace(text, end);
  if (open === null) {
    problems.error('mdx-syntax', span(Math.max(end - 1, 0), end), { reason });
    return null;
  }
  const isAttribute = /[=\s]$/.test(text.slice(0, open)) && text.lastIndexOf('<', open) > text.lastIndexOf('>', open);
  const isOpen = reason.includes('end of file') || reason.includes('lazy line');
  const close = text.indexOf('}', open);
  const place = isOpen || close < 0 ? span(open, open + 1) : span(open, close + 1);
  problems.error(isAttribute ? 'attribute-expression' : isOpen ? 'open-brace' : 'expression', place, { name: '' });
  return isAttribute ? null : open;
}

function unclosedBrace(text: string, end: number): number | null {
  let depth = 0;
  for (let at = end - 1; at >= 0; at--) {
    const sign = text.charAt(at);
    if (sign === '}') depth++;
    else if (sign === '{' && text.charAt(at - 1) !== '\\') {
      if (depth === 0) return at;
      depth--;
    }
  }
  return null;
}

/** The place of an unclosed tag stands only in the sentence, as `(3:1-3:7)`. */
function reportTags(reason: string, offset: number | null, text: string, scan: TagScan, problems: Problems): void {
  const closing = /^Unexpected closing tag `<\/([^`]*)>`|^Expected the closing tag `<\/([^`]*)>`/.exec(reason);
  const opened = /closing tag for `<([^`]*)>` \((\d+):(\d+)-(\d+):(\d+)\)/.exec(reason);
  const opening = opened === null ? null : placeOfLines(text, opened.slice(2).map(Number));
  if (closing !== null && offset !== null) {
    const found = closing[1] ?? closing[2] ?? '';
    const place = span(offset, Math.min(offset + found.length + 3, text.length));
    if (opened === null) {
      problems.error('closing-tag-apart', place, { name: found });
      return;
    }
    problems.error('closing-tag-mismatch', place, { found, expected: opened[1] ?? '' });
    if (opening !== null) problems.error('unclosed-element', opening, { name: opened[1] ?? '' });
    return;
  }
  if (opening !== null) {
    const code = reason.includes('before the end of') ? 'element-across-blocks' : 'unclosed-element';
    problems.error(code, opening, { name: opened?.[1] ?? '' });
    return;
  }
  const stray = scan.tags.find((tag) => offset !== null && tag.span.start <= offset && offset < tag.span.end);
  if (stray) {
    problems.error('closing-tag-alone', stray.span, { name: stray.name });
    return;
  }
  const at = offset ?? 0;
  problems.error('mdx-syntax', span(at, Math.min(at + 1, text.length)), { reason });
}

function placeOfLines(text: string, [line = 1, column = 1, endLine = 1, endColumn = 1]: readonly number[]): Span {
  return span(offsetOf(text, line, column), offsetOf(text, endLine, endColumn));
}

function offsetOf(text: string, line: number, column: number): number {
  const ends = /\r\n|\n|\r/g;
  for (let passed = 1; passed < line; passed++) ends.exec(text);
  return Math.min(ends.lastIndex + column - 1, text.length);
}

/** Something inside a tag is not as it must be. */
function reportTag(reason: string, rule: string, at: number, open: number, text: string, problems: Problems): void {
  const name = /^<\/?([A-Za-z][\w.:-]*)/.exec(text.slice(open, open + 60))?.[1] ?? '';
  const found = text.slice(at, at + 1);
  if (rule === 'unexpected-eof') {
    problems.error('unfinished-tag', span(open, open + 1 + name.length), { name });
    return;
  }
  if (/^<[a-z]+:$/i.test(text.slice(open, at))) {
    problems.error('pointed-link', span(open, at + 1));
    return;
  }
  const place = span(at, Math.min(at + 1, text.length));
  if (reason.includes('before attribute value')) {
    problems.error('attribute-unquoted', place, { found });
    return;
  }
  problems.error('tag-syntax', place, { name, found });
}
