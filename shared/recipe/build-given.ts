import type { Entry, Given, Uncertainty } from '#calculator';
import { typeWords } from '#formula';
import { type Dimension, KINDS, NONE, type QuantityKind, type Reading, sameDimension } from '#quantity';
import type { Span } from '#text';
import { type Attributes, readEntry } from './attributes.ts';
import type { ElementBlock } from './blocks.ts';
import type { NameInfo, Names } from './names.ts';
import type { AttributeText } from './scan-tags.ts';

type Options = NonNullable<Given['options']>;

/** What the calculators further up the page offer to `from`, by id; `later` are the ids that come after. */
export interface Earlier {
  readonly names: ReadonlyMap<string, ReadonlyMap<string, NameInfo>>;
  readonly later: ReadonlySet<string>;
}

/** Reads everything of a Given but its uncertainty, which may name other Givens. Null where it has no quantity or value. */
export function buildGiven(block: ElementBlock, attributes: Attributes, names: Names, earlier: Earlier): Given | null {
  const name = attributes.get('name');
  const quantity = attributes.get('quantity')?.text as QuantityKind | undefined;
  const value = attributes.get('value');
  if (name === undefined || quantity === undefined || value === undefined) return null;
  const reading = readReading(attributes.get('reading'), quantity, names);
  const entry = entryOf(value.value, quantity, reading, names, true);
  const min = boundOf(attributes.get('min'), quantity, reading, names);
  const max = boundOf(attributes.get('max'), quantity, reading, names);
  const options = readOptions(attributes.get('options'), quantity, reading, names);
  if (entry !== null) checkEntry(entry, value.value, { min, max, options }, names);
  const from = readFrom(attributes.get('from'), quantity, names, earlier);
  const text = (key: string) => attributes.get(key)?.text;
  if (entry === null) return null;
  return {
    name: name.text,
    label: text('label') ?? name.text,
    quantity,
    value: entry,
    ...(min === null ? {} : { min: min.low }),
    ...(max === null ? {} : { max: max.low }),
    ...(options === null ? {} : { options }),
    ...(reading === undefined ? {} : { reading }),
    ...(from === null ? {} : { from }),
    ...textsOf(attributes, ['part', 'field', 'means', 'note']),
    span: block.span,
  };
}

/** The attributes that are kept as they are written. */
export function textsOf<Key extends string>(
  attributes: Attributes,
  keys: readonly Key[],
): Partial<Record<Key, string>> {
  const texts: Partial<Record<Key, string>> = {};
  for (const key of keys) {
    const text = attributes.get(key)?.text;
    if (text !== undefined) texts[key] = text;
  }
  return texts;
}

/** `reading` belongs to voltages and currents only. */
export function readReading(
  attribute: AttributeText | undefined,
  quantity: QuantityKind | null,
  { problems }: Names,
): Reading | undefined {
  if (attribute === undefined) return undefined;
  if (quantity === 'voltage' || quantity === 'current') return attribute.text as Reading;
  const found = quantity === null ? 'a number without a name' : KINDS[quantity].words;
  problems.error('reading-quantity', attribute.span, { found });
  return undefined;
}

/** Reads a value of a known quantity as the document stores it. */
export function entryOf(
  place: Span,
  kind: QuantityKind | Dimension,
  reading: Reading | undefined,
  { source, problems }: Names,
  mayBeRange: boolean,
): Entry | null {
  const read = readEntry(source, place, { kind, reading, mayBeRange }, problems);
  if (read === null) return null;
  return { low: read.low, high: read.high, unit: read.unit, text: source.slice(place.start, place.end).trim() };
}

function boundOf(
  attribute: AttributeText | undefined,
  quantity: QuantityKind,
  reading: Reading | undefined,
  names: Names,
): Entry | null {
  return attribute === undefined ? null : entryOf(attribute.value, quantity, reading, names, false);
}

interface Bounds {
  readonly min: Entry | null;
  readonly max: Entry | null;
  readonly options: Options | null;
}

function checkEntry(entry: Entry, place: Span, { min, max, options }: Bounds, { problems }: Names): void {
  if (min !== null && max !== null && min.low > max.low) {
    problems.error('min-above-max', place, { min: min.text, max: max.text });
  } else if ((min !== null && entry.low < min.low) || (max !== null && entry.high > max.low)) {
    problems.error('value-outside', place, { value: entry.text, min: min?.text ?? '', max: max?.text ?? '' });
  }
  checkOption(entry, options ?? undefined, place, problems);
}

