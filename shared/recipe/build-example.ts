import type { ExampleModel, Expectation, Given, LimitState, ResultModel } from '#calculator';
import { nearestName } from '#formula';
import { type Dimension, KINDS, NONE, type QuantityKind, type Reading, sameDimension } from '#quantity';
import type { Span } from '#text';
import { type Attributes, readAttributes, readEntry } from './attributes.ts';
import type { ElementBlock } from './blocks.ts';
import { reportInside } from './body.ts';
import { checkOption, entryOf } from './build-given.ts';
import { ELEMENTS, isElementName, LIMIT_STATES } from './elements.ts';
import type { Names } from './names.ts';
import type { AttributeText } from './scan-tags.ts';

/** Sources that need no entry in the front matter. */
export const PLAIN_SOURCES = ['own arithmetic', 'common practice', 'from memory'] as const;

/** What an example may speak of. */
export interface ExampleScope {
  readonly names: Names;
  readonly givens: ReadonlyMap<string, Given>;
  readonly chosen: ReadonlySet<string>;
  readonly results: ReadonlyMap<string, ResultModel>;
  readonly resultNames: ReadonlySet<string>;
  readonly limitNames: ReadonlySet<string>;
  readonly sources: readonly string[];
}

export function buildExample(block: ElementBlock, attributes: Attributes, scope: ExampleScope): ExampleModel | null {
  const { problems } = scope.names;
  const sets: ExampleModel['sets'][number][] = [];
  const expects: Expectation[] = [];
  let expected = 0;
  for (const child of block.elements) {
    if (isElementName(child.name) && ELEMENTS[child.name].inside !== 'Example') {
      problems.error('misplaced-element', child.nameSpan, { name: child.name, inside: ELEMENTS[child.name].inside });
      continue;
    }
    reportInside(child, problems);
    const inner = readAttributes(child, problems);
    if (child.name === 'Set') {
      const set = buildSet(child, inner, scope);
      const isTwice = sets.some((other) => other.name === set?.name && other.part === set.part);
      if (set !== null && isTwice) problems.error('set-twice', child.nameSpan, { name: set.name });
      else if (set !== null) sets.push(set);
    } else if (child.name === 'Expect') {
      expected++;
      const expect = buildExpect(child, inner, scope);
      if (expect !== null) expects.push(expect);
    }
  }
  if (expected === 0) problems.error('example-without-expect', block.nameSpan);
  const source = attributes.get('source');
  const known = [...scope.sources, ...PLAIN_SOURCES];
  if (source !== undefined && !known.includes(source.text)) {
    problems.error('source-unknown', source.value, {
      found: source.text,
      near: nearestName(source.text, known) ?? '',
      known,
    });
  }
  const title = attributes.get('title')?.text;
  if (title === undefined || source === undefined) return null;
  return { title, source: source.text, sets, expects, span: block.span };
}

function buildSet(
  block: ElementBlock,
  attributes: Attributes,
  scope: ExampleScope,
): ExampleModel['sets'][number] | null {
  const named = attributes.get('name');
  const to = attributes.get('to');
  if (named === undefined) return null;
  const { names, givens, chosen } = scope;
  const [name = '', part, ...rest] = named.text.trim().split('.');
  const given = givens.get(name);
  const isInput = names.infoOf(name) !== undefined && !scope.resultNames.has(name);
  if (!isInput) {
    reportUnknownInput(name, named.value, scope);
    return null;
  }
  if (rest.length > 0 || (part !== undefined && part !== 'tolerance')) {
    names.problems.error('set-part', named.value, { found: named.text });
    return null;
  }
  if (to === undefined) return null;
  const info = names.infoOf(name);
  if (info?.type === null || info?.type === undefined || info.type === 'truth') return null;
  const kind = info.kind ?? info.type;
  const isTolerance = part === 'tolerance';
  const entry = isTolerance ? toleranceEntry(to, kind, names) : entryOf(to.value, kind, info.reading, names, true);
  if (entry === null) return null;
  if (given !== undefined && !isTolerance) {
    checkOption(entry, given.options, to.value, names.problems);
    if (entry.low < (given.min ?? -Infinity) || entry.high > (given.max ?? Infinity)) {
      names.problems.error('set-outside', to.value, { name, value: entry.text });
    }
  }
  if (given === undefined && !chosen.has(name)) return null;
  return { name, part: isTolerance ? 'tolerance' : 'value', to: entry, span: block.span };
}

/** A tolerance is a ratio, or in the unit of the value itself. */
function toleranceEntry(to: AttributeText, kind: QuantityKind | Dimension, names: Names): ReturnType<typeof entryOf> {
  const text = names.source.slice(to.value.start, to.value.end).trim();
  const isRatio = /(?:%|ppm|ppb|[0-9])$/.test(text) && kind !== 'level' && kind !== 'temperature';
  const absolute = kind === 'temperature' ? 'temperature-difference' : kind;
  return entryOf(to.value, isRatio ? 'ratio' : absolute, undefined, names, false);
}

