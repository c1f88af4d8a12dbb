import { nearestName } from '#formula';
import { type Span, span, spanFrom } from '#text';
import { ELEMENTS, isElementName } from './elements.ts';
import { LIMITS } from './limits.ts';
import { spanOf, type TreeAttribute, type TreeNode } from './parse-mdx.ts';
import type { Problems } from './problems.ts';
import type { AttributeText, Tag } from './scan-tags.ts';

/** An element of the language as it stands in the text. */
export interface ElementBlock {
  readonly name: string;
  readonly span: Span;
  readonly nameSpan: Span;
  readonly attributes: readonly AttributeText[];
  /** Names of attributes that stand there but were refused: they are not missing. */
  readonly refused: readonly string[];
  /** The elements directly inside. */
  readonly elements: readonly ElementBlock[];
  /** Everything inside; empty where the MDX parser did not get that far. */
  readonly content: readonly PageNode[];
  /** `text`: it stands in a sentence; `nested`: in a list or a quotation. */
  readonly stands: 'page' | 'text' | 'nested';
}

/** The page with every place as a span; nothing below this file looks at the tree of the MDX packages. */
export type PageNode =
  | { readonly kind: 'text'; readonly value: string; readonly span: Span | null }
  | {
      readonly kind: 'tag';
      readonly tagName: string;
      readonly properties: Readonly<Record<string, unknown>>;
      readonly children: readonly PageNode[];
      readonly span: Span | null;
    }
  | { readonly kind: 'element'; readonly element: ElementBlock };

/** Where a node stands: what decides how its places are read. */
interface Place {
  readonly source: string;
  readonly problems: Problems;
  readonly stands: ElementBlock['stands'];
  /** Inside a quotation the marks at the line starts are not part of a value. */
  readonly isQuoted: boolean;
}

/** Turns the tree into page nodes and tells everything that may not stand in a recipe: expressions, spreads, HTML. */
export function readBlocks(tree: TreeNode, source: string, problems: Problems): readonly PageNode[] {
  return readChildren(tree, { source, problems, stands: 'page', isQuoted: false });
}

function readChildren(parent: TreeNode, place: Place): readonly PageNode[] {
  const nodes: PageNode[] = [];
  for (const child of parent.children ?? []) {
    const node = readNode(child, place);
    if (node !== null) nodes.push(node);
  }
  return nodes;
}

const NESTING = new Set(['li', 'blockquote', 'td', 'th', 'section']);
const SENTENCES = new Set(['p', 'h1', 'h2', 'h3', 'h4', 'h5', 'h6', 'em', 'strong', 'del', 'a']);

function readNode(node: TreeNode, place: Place): PageNode | null {
  const { problems } = place;
  switch (node.type) {
    case 'text':
      return { kind: 'text', value: node.value ?? '', span: node.position ? spanOf(node) : null };
    case 'element': {
      const tagName = node.tagName ?? '';
      const stands = SENTENCES.has(tagName) ? 'text' : NESTING.has(tagName) ? 'nested' : place.stands;
      const within: Place = { ...place, stands, isQuoted: place.isQuoted || tagName === 'blockquote' };
      const at = node.position ? spanOf(node) : null;
      return {
        kind: 'tag',
        tagName,
        properties: node.properties ?? {},
        children: readChildren(node, within),
        span: at,
      };
    }
    case 'mdxJsxFlowElement':
    case 'mdxJsxTextElement':
      return readElement(node, place);
    case 'mdxFlowExpression':
    case 'mdxTextExpression':
      if (!isComment(node.value ?? '')) problems.error('expression', spanOf(node));
      return null;
    case 'mdxjsEsm':
      problems.error('import-export', spanOf(node), { word: (node.value ?? '').slice(0, 6) });
      return null;
    default:
      // Front matter, and nothing else: the pipeline gives no other node.
      return null;
  }
}

/** `{/* … *​/}` and nothing besides. */
function isComment(value: string): boolean {
  return /^\s*(?:\/\*(?:[^*]|\*(?!\/))*\*\/\s*)+$/.test(value);
}

