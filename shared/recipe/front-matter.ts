import { isMap, isScalar, isSeq, type Node, type Pair, parseDocument, type YAMLMap } from 'yaml';
import { nearestName } from '#formula';
import { type Span, span } from '#text';
import { type CompileFacts, type FrontMatter, HAZARDS, type Hazard, type Supply } from './document.ts';
import { LIMITS } from './limits.ts';
import type { Problems } from './problems.ts';

const KEYS = [
  'title',
  'summary',
  'slug',
  'hazards',
  'number',
  'purpose',
  'topics',
  'keywords',
  'supply',
  'review_months',
  'sources',
] as const;
type Key = (typeof KEYS)[number];

const REQUIRED: readonly Key[] = ['title', 'summary', 'slug', 'hazards'];
const LONGEST = { title: 120, summary: 240, purpose: 80, entry: 60, source: 500 } as const;
const MOST_ENTRIES = 20;
const DEFAULT_REVIEW_MONTHS = 24;

export interface FrontMatterRead {
  /** As far as it could be read; what is missing is empty. */
  readonly front: FrontMatter;
  /** Where the hazards stand, for what is said about them later. */
  readonly hazardsSpan: Span;
  /** Whether the hazards could be read: rules about them are silent otherwise. */
  readonly hasHazards: boolean;
}

/** Reads the front matter. Never throws. Facts: topics and the slug that is fixed. */
export function readFrontMatter(text: string, facts: CompileFacts, problems: Problems): FrontMatterRead {
  const found = /^---[ \t]*(\r?\n)([\s\S]*?)(?:^|(?<=\n))---[ \t]*(?=\r?\n|$)/.exec(text);
  const nothing = new Reader(text, 0, new Map(), problems);
  if (found === null) {
    const isOpen = /^---[ \t]*(?:\r?\n|$)/.test(text);
    problems.error(isOpen ? 'front-matter-open' : 'front-matter-missing', span(0, firstLine(text)));
    return { front: frontOf(nothing, facts), hazardsSpan: span(0, 0), hasHazards: false };
  }
  const start = text.indexOf('\n') + 1;
  const yaml = found[2] ?? '';
  const values = readYaml(yaml, start, problems);
  if (values === null) return { front: frontOf(nothing, facts), hazardsSpan: span(0, 3), hasHazards: false };
  const reader = new Reader(text, start, values, problems);
  const missing = REQUIRED.filter((key) => !values.has(key));
  if (missing.length > 0) problems.error('front-matter-key-missing', span(0, 3), { keys: missing });
  const front = frontOf(reader, facts);
  const hazards = values.get('hazards');
  return { front, hazardsSpan: hazards ? reader.keySpan(hazards) : span(0, 3), hasHazards: hazards !== undefined };
}

function firstLine(text: string): number {
  return /^[^\r\n]*/.exec(text)?.[0].length ?? 0;
}

interface Value {
  readonly key: Node;
  readonly node: Node | null;
}

function readYaml(yaml: string, start: number, problems: Problems): Map<Key, Value> | null {
  if (yaml.length > LIMITS.frontMatter) {
    problems.error('front-matter-too-long', span(start, start + yaml.length), { most: LIMITS.frontMatter });
    return null;
  }
  let contents: unknown;
  try {
    const document = parseDocument(yaml, { schema: 'core', prettyErrors: false, logLevel: 'silent', merge: false });
    contents = document.contents;
    for (const { message, pos, code } of document.errors) {
      // The package marks one character; the word that begins there is clearer.
      const word = /^[\w-]+/.exec(yaml.slice(pos[0]))?.[0].length ?? 1;
      const at = span(start + pos[0], start + Math.max(pos[1], pos[0] + word));
      problems.error(code === 'DUPLICATE_KEY' ? 'front-matter-key-twice' : 'front-matter-syntax', at, {
        reason: message,
      });
    }
    if (document.errors.length > 0) return null;
  } catch {
    // The YAML package recurses: brackets nested by the thousand are more than its stack holds.
    problems.error('front-matter-syntax', span(start, start + yaml.length), { reason: 'nested too deeply' });
    return null;
  }
  if (isMap(contents)) return readKeys(contents, start, problems);
  problems.error('front-matter-form', span(start, start + Math.max(yaml.trimEnd().length, 1)));
  return null;
}