function reportUnknownInput(name: string, place: Span, { names, givens, chosen, resultNames }: ExampleScope): void {
  if (resultNames.has(name)) {
    names.problems.error('set-result', place, { name });
    return;
  }
  const known = [...givens.keys(), ...chosen];
  names.problems.error('input-unknown', place, { name, near: nearestName(name, known) ?? '', known });
}

function buildExpect(block: ElementBlock, attributes: Attributes, scope: ExampleScope): Expectation | null {
  const { problems } = scope.names;
  const name = attributes.get('name');
  const limit = attributes.get('limit');
  const needed = name !== undefined ? 'to' : 'state';
  const strange = (name !== undefined ? ['state', 'limit'] : ['to', 'at', 'within']).find((key) => attributes.has(key));
  if (name === undefined && limit === undefined) {
    problems.error('expect-nothing', block.nameSpan);
    return null;
  }
  if (strange !== undefined) {
    problems.error('expect-mixed', attributes.get(strange)?.nameSpan ?? block.nameSpan, { name: strange });
    return null;
  }
  if (!attributes.has(needed)) {
    // A word that was refused has been told of already.
    const isTyped = block.attributes.some((attribute) => attribute.name === needed);
    if (!isTyped) problems.error('missing-attribute', block.nameSpan, { element: 'Expect', names: [needed] });
    return null;
  }
  return name !== undefined ? expectNumber(block, attributes, name, scope) : expectState(block, attributes, scope);
}

function expectState(block: ElementBlock, attributes: Attributes, scope: ExampleScope): Expectation | null {
  const limit = attributes.get('limit');
  const state = LIMIT_STATES.find((known) => known === attributes.get('state')?.text);
  if (limit === undefined || state === undefined) return null;
  if (!scope.limitNames.has(limit.text)) {
    const known = [...scope.limitNames];
    const near = nearestName(limit.text, known) ?? '';
    scope.names.problems.error('limit-unknown', limit.value, { name: limit.text, near, known });
    return null;
  }
  return { kind: 'limit', limit: limit.text, state: state.replace(' ', '-') as LimitState, span: block.span };
}

function expectNumber(
  block: ElementBlock,
  attributes: Attributes,
  name: AttributeText,
  scope: ExampleScope,
): Expectation | null {
  const { names } = scope;
  const { problems } = names;
  const at = attributes.get('at');
  if (at !== undefined && !/^(?:worst (?:low|high)|p(?:0\.1|1|50|99|99\.9))$/.test(at.text)) {
    problems.error('expect-at', at.value, { found: at.text });
  } else if (at !== undefined) problems.error('not-available-yet', at.value, { what: `at="${at.text}"` });
  if (!scope.resultNames.has(name.text)) {
    const known = [...scope.resultNames];
    problems.error('result-unknown', name.value, { name: name.text, near: nearestName(name.text, known) ?? '', known });
    return null;
  }
  const result = scope.results.get(name.text);
  const type = names.infoOf(name.text)?.type;
  const to = attributes.get('to');
  if (!result || !type || type === 'truth' || to === undefined) return null;
  const kind = result.quantity ?? type;
  const entry = entryOf(to.value, kind, result.reading, names, true);
  const within = attributes.get('within');
  const allowance = within === undefined ? DEFAULT_WITHIN : readWithin(within, kind, type, result.reading, names);
  if (entry === null || allowance === null) return null;
  if (entry.low === 0 && entry.high === 0 && allowance.withinIs === 'relative') {
    problems.error('expect-zero', within?.value ?? to.value);
    return null;
  }
  return {
    kind: 'number',
    name: name.text,
    to: entry,
    ...(at === undefined ? {} : { at: at.text }),
    ...allowance,
    span: block.span,
  };
}

interface Allowance {
  readonly within: number;
  readonly withinIs: 'relative' | 'absolute';
}

const DEFAULT_WITHIN: Allowance = { within: 0.001, withinIs: 'relative' };

/** Per cent and its kin are relative; a bare number is relative too, unless the result itself is one. */
function readWithin(
  attribute: AttributeText,
  kind: QuantityKind | Dimension,
  type: Dimension,
  reading: Reading | undefined,
  { source, problems }: Names,
): Allowance | null {
  const text = source.slice(attribute.value.start, attribute.value.end).trim();
  const isBare = /[0-9.]$/.test(text);
  const isRelative = /(?:%|ppm|ppb)$/.test(text) || (isBare && !sameDimension(type, NONE));
  const absolute = sameDimension(type, KINDS.temperature.dimension) ? 'temperature-difference' : kind;
  const options = isRelative ? ({ kind: 'ratio' } as const) : { kind: absolute, reading };
  const read = readEntry(source, attribute.value, { ...options, mayBeRange: false }, problems);
  if (read === null) return null;
  if (read.low > 0) return { within: read.low, withinIs: isRelative ? 'relative' : 'absolute' };
  problems.error('within-positive', attribute.value, { found: text });
  return null;
}
