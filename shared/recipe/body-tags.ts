/**
 * What may stand in a page: tags, and for each the properties that are kept (HAST names). Everything else is dropped.
 * Source: HTML as Markdown makes it; MathML Core as KaTeX writes it, without links, actions and annotations.
 */
const PLAIN: readonly string[] = [];

export const HTML_TAGS: ReadonlyMap<string, readonly string[]> = new Map([
  ...['p', 'h1', 'h3', 'h4', 'h5', 'h6', 'blockquote', 'pre', 'em', 'strong', 'del', 'br', 'hr', 'sup', 'span'].map(
    (tag) => [tag, PLAIN] as const,
  ),
  ...['table', 'thead', 'tbody', 'tr'].map((tag) => [tag, PLAIN] as const),
  ['h2', ['id', 'className']],
  ['ul', ['className']],
  ['ol', ['start', 'className']],
  ['li', ['id', 'className']],
  ['code', ['className']],
  ['a', ['href', 'id', 'className', 'dataFootnoteRef', 'dataFootnoteBackref', 'ariaDescribedBy', 'ariaLabel']],
  ['th', ['align']],
  ['td', ['align']],
  ['section', ['className', 'dataFootnotes']],
  ['input', ['type', 'checked', 'disabled']],
]);

const MATHML_TAGS: ReadonlySet<string> = new Set([
  'math',
  'mrow',
  'mi',
  'mo',
  'mn',
  'mtext',
  'mspace',
  'mfrac',
  'msqrt',
  'mroot',
  'msub',
  'msup',
  'msubsup',
  'munder',
  'mover',
  'munderover',
  'mtable',
  'mtr',
  'mtd',
  'mpadded',
  'mstyle',
  'mphantom',
  'menclose',
]);

const MATHML_PROPERTIES: readonly string[] = [
  'display',
  'mathvariant',
  'stretchy',
  'fence',
  'separator',
  'lspace',
  'rspace',
  'minsize',
  'maxsize',
  'movablelimits',
  'accent',
  'accentunder',
  'linethickness',
  'displaystyle',
  'scriptlevel',
  'columnalign',
  'columnlines',
  'columnspacing',
  'rowlines',
  'rowspacing',
  'width',
  'height',
  'depth',
  'voffset',
  'notation',
  'largeop',
  'symmetric',
  'form',
];

/** The properties that a tag may keep; null where the tag itself may not stand. */
export function keptProperties(tagName: string): readonly string[] | null {
  if (MATHML_TAGS.has(tagName)) return MATHML_PROPERTIES;
  return HTML_TAGS.get(tagName) ?? null;
}

const SAFE = /^[^<>"'`\p{Cc}]*$/u;

/** A value as the document holds it, or null for one that no kept property has. */
export function keptValue(value: unknown): string | number | boolean | readonly (string | number)[] | null {
  if (typeof value === 'string') return SAFE.test(value) ? value : null;
  if (typeof value === 'number' || typeof value === 'boolean') return value;
  if (!Array.isArray(value)) return null;
  const items: readonly unknown[] = value;
  const kept = items.filter((item) => typeof item === 'string' || typeof item === 'number');
  return kept.length === items.length && kept.every((item) => SAFE.test(String(item))) ? kept : null;
}
