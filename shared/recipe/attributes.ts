import { isName, nearestName, reservedAs } from '#formula';
import { type QuantityKind, type ReadOptions, type ReadValue, readValue } from '#quantity';
import type { Span } from '#text';
import type { ElementBlock } from './blocks.ts';
import { type AttributeRow, ELEMENTS, isElementName } from './elements.ts';
import type { Problems } from './problems.ts';
import type { AttributeText } from './scan-tags.ts';

/** The attributes of one element that may be used: known, given once, with an allowed word. */
export type Attributes = ReadonlyMap<string, AttributeText>;

const LONGEST_TEXT = 500;

/** Checks the attributes of an element against the table of elements. `isTold`: that it comes later is said already. */
export function readAttributes(block: ElementBlock, problems: Problems, isTold = false): Attributes {
  const read = new Map<string, AttributeText>();
  if (!isElementName(block.name)) return read;
  const row = ELEMENTS[block.name];
  if (row.later && !isTold) problems.error('not-available-yet', block.nameSpan, { what: `<${block.name}>` });
  for (const attribute of block.attributes) {
    const { name, nameSpan } = attribute;
    const known = Object.hasOwn(row.attributes, name) ? row.attributes[name] : undefined;
    if (known === undefined) {
      const near = nearestName(name, Object.keys(row.attributes)) ?? '';
      problems.error('unknown-attribute', nameSpan, { name, element: block.name, near });
    } else if (read.has(name)) problems.error('duplicate-attribute', nameSpan, { name });
    else if (isFit(attribute, known, row.later === true, problems)) read.set(name, attribute);
  }
  const given = new Set([...block.attributes.map((attribute) => attribute.name), ...block.refused]);
  const missing = Object.keys(row.attributes).filter((name) => row.attributes[name]?.required && !given.has(name));
  if (missing.length > 0) problems.error('missing-attribute', block.nameSpan, { element: block.name, names: missing });
  return read;
}

function isFit(attribute: AttributeText, row: AttributeRow, isLater: boolean, problems: Problems): boolean {
  const { name, text, value, span } = attribute;
  if (row.later && !isLater) problems.error('not-available-yet', attribute.nameSpan, { what: name });
  if (text.trim() === '' && row.reader !== 'formula' && row.reader !== 'value') {
    problems.error('attribute-empty', span, { name });
    return false;
  }
  if (row.reader === 'text' && text.length > LONGEST_TEXT) {
    problems.error('attribute-too-long', value, { name, most: LONGEST_TEXT });
    return false;
  }
  if (row.values === undefined || row.values.includes(text)) return true;
  problems.error('unknown-word', value, {
    name,
    found: text,
    near: nearestName(text, row.values) ?? '',
    words: row.values,
  });
  return false;
}

/** Reads a value or a range from the text as typed; null after telling what is wrong. */
export function readEntry(
  source: string,
  place: Span,
  options: Omit<ReadOptions, 'unit'> & { readonly kind: QuantityKind | ReadOptions['kind'] },
  problems: Problems,
): ReadValue | null {
  const read = readValue(source.slice(place.start, place.end), { ...options, unit: 'required' });
  if (read.ok) return read.value;
  const { span, ...rest } = read.error;
  // An empty value has no width: its quotes are underlined.
  const start = place.start + span.start;
  const end = place.start + span.end;
  problems.add([{ ...rest, span: start < end ? { start, end } : { start: place.start - 1, end: place.end + 1 } }]);
  return null;
}

/** Reads a whole number within bounds; null after telling what is wrong. */
export function readWhole(attribute: AttributeText, least: number, most: number, problems: Problems): number | null {
  const number = /^\d{1,9}$/.test(attribute.text) ? Number(attribute.text) : Number.NaN;
  if (number >= least && number <= most) return number;
  problems.error('whole-number', attribute.value, { name: attribute.name, found: attribute.text, least, most });
  return null;
}

/** Reads a name that is made here; null after telling why it cannot be one. */
export function readName(name: string, place: Span, problems: Problems): string | null {
  if (!isName(name)) {
    problems.error('name-form', place, { name });
    return null;
  }
  const meaning = reservedAs(name) ?? (name === 'if' ? 'function' : null);
  if (meaning === null) return name;
  problems.error('name-reserved', place, { name, meaning });
  return null;
}
