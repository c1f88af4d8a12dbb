import type { Span } from '#text';
import { type Attributes, readAttributes, readWhole } from './attributes.ts';
import type { ElementBlock, PageNode } from './blocks.ts';
import { keptProperties, keptValue } from './body-tags.ts';
import type { BodyElement, BodyNode, RecipeDocument } from './document.ts';
import { ELEMENTS, isElementName } from './elements.ts';
import { HeadingIds } from './heading-ids.ts';
import { type RecipeLink, readAddress } from './links.ts';
import type { Problems } from './problems.ts';

/** `<Value of at/>` as written; whether the name exists is known when the calculators are built. */
export interface ValueLink {
  readonly of: string;
  readonly span: Span;
}

export interface Body {
  readonly nodes: readonly BodyNode[];
  readonly headings: RecipeDocument['headings'];
  readonly links: readonly RecipeLink[];
  readonly values: readonly ValueLink[];
  readonly cautions: readonly { readonly kind: string; readonly span: Span }[];
  /** Elements that stand on the page itself, in the order of the text. */
  readonly elements: readonly ElementBlock[];
}

interface Writer {
  readonly problems: Problems;
  readonly ids: HeadingIds;
  readonly headings: RecipeDocument['headings'][number][];
  readonly links: RecipeLink[];
  readonly inPage: { readonly id: string; readonly span: Span }[];
  readonly values: ValueLink[];
  readonly cautions: { readonly kind: string; readonly span: Span }[];
  readonly elements: ElementBlock[];
  /** Nodes and characters of addresses so far: a few signs may stand for a large table. */
  size: number;
}

/** What a page may come to; the largest of honest pages has a tenth of it. Common practice, no source. */
const MOST_SIZE = 400_000;

/** Writes the page as data: only tags and properties of a fixed list, links that may be followed, and the recipe's own elements. */
export function writeBody(page: readonly PageNode[], problems: Problems): Body {
  const writer: Writer = {
    problems,
    ids: new HeadingIds(),
    headings: [],
    links: [],
    inPage: [],
    values: [],
    cautions: [],
    elements: [],
    size: 0,
  };
  const nodes = writeNodes(writer, page);
  for (const { id, span } of writer.inPage) {
    if (!writer.ids.has(id)) problems.error('link-target-missing', span, { id, known: writer.ids.all() });
  }
  if (writer.size > MOST_SIZE) problems.error('page-too-large', pageSpan(page));
  const { headings, links, values, cautions, elements } = writer;
  return { nodes, headings, links, values, cautions, elements };
}

function pageSpan(page: readonly PageNode[]): Span {
  const first = page.find((node) => node.kind === 'tag' && node.span !== null);
  return (first?.kind === 'tag' && first.span) || { start: 0, end: 0 };
}

function writeNodes(writer: Writer, nodes: readonly PageNode[]): readonly BodyNode[] {
  if (writer.size > MOST_SIZE) return [];
  return nodes.flatMap((node) => writeNode(writer, node));
}

function writeNode(writer: Writer, node: PageNode): readonly BodyNode[] {
  switch (node.kind) {
    case 'text':
      return [{ type: 'text', value: node.value }];
    case 'element':
      return writeElement(writer, node.element);
    case 'tag':
      return writeTag(writer, node);
  }
}

type TagNode = Extract<PageNode, { readonly kind: 'tag' }>;

function writeTag(writer: Writer, node: TagNode): readonly BodyNode[] {
  const { tagName, span } = node;
  const href = node.properties.href;
  writer.size += 1 + (typeof href === 'string' ? href.length : 0);
  if (writer.size > MOST_SIZE) return [];
  // KaTeX wraps the maths in `semantics` and repeats its source in an annotation.
  if (tagName === 'semantics') return writeNodes(writer, node.children.slice(0, 1));
  if (tagName === 'img') {
    writer.problems.error('image-refused', span ?? { start: 0, end: 0 });
    return [];
  }
  const kept = keptProperties(tagName);
  if (kept === null) return writeNodes(writer, node.children);
  const properties: Record<string, NonNullable<ReturnType<typeof keptValue>>> = {};
  for (const name of kept) {
    const value = Object.hasOwn(node.properties, name) ? keptValue(node.properties[name]) : null;
    if (value !== null) properties[name] = value;
  }
  if (tagName === 'a' && !isLinkKept(writer, node)) return writeNodes(writer, node.children);
  if (tagName === 'input' && properties.type !== 'checkbox') return [];
  if (/^h[1-6]$/.test(tagName)) return writeHeading(writer, node, properties);
  return [elementOf(tagName, properties, writeNodes(writer, node.children), span)];
}

function elementOf(
  tagName: string,
  properties: BodyElement['properties'],
  children: readonly BodyNode[],
  span: Span | null,
): BodyElement {
  return { type: 'element', tagName, properties, children, ...(span === null ? {} : { span }) };
}

/** Footnote marks are the pipeline's own; every other address must be one that may be followed. */
function isLinkKept(writer: Writer, { properties, span }: TagNode): boolean {
  if (properties.dataFootnoteRef !== undefined || properties.dataFootnoteBackref !== undefined) return true;
  const href = typeof properties.href === 'string' ? properties.href : '';
  const address = readAddress(href);
  const at = span ?? { start: 0, end: 0 };
  if (address === null) {
    writer.problems.error('link-refused', at, { href: href.slice(0, 80) });
    return false;
  }
  if (address.kind === 'recipe') writer.links.push({ slug: address.slug, span: at });
  if (address.kind === 'in-page') writer.inPage.push({ id: address.id, span: at });
  return true;
}