function readKeys(map: YAMLMap, start: number, problems: Problems): Map<Key, Value> {
  const values = new Map<Key, Value>();
  for (const { key, value } of map.items as Pair<Node, Node | null>[]) {
    const name = isScalar(key) ? String(key.value) : '';
    const known = KEYS.find((candidate) => candidate === name);
    if (known !== undefined) values.set(known, { key, node: value });
    else {
      const [from, to] = rangeOf(key);
      problems.error('front-matter-key-unknown', span(start + from, start + to), {
        key: name,
        near: nearestName(name, KEYS) ?? '',
        keys: KEYS,
      });
    }
  }
  return values;
}

function rangeOf(node: Node | null): readonly [number, number] {
  const range = node?.range;
  return range ? [range[0], Math.max(range[1], range[0] + 1)] : [0, 1];
}

/** Reads single keys, telling what does not fit at the value's own place. */
class Reader {
  readonly text: string;
  readonly start: number;
  readonly values: ReadonlyMap<Key, Value>;
  readonly problems: Problems;

  constructor(text: string, start: number, values: ReadonlyMap<Key, Value>, problems: Problems) {
    this.text = text;
    this.start = start;
    this.values = values;
    this.problems = problems;
  }

  spanOf(node: Node | null): Span {
    const [from, to] = rangeOf(node);
    return span(this.start + from, this.start + to);
  }

  keySpan({ key }: Value): Span {
    return this.spanOf(key);
  }

  /** A scalar as written: `number: 012` keeps its zero. */
  words(node: Node | null, key: string, most: number): string | null {
    const place = this.spanOf(node);
    if (!isScalar(node) || node.value === null) {
      this.problems.error('front-matter-words', place, { key });
      return null;
    }
    const words = typeof node.value === 'string' ? node.value : (node.source ?? '');
    if (words.trim() === '' || /[\r\n]/.test(words.trim())) {
      this.problems.error('front-matter-words', place, { key });
      return null;
    }
    if (words.length <= most) return words.trim();
    this.problems.error('front-matter-value-long', place, { key, most, length: words.length });
    return null;
  }

  line(key: Key, most: number): string | null {
    const value = this.values.get(key);
    return value === undefined ? null : this.words(value.node ?? value.key, key, most);
  }

  list(key: Key): readonly { readonly words: string; readonly span: Span }[] {
    const value = this.values.get(key);
    if (value === undefined || (value.node !== null && isScalar(value.node) && value.node.value === null)) return [];
    if (!isSeq(value.node)) {
      this.problems.error('front-matter-list', this.spanOf(value.node), { key });
      return [];
    }
    const items = value.node.items as Node[];
    if (items.length > MOST_ENTRIES) {
      this.problems.error('front-matter-list-long', this.spanOf(value.node), { key, most: MOST_ENTRIES });
    }
    const read: { words: string; span: Span }[] = [];
    for (const item of items.slice(0, MOST_ENTRIES)) {
      const words = this.words(item, key, LONGEST.entry);
      if (words === null) continue;
      const place = this.spanOf(item);
      if (read.some((other) => other.words === words)) this.problems.error('front-matter-twice', place, { words });
      else read.push({ words, span: place });
    }
    return read;
  }

  valueSpan(key: Key): Span {
    const value = this.values.get(key);
    return value === undefined ? span(0, 3) : this.spanOf(value.node ?? value.key);
  }
}

function frontOf(reader: Reader, facts: CompileFacts): FrontMatter {
  const number = readNumber(reader);
  const purpose = reader.line('purpose', LONGEST.purpose);
  const supply = readSupply(reader);
  return {
    title: reader.line('title', LONGEST.title) ?? '',
    summary: reader.line('summary', LONGEST.summary) ?? '',
    slug: readSlug(reader, facts),
    hazards: readHazards(reader),
    ...(number === null ? {} : { number }),
    ...(purpose === null ? {} : { purpose }),
    topics: readTopics(reader, facts),
    keywords: reader.list('keywords').map((entry) => entry.words),
    ...(supply === null ? {} : { supply }),
    reviewMonths: readReviewMonths(reader),
    sources: readSources(reader),
  };
}