export function checkOption(
  entry: Entry,
  options: Options | undefined,
  place: Span,
  problems: Names['problems'],
): void {
  const isOne = options?.some((option) => option.value === entry.low && option.value === entry.high) ?? true;
  const words = options?.map((option) => option.text) ?? [];
  if (!isOne) problems.error('value-no-option', place, { value: entry.text, options: words });
}

/** `2: two-wire; 4: four-wire`. */
function readOptions(
  attribute: AttributeText | undefined,
  quantity: QuantityKind,
  reading: Reading | undefined,
  names: Names,
): Options | null {
  if (attribute === undefined) return null;
  const options: Options[number][] = [];
  let start = attribute.value.start;
  for (const piece of names.source.slice(attribute.value.start, attribute.value.end).split(';')) {
    const place = { start, end: start + piece.length };
    start = place.end + 1;
    const colon = piece.indexOf(':');
    const label = piece.slice(colon + 1).trim();
    if (colon < 0 || label === '') {
      names.problems.error('options-form', place.start < place.end ? place : attribute.span, { found: piece.trim() });
      return null;
    }
    const entry = entryOf({ start: place.start, end: place.start + colon }, quantity, reading, names, false);
    if (entry === null) return null;
    options.push({ value: entry.low, text: entry.text, label });
  }
  return options;
}

function readFrom(
  attribute: AttributeText | undefined,
  quantity: QuantityKind,
  { problems }: Names,
  earlier: Earlier,
): NonNullable<Given['from']> | null {
  if (attribute === undefined) return null;
  const { value, text } = attribute;
  const [, calculator = '', name = ''] = /^([^.]+)\.([^.]+)$/.exec(text.trim()) ?? [];
  if (name === '') problems.error('reference-form', value, { found: text });
  else if (earlier.later.has(calculator)) problems.error('from-later', value, { calculator });
  else {
    const known = earlier.names.get(calculator);
    const info = known?.get(name);
    if (known === undefined) {
      problems.error('calculator-unknown', value, { id: calculator, known: [...earlier.names.keys()] });
    } else if (info === undefined) {
      problems.error('calculator-name-unknown', value, { id: calculator, name, known: [...known.keys()] });
    } else if (info.type !== null && (info.type === 'truth' || !sameDimension(info.type, KINDS[quantity].dimension))) {
      problems.error('from-dimension', value, { found: typeWords(info.type), quantity: KINDS[quantity].words });
    } else return { calculator, name };
  }
  return null;
}

/** Reads what describes how a value of this quantity spreads. */
export function readUncertainty(
  attributes: Attributes,
  kind: QuantityKind | null,
  type: Dimension | null,
  names: Names,
): Uncertainty {
  const { problems } = names;
  const tolerance = attributes.get('tolerance');
  const checked = tolerance === undefined ? null : names.read(tolerance.value);
  const isRelative = checked !== null && checked.type !== 'truth' && sameDimension(checked.type, NONE);
  if (tolerance !== undefined && checked !== null && type !== null) {
    const needsAbsolute = kind === 'level' || kind === 'temperature';
    const isAbsolute = checked.type !== 'truth' && sameDimension(checked.type, type);
    const words = typeWords(type);
    if (isRelative && needsAbsolute) problems.error('tolerance-relative', tolerance.value, { quantity: words });
    else if (!isRelative && !isAbsolute) {
      problems.error('tolerance-dimension', tolerance.value, { found: typeWords(checked.type), quantity: words });
    }
  }
  const ratioOf = (key: string, dimension: Dimension, needs: string) => {
    const attribute = attributes.get(key);
    const expr = attribute === undefined ? null : names.read(attribute.value);
    if (attribute === undefined || expr === null) return null;
    if (expr.type !== 'truth' && sameDimension(expr.type, dimension)) return expr;
    problems.error('attribute-dimension', attribute.value, { name: key, found: typeWords(expr.type), needs });
    return null;
  };
  const match = ratioOf('match', NONE, 'ratio');
  const tempco = ratioOf('tempco', KINDS['temperature-coefficient'].dimension, 'temperature coefficient');
  const track = ratioOf('track', KINDS['temperature-coefficient'].dimension, 'temperature coefficient');
  const spread = attributes.get('spread')?.text as 'uniform' | 'normal' | undefined;
  return {
    ...(checked === null ? {} : { tolerance: checked, toleranceIs: isRelative ? 'relative' : 'absolute' }),
    ...(spread === undefined ? {} : { spread }),
    ...textsOf(attributes, ['group']),
    ...(match === null ? {} : { match }),
    ...(tempco === null ? {} : { tempco }),
    ...(track === null ? {} : { track }),
  };
}