/** The page has one heading of the first rank, its title: `#` counts as `##`. */
function writeHeading(writer: Writer, node: TagNode, properties: BodyElement['properties']): readonly BodyNode[] {
  const children = writeNodes(writer, node.children);
  const isFootnotes = node.properties.id === 'footnote-label';
  if (isFootnotes) return [elementOf(node.tagName, properties, children, null)];
  const depth = Math.max(2, Number(node.tagName.slice(1)));
  const text = plainText(children).trim();
  const id = writer.ids.take(text);
  writer.headings.push({ id, depth, text });
  return [elementOf(`h${depth}`, { id }, children, node.span)];
}

/** The words of some nodes, maths included as its signs. */
export function plainText(nodes: readonly BodyNode[]): string {
  return nodes.map((node) => (node.type === 'text' ? node.value : plainText(node.children))).join('');
}

function writeElement(writer: Writer, block: ElementBlock): readonly BodyNode[] {
  const { problems } = writer;
  if (!isElementName(block.name)) return [];
  const { inside, holds } = ELEMENTS[block.name];
  if (inside !== 'page' && inside !== 'text') {
    problems.error('misplaced-element', block.nameSpan, { name: block.name, inside });
    return [];
  }
  if (inside === 'page' && block.stands !== 'page') {
    problems.error('element-needs-lines', block.nameSpan, { name: block.name, stands: block.stands });
  }
  if (holds === 'nothing') reportInside(block, problems);
  writer.elements.push(block);
  if (holds === 'elements') return block.name === 'Calculator' ? writeCalculator(block) : noElement(block, problems);
  const attributes = readAttributes(block, problems);
  switch (block.name) {
    case 'Value':
      return writeValue(writer, block, attributes);
    case 'Recipe':
      return writeRecipe(writer, block, attributes);
    case 'Note':
    case 'Caution':
      return writeAside(writer, block, attributes);
    default:
      return [];
  }
}

/** A later release draws it; what it holds is checked against the table alone. */
function noElement(block: ElementBlock, problems: Problems): readonly BodyNode[] {
  readAttributes(block, problems);
  for (const child of block.elements) {
    const { inside } = isElementName(child.name) ? ELEMENTS[child.name] : { inside: block.name };
    if (inside === block.name) readAttributes(child, problems, true);
    else problems.error('misplaced-element', child.nameSpan, { name: child.name, inside });
  }
  return [];
}

function writeCalculator(block: ElementBlock): readonly BodyNode[] {
  const id = block.attributes.find((attribute) => attribute.name === 'id')?.text ?? '';
  return [elementOf('recipe-calculator', { id }, [], block.span)];
}

function writeValue(writer: Writer, block: ElementBlock, attributes: Attributes): readonly BodyNode[] {
  const of = attributes.get('of');
  const at = attributes.get('at');
  if (of === undefined) return [];
  writer.values.push({ of: of.text, span: of.value });
  if (at?.text.startsWith('worst')) {
    writer.problems.error('not-available-yet', at.value, { what: `at="${at.text}"` });
    return [];
  }
  const properties = { of: of.text, ...(at === undefined ? {} : { at: at.text }) };
  return [elementOf('recipe-value', properties, [], block.span)];
}

function writeRecipe(writer: Writer, block: ElementBlock, attributes: Attributes): readonly BodyNode[] {
  const slug = attributes.get('slug');
  const typed = attributes.get('version');
  if (slug === undefined) return [];
  const version = typed === undefined ? null : readWhole(typed, 1, 1_000_000, writer.problems);
  const properties = { slug: slug.text, ...(version === null ? {} : { version }) };
  writer.links.push({ ...properties, span: slug.value });
  return [elementOf('recipe-link', properties, [], block.span)];
}

function writeAside(writer: Writer, block: ElementBlock, attributes: Attributes): readonly BodyNode[] {
  const kind = attributes.get('kind');
  if (block.name === 'Caution' && kind !== undefined) writer.cautions.push({ kind: kind.text, span: kind.value });
  const written = writeNodes(writer, block.content);
  if (plainText(written).trim() === '') writer.problems.error('empty-element', block.nameSpan, { name: block.name });
  const isSentence = written.every((node) => node.type === 'text' || INLINE.has(node.tagName));
  const children = isSentence ? [elementOf('p', {}, written, null)] : written;
  const properties = kind === undefined ? {} : { kind: kind.text };
  return [elementOf(block.name === 'Note' ? 'recipe-note' : 'recipe-caution', properties, children, block.span)];
}

const INLINE = new Set([
  'em',
  'strong',
  'del',
  'a',
  'code',
  'span',
  'sup',
  'br',
  'math',
  'recipe-value',
  'recipe-link',
]);

/** Says so where something stands between the tags of an element that holds nothing. */
export function reportInside(block: ElementBlock, problems: Problems): void {
  const [inner] = block.content.filter((node) => node.kind !== 'text' || node.value.trim() !== '');
  if (inner === undefined) return;
  const at = inner.kind === 'element' ? inner.element.nameSpan : inner.span;
  problems.error('nothing-inside', at ?? block.nameSpan, { name: block.name });
}
