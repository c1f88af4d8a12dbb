import { type Span, span } from '#text';

/** An attribute as typed. `value` lies between the quotes; `text` is what it says, entities read. */
export interface AttributeText {
  readonly name: string;
  readonly span: Span;
  readonly nameSpan: Span;
  readonly value: Span;
  readonly text: string;
}

export interface Tag {
  readonly kind: 'open' | 'close' | 'empty';
  readonly name: string;
  readonly span: Span;
  readonly nameSpan: Span;
  readonly attributes: readonly AttributeText[];
}

export interface TagScan {
  readonly tags: readonly Tag[];
  /** The text with fenced code and tags blanked out; offsets and line ends stay. */
  readonly plain: string;
}

const NEXT = /^[ \t]*(`{3,}|~{3,})[^\r\n]*|<(\/?)([A-Za-z][\w.:-]*)/gm;
const ATTRIBUTE = /\s+([A-Za-z_][\w:.-]*)\s*=\s*("[^"]*"|'[^']*')/y;
const TAG_END = /\s*(\/?)>/y;
/** More than any element has; a tag of thousands would cost the MDX parser seconds. */
const MOST_ATTRIBUTES = 100;

/**
 * Finds tags without the MDX parser, for texts that it cannot read and to bound what it is given. A tag with anything but
 * quoted attributes is not found. Never throws. Cost: linear.
 */
export function scanTags(text: string): TagScan {
  const tags: Tag[] = [];
  const blanks: Span[] = [];
  NEXT.lastIndex = 0;
  for (let match = NEXT.exec(text); match !== null; match = NEXT.exec(text)) {
    const [all, fence, slash, name] = match;
    if (fence !== undefined) {
      const end = endOfFence(text, match.index + all.length, fence);
      blanks.push(span(match.index, end));
      NEXT.lastIndex = end;
    } else if (name !== undefined) {
      const tag = tagAt(text, match.index, slash === '/', name);
      if (tag === null) continue;
      tags.push(tag);
      blanks.push(tag.span);
      NEXT.lastIndex = tag.span.end;
    }
  }
  return { tags, plain: blanked(text, blanks) };
}

function endOfFence(text: string, from: number, fence: string): number {
  const closing = new RegExp(`^[ \\t>]*${fence.charAt(0)}{${fence.length},}[ \\t]*$`, 'gm');
  closing.lastIndex = from;
  return closing.exec(text) === null ? text.length : closing.lastIndex;
}

function tagAt(text: string, start: number, isClosing: boolean, name: string): Tag | null {
  const nameStart = start + (isClosing ? 2 : 1);
  const attributes: AttributeText[] = [];
  let at = nameStart + name.length;
  for (;;) {
    ATTRIBUTE.lastIndex = at;
    const match = isClosing ? null : ATTRIBUTE.exec(text);
    if (match === null || attributes.length >= MOST_ATTRIBUTES) break;
    const [all, attributeName = '', quoted = ''] = match;
    const end = at + all.length;
    const from = at + all.indexOf(attributeName);
    const value = span(end - quoted.length + 1, end - 1);
    attributes.push({
      name: attributeName,
      span: span(from, end),
      nameSpan: span(from, from + attributeName.length),
      value,
      text: decoded(text.slice(value.start, value.end)),
    });
    at = end;
  }
  TAG_END.lastIndex = at;
  const end = TAG_END.exec(text);
  if (end === null) return null;
  return {
    kind: isClosing ? 'close' : end[1] === '/' ? 'empty' : 'open',
    name,
    span: span(start, at + end[0].length),
    nameSpan: span(nameStart, nameStart + name.length),
    attributes,
  };
}

const ENTITIES: ReadonlyMap<string, string> = new Map([
  ['&lt;', '<'],
  ['&gt;', '>'],
  ['&amp;', '&'],
  ['&quot;', '"'],
  ['&apos;', "'"],
]);

function decoded(value: string): string {
  return value.includes('&') ? value.replace(/&[a-z]{2,4};/g, (entity) => ENTITIES.get(entity) ?? entity) : value;
}

function blanked(text: string, blanks: readonly Span[]): string {
  let plain = '';
  let at = 0;
  for (const { start, end } of blanks) {
    plain += text.slice(at, start) + text.slice(start, end).replace(/[^\r\n]/g, ' ');
    at = end;
  }
  return plain + text.slice(at);
}