function readElement(node: TreeNode, place: Place): PageNode | null {
  const at = spanOf(node);
  const name = node.name ?? '';
  const nameSpan = span(at.start + 1, at.start + 1 + name.length);
  const { problems } = place;
  if (!isElementName(name)) {
    if (name === '') problems.error('fragment', nameSpan);
    else if (name.includes('.') || name.includes(':')) problems.error('member-element', nameSpan, { name });
    else if (/^[a-z]/.test(name)) problems.error('html-element', nameSpan, { name });
    else problems.error('unknown-element', nameSpan, { name, near: nearestElement(name) });
    // What stands inside is looked at all the same, for its own mistakes.
    readChildren(node, place);
    return null;
  }
  const attributes: AttributeText[] = [];
  const refused: string[] = [];
  for (const attribute of node.attributes ?? []) {
    const read = readAttribute(attribute, place);
    if (read !== null) attributes.push(read);
    else refused.push(attribute.name ?? '');
  }
  // A line that holds an element alone is no sentence, though its node may be one of text.
  const stands = node.type === 'mdxJsxTextElement' ? 'text' : place.stands;
  const inner: Place = { ...place, stands: ELEMENTS[name].holds === 'prose' ? 'nested' : 'page' };
  const content = readChildren(node, inner);
  const elements = elementsIn(content);
  return { kind: 'element', element: { name, span: at, nameSpan, attributes, refused, elements, content, stands } };
}

/** Elements directly inside, also those that share a line and so stand in a paragraph. */
function elementsIn(content: readonly PageNode[]): readonly ElementBlock[] {
  return content.flatMap((node) => {
    if (node.kind === 'element') return [node.element];
    return node.kind === 'tag' && node.tagName === 'p' ? elementsIn(node.children) : [];
  });
}

function readAttribute(attribute: TreeAttribute, { source, problems, isQuoted }: Place): AttributeText | null {
  const at = spanOf(attribute);
  if (attribute.type !== 'mdxJsxAttribute') {
    problems.error('spread-attribute', at);
    return null;
  }
  const name = attribute.name ?? '';
  const nameSpan = span(at.start, at.start + name.length);
  if (typeof attribute.value !== 'string') {
    const isBare = attribute.value === null || attribute.value === undefined;
    problems.error(isBare ? 'attribute-without-value' : 'attribute-expression', at, { name });
    return null;
  }
  const typed = source.slice(at.start, at.end);
  const equals = typed.indexOf('=');
  const opening = equals < 0 ? -1 : typed.slice(equals).search(/["']/);
  if (opening < 0) {
    problems.error('attribute-without-value', at, { name });
    return null;
  }
  const value = span(at.start + equals + opening + 1, at.end - 1);
  if (isQuoted && /[\r\n]/.test(source.slice(value.start, value.end))) {
    problems.error('attribute-over-lines', at, { name });
    return null;
  }
  return { name, span: at, nameSpan, value, text: attribute.value };
}

/** Puts tags that were found without the MDX parser into each other. What is not closed ends where its parent ends. */
export function blocksFromTags(tags: readonly Tag[]): readonly ElementBlock[] {
  const top: ElementBlock[] = [];
  const open: { readonly tag: Tag; readonly elements: ElementBlock[] }[] = [];
  const close = (end: Span): void => {
    const last = open.pop();
    if (last) (open.at(-1)?.elements ?? top).push(blockOf(last.tag, last.elements, spanFrom(last.tag.span, end)));
  };
  for (const tag of tags) {
    // Nested deeper than a page may be, which is told elsewhere: what follows is put beside, not inside.
    if (tag.kind === 'open' && open.length >= LIMITS.depth) close(tag.span);
    if (tag.kind === 'open') open.push({ tag, elements: [] });
    else if (tag.kind === 'empty') (open.at(-1)?.elements ?? top).push(blockOf(tag, [], tag.span));
    else {
      const at = open.findLastIndex((opened) => opened.tag.name === tag.name);
      while (at >= 0 && open.length > at) close(tag.span);
    }
  }
  while (open.length > 0) close(open.at(-1)?.elements.at(-1)?.span ?? open.at(-1)?.tag.span ?? span(0, 0));
  return top;
}

function blockOf({ name, nameSpan, attributes }: Tag, elements: readonly ElementBlock[], at: Span): ElementBlock {
  return { name, nameSpan, attributes, refused: [], elements, content: [], stands: 'page', span: at };
}

/** The element that a misspelt name most likely means; '' where none is near. */
export function nearestElement(name: string): string {
  const names = Object.keys(ELEMENTS);
  const same = names.find((known) => known.toLowerCase() === name.toLowerCase());
  return same ?? nearestName(name, names) ?? '';
}