function readNumber(reader: Reader): string | null {
  const number = reader.line('number', 20);
  if (number === null || /^[A-Za-z0-9]+(?:-[A-Za-z0-9]+)*$/.test(number)) return number;
  reader.problems.error('number-form', reader.valueSpan('number'), { number });
  return null;
}

function readSlug(reader: Reader, facts: CompileFacts): string {
  const slug = reader.line('slug', 1000);
  if (slug === null) return '';
  const place = reader.valueSpan('slug');
  if (!/^[a-z0-9-]{3,80}$/.test(slug)) {
    const write = slug
      .toLowerCase()
      .replace(/[^a-z0-9]+/g, '-')
      .replace(/^-+|-+$/g, '')
      .slice(0, 80);
    reader.problems.error('slug-form', place, { slug, write: write.length < 3 ? '' : write });
    return '';
  }
  if (facts.fixedSlug !== undefined && facts.fixedSlug !== slug) {
    reader.problems.error('slug-changed', place, { slug, fixed: facts.fixedSlug });
  }
  return slug;
}

function readHazards(reader: Reader): readonly Hazard[] {
  const entries = reader.list('hazards');
  const hazards: Hazard[] = [];
  for (const { words, span: place } of entries) {
    const known = HAZARDS.find((hazard) => hazard === words);
    if (known !== undefined) hazards.push(known);
    else if (words !== 'none') {
      const near = nearestName(words, HAZARDS) ?? '';
      reader.problems.error('hazard-unknown', place, { found: words, near, hazards: [...HAZARDS, 'none'] });
    } else if (entries.length > 1) reader.problems.error('hazards-and-none', place);
  }
  if (entries.length === 0 && isSeq(reader.values.get('hazards')?.node)) {
    reader.problems.error('hazards-empty', reader.valueSpan('hazards'));
  }
  return hazards;
}

function readTopics(reader: Reader, facts: CompileFacts): readonly string[] {
  const topics = reader.list('topics');
  if (topics.length > 0 && facts.topics === undefined) {
    reader.problems.warning('not-checked-here', reader.valueSpan('topics'), { what: 'the topics' });
  }
  for (const { words, span: place } of topics) {
    if (facts.topics === undefined || facts.topics.includes(words)) continue;
    reader.problems.error('topic-unknown', place, { found: words, near: nearestName(words, facts.topics) ?? '' });
  }
  return topics.map((entry) => entry.words);
}

const SUPPLIES = ['single', 'split', 'none'] as const;

function readSupply(reader: Reader): Supply | null {
  const words = reader.line('supply', 20);
  const known = SUPPLIES.find((supply) => supply === words);
  if (words !== null && known === undefined) {
    const near = nearestName(words, SUPPLIES) ?? '';
    reader.problems.error('unknown-word', reader.valueSpan('supply'), {
      name: 'supply',
      found: words,
      near,
      words: SUPPLIES,
    });
  }
  return known ?? null;
}

function readReviewMonths(reader: Reader): number {
  const words = reader.line('review_months', 20);
  if (words === null) return DEFAULT_REVIEW_MONTHS;
  const months = /^\d+$/.test(words) ? Number(words) : Number.NaN;
  if (months >= 1 && months <= 60) return months;
  reader.problems.error('whole-number', reader.valueSpan('review_months'), {
    name: 'review_months',
    found: words,
    least: 1,
    most: 60,
  });
  return DEFAULT_REVIEW_MONTHS;
}

function readSources(reader: Reader): Readonly<Record<string, string>> {
  const value = reader.values.get('sources');
  if (value === undefined || (isScalar(value.node) && value.node.value === null)) return {};
  if (!isMap(value.node)) {
    reader.problems.error('front-matter-sources', reader.spanOf(value.node));
    return {};
  }
  const sources: [string, string][] = [];
  for (const { key, value: source } of value.node.items as Pair<Node, Node | null>[]) {
    const id = isScalar(key) ? String(key.value) : '';
    if (!/^[A-Za-z][A-Za-z0-9_-]{0,39}$/.test(id)) {
      reader.problems.error('source-id', reader.spanOf(key), { id });
      continue;
    }
    const words = reader.words(source ?? key, `sources: ${id}`, LONGEST.source);
    if (words !== null) sources.push([id, words]);
  }
  return Object.fromEntries(sources);
}
