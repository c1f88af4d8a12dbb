/** An attribute while it is typed: its quotes may still be open. Offsets into the text; `valueTo` is the closing quote. */
export interface SourceAttribute {
  readonly name: string;
  readonly from: number;
  readonly valueFrom: number;
  readonly valueTo: number;
}

/** A tag while it is typed: it may not be closed yet. */
export interface SourceTag {
  readonly kind: 'open' | 'close' | 'empty' | 'unfinished';
  readonly name: string;
  readonly from: number;
  readonly nameFrom: number;
  readonly to: number;
  readonly attributes: readonly SourceAttribute[];
}

const START = /<(\/?)([A-Z]\w*)/g;
const NEXT_IN_TAG = /\s*(?:([A-Za-z_][\w:.-]*)(?:\s*=\s*(["']))?|(\/?>)|(<)|([^\s]))/y;

/**
 * Finds the recipe's own tags for colours and completion. Unlike the compiler's scan it takes what is half typed: an
 * attribute without its closing quote ends at the end of its line. Never throws. Cost: linear.
 */
export function sourceTags(text: string): readonly SourceTag[] {
  const tags: SourceTag[] = [];
  START.lastIndex = 0;
  for (let match = START.exec(text); match !== null; match = START.exec(text)) {
    const tag = tagFrom(text, match.index, match[1] === '/', match[2] ?? '');
    tags.push(tag);
    START.lastIndex = tag.to;
  }
  return tags;
}

function tagFrom(text: string, from: number, isClosing: boolean, name: string): SourceTag {
  const nameFrom = from + (isClosing ? 2 : 1);
  const attributes: SourceAttribute[] = [];
  let at = nameFrom + name.length;
  for (;;) {
    NEXT_IN_TAG.lastIndex = at;
    const match = NEXT_IN_TAG.exec(text);
    const [all = '', attribute, quote, end] = match ?? [];
    if (end !== undefined) {
      const kind = isClosing ? 'close' : end === '/>' ? 'empty' : 'open';
      return { kind, name, from, nameFrom, to: at + all.length, attributes };
    }
    // A new tag begins, or a blank line: this one was never finished.
    if (attribute === undefined || /\n\s*\n/.test(all)) {
      return { kind: isClosing ? 'close' : 'unfinished', name, from, nameFrom, to: at, attributes };
    }
    const attributeFrom = at + all.indexOf(attribute);
    at += all.length;
    if (quote === undefined) continue;
    const valueTo = endOfValue(text, at, quote);
    attributes.push({ name: attribute, from: attributeFrom, valueFrom: at, valueTo });
    at = text[valueTo] === quote ? valueTo + 1 : valueTo;
  }
}

/** The closing quote, or the end of the line where none comes before the next tag. */
function endOfValue(text: string, from: number, quote: string): number {
  const close = text.indexOf(quote, from);
  const line = text.indexOf('\n', from);
  const lineEnd = line < 0 ? text.length : line;
  if (close < 0) return lineEnd;
  if (close <= lineEnd) return close;
  // Over several lines only if no tag begins in between.
  return /<\/?[A-Z]/.test(text.slice(lineEnd, close)) ? lineEnd : close;
}

/** The elements that are open at a place, outermost first. */
export function enclosing(tags: readonly SourceTag[], at: number): readonly SourceTag[] {
  const open: SourceTag[] = [];
  for (const tag of tags) {
    if (tag.to > at) break;
    if (tag.kind === 'open') open.push(tag);
    else if (tag.kind === 'close') {
      const opened = open.findLastIndex((each) => each.name === tag.name);
      if (opened >= 0) open.length = opened;
    }
  }
  return open;
}

export function attributeValue(text: string, tag: SourceTag, name: string): string | undefined {
  const attribute = tag.attributes.find((each) => each.name === name);
  return attribute === undefined ? undefined : text.slice(attribute.valueFrom, attribute.valueTo);
}
