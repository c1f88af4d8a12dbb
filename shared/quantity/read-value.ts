import { fail, ok, problem, type Result } from '#text';
import { type Dimension, NONE, sameDimension } from './dimension.ts';
import { dimensionWords, kindOfDimension } from './dimension-words.ts';
import { KINDS, LEVEL_REFERENCES, type LevelUnit, PEAK_FACTORS, type QuantityKind, type Reading } from './kinds.ts';
import { type Refusal, readMarking, readNumberAt, shortened } from './number-text.ts';
import { readUnit, toSi, type Unit, unitsSpeltLike } from './units.ts';
import type { QuantityProblem } from './wording.ts';

export interface ReadOptions {
  /** What the text is to be; a dimension where no quantity has a name for it. */
  readonly kind: QuantityKind | Dimension;
  /** `'required'` in recipe text; in a field the unit last shown, with prefix, which a bare number takes ('' for none). */
  readonly unit: string;
  /** How an alternating voltage or current is typed. */
  readonly reading?: Reading | undefined;
  /** Whether a comma is a decimal sign for this person. Never in recipe text. */
  readonly decimalComma?: boolean;
  /** False where only a single value makes sense; true if absent. */
  readonly mayBeRange?: boolean;
}

/** Two ends in SI base units (levels in dB, alternating quantities as peaks); equal for a single value. */
export interface ReadValue {
  readonly low: number;
  readonly high: number;
  readonly isRange: boolean;
  /** The unit with prefix as it is written, for showing the value again and for the next bare number; '' for none. */
  readonly unit: string;
}

/** A piece of the text as given. */
interface Slice {
  readonly text: string;
  readonly start: number;
}

/** A number with its unit: null where none was typed. */
interface Term extends Slice {
  readonly decimal: string;
  readonly unit: Unit | LevelUnit | null;
  /** The unit as typed, or the whole term where none stands apart. */
  readonly unitPlace: Slice;
}

/** More than any value needs; it keeps a text of 100,000 spaces from taking long. */
const MOST_CHARACTERS = 200;
const JOINT = /((?:^|\s+)to(?:\s+|$))|\s*(?:±|\+\/-|\+-)\s?/;
/** A field also takes a range as results show it, to be copied from there. */
const FIELD_JOINT = /((?:^|\s+)to(?:\s+|$)|\s*…\s*)|\s*(?:±|\+\/-|\+-)\s?/;

/**
 * Reads one value or a range: `10 kΩ`, `4k7`, `-2 V to 2 V`, `±2 V`, `5 V ± 1 V`, `+4 dBu`.
 *
 * Units: gives SI base units; °C becomes kelvin, `reading` is turned into the peak of a sine.
 * When it cannot: one `QuantityProblem`; it never throws and never gives NaN or an infinity.
 * Source: SI brochure, 9th edition, for units; IEC 60062 for marking codes.
 */
export function readValue(text: string, options: ReadOptions): Result<ReadValue, QuantityProblem> {
  const whole = trimmed({ text, start: 0 });
  if (whole.text === '') return refuse(whole, { code: 'value-missing', facts: { example: exampleOf(options) } });
  if (whole.text.length > MOST_CHARACTERS)
    return refuse(whole, { code: 'number-too-long', facts: { most: MOST_CHARACTERS } });
  const joint = (options.unit === 'required' ? JOINT : FIELD_JOINT).exec(whole.text);
  if (joint === null) return single(whole, options);
  if (options.mayBeRange === false)
    return refuse(whole, { code: 'range-refused', facts: { typed: shortened(whole.text) } });
  const left = trimmed({ text: whole.text.slice(0, joint.index), start: whole.start });
  const rest = joint.index + joint[0].length;
  const right = trimmed({ text: whole.text.slice(rest), start: whole.start + rest });
  if (joint[1] !== undefined) return fromTo(whole, left, right, options);
  return left.text === '' ? evenly(whole, right, options) : around(whole, left, right, options);
}

function single(whole: Slice, options: ReadOptions): Result<ReadValue, QuantityProblem> {
  const term = readTerm(whole, options);
  if (!term.ok) return term;
  const unit = unitOf(term.value, null, options);
  if (!unit.ok) return unit;
  const value = siOf(term.value, unit.value, options);
  return value.ok ? ok({ low: value.value, high: value.value, isRange: false, unit: symbolOf(unit.value) }) : value;
}

function fromTo(whole: Slice, left: Slice, right: Slice, options: ReadOptions): Result<ReadValue, QuantityProblem> {
  const pair = readPair(left, right, options);
  if (!pair.ok) return pair;
  const low = siOf(pair.value.first, pair.value.firstUnit, options);
  if (!low.ok) return low;
  const high = siOf(pair.value.second, pair.value.secondUnit, options);
  if (!high.ok) return high;
  if (low.value > high.value)
    return refuse(whole, { code: 'ends-crossed', facts: { low: left.text, high: right.text } });
  return ok(rangeOf(low.value, high.value, symbolOf(pair.value.secondUnit)));
}

/** `±2 V`. The ends are values, not differences: `±5 °C` reaches from −5 °C to 5 °C. */
function evenly(whole: Slice, size: Slice, options: ReadOptions): Result<ReadValue, QuantityProblem> {
  const term = readTerm(size, options);
  if (!term.ok) return term;
  const unit = unitOf(term.value, null, options);
  if (!unit.ok) return unit;
  if (term.value.decimal.startsWith('-'))
    return refuse(size, { code: 'deviation-negative', facts: { typed: size.text } });
  const high = siOf(term.value, unit.value, options);
  if (!high.ok) return high;
  const low = siOf(
    { ...term.value, ...whole, decimal: `-${term.value.decimal.replace('+', '')}` },
    unit.value,
    options,
  );
  return low.ok ? ok(rangeOf(low.value, high.value, symbolOf(unit.value))) : low;
}

/** `5 V ± 1 V`. What follows the sign is a difference: of temperatures in kelvins, of levels in dB. */
function around(whole: Slice, left: Slice, right: Slice, options: ReadOptions): Result<ReadValue, QuantityProblem> {
  const pair = readPair(left, right, options);
  if (!pair.ok) return pair;
  const { first, firstUnit, second, secondUnit } = pair.value;
  if (second.decimal.startsWith('-'))
    return refuse(right, { code: 'deviation-negative', facts: { typed: right.text } });
  let ends: readonly [number, number];
  if (isLevel(firstUnit)) {
    const middle = Number(first.decimal);
    const size = Number(second.decimal);
    ends = [peakOfLevel(middle - size, firstUnit), peakOfLevel(middle + size, firstUnit)];
  } else if (isLevel(secondUnit)) {
    return refuse(second.unitPlace, wrongUnit(secondUnit, KINDS.level.dimension, options));
  } else {
    const middle = siOf(first, firstUnit, options);
    if (!middle.ok) return middle;
    const size = toSi(second.decimal, secondUnit, true) * peakFactor(options);
    ends = [middle.value - size, middle.value + size];
  }
  const low = checkedEnd(ends[0], whole, options);
  if (!low.ok) return low;
  const high = checkedEnd(ends[1], whole, options);
  return high.ok ? ok(rangeOf(low.value, high.value, symbolOf(firstUnit))) : high;
}

interface Pair {
  readonly first: Term;
  readonly firstUnit: Unit | LevelUnit;
  readonly second: Term;
  readonly secondUnit: Unit | LevelUnit;
}

/** In a field one unit serves both ends (`-2 to 2 V`); recipe text needs it at each. */
function readPair(left: Slice, right: Slice, options: ReadOptions): Result<Pair, QuantityProblem> {
  for (const side of [left, right]) {
    if (side.text === '') return refuse(side, { code: 'value-missing', facts: { example: exampleOf(options) } });
  }
  const first = readTerm(left, options);
  if (!first.ok) return first;
  const second = readTerm(right, options);
  if (!second.ok) return second;
  const firstUnit = unitOf(first.value, second.value.unit, options);
  if (!firstUnit.ok) return firstUnit;
  // `+4 dBu ± 1 dB`: the only place where dB stands beside a level.
  const isDecibel = isLevel(firstUnit.value) && second.value.unit !== null && symbolOf(second.value.unit) === 'dB';
  const secondUnit = isDecibel ? ok(firstUnit.value) : unitOf(second.value, first.value.unit, options);
  if (!secondUnit.ok) return secondUnit;
  return ok({ first: first.value, firstUnit: firstUnit.value, second: second.value, secondUnit: secondUnit.value });
}

/** In a field "10 k" is read as 10k; in recipe text the unit is wanted. */
const LETTER_APART = /([0-9])[ \u00a0\u2009]([A-Za-zµ\u03bc])$/;

function readTerm(slice: Slice, options: ReadOptions): Result<Term, QuantityProblem> {
  const { text } = slice;
  const kind = kindOf(options);
  const code = options.unit === 'required' ? text : text.replace(LETTER_APART, '$1$2');
  const marking = kind === null ? null : readMarking(code, kind);
  if (marking !== null) {
    if (!marking.ok) return refuse(slice, marking.error);
    return ok({ ...slice, decimal: marking.value.decimal, unit: readUnit(marking.value.unit), unitPlace: slice });
  }
  const number = readNumberAt(text, 0, options.unit !== 'required' && options.decimalComma === true);
  if (!number.ok) return refuse(numberPlace(slice, number.error), number.error);
  const { decimal, end } = number.value;
  const typed = text.slice(0, end);
  const tail = text.slice(end);
  const word = tail.trimStart();
  if (word === '') return ok({ ...slice, decimal, unit: null, unitPlace: slice });
  const unitPlace = { text: word, start: slice.start + text.length - word.length };
  if (/^[0-9]/.test(word)) {
    return refuse(slice, {
      code: 'digit-groups',
      facts: { typed: shortened(text), write: shortened(text.replace(/\s(?=[0-9])/g, '')) },
    });
  }
  const gap = tail.slice(0, tail.length - word.length);
  if (!/^[ \u2009\u00a0\u202f]?$/.test(gap)) {
    return refuse(slice, { code: 'too-many-spaces', facts: { write: shortened(`${typed} ${word}`) } });
  }
  const unit = isLevelUnit(word) ? word : readUnit(word);
  if (unit !== null) return ok({ ...slice, decimal, unit, unitPlace });
  return refuse(unitPlace, unknownUnit(word, options));
}

/** The unit that a term counts in, checked against what is wanted; `other` is the unit at the range's other end. */
function unitOf(
  term: Term,
  other: Unit | LevelUnit | null,
  options: ReadOptions,
): Result<Unit | LevelUnit, QuantityProblem> {
  const kind = kindOf(options);
  const isField = options.unit !== 'required';
  const lastShown = isLevelUnit(options.unit) ? options.unit : readUnit(options.unit);
  const unit = term.unit ?? (isField ? (other ?? lastShown) : null);
  if (unit === null) {
    if (kind === 'ratio' || kind === 'count') return ok(ONE);
    const [quantity, typed] = [wordsOf(options), shortened(term.text)];
    return refuse(term, { code: 'unit-missing', facts: { typed, quantity, write: exampleOf(options, typed) } });
  }
  if (isLevel(unit)) {
    if (kind !== 'voltage') return refuse(term.unitPlace, wrongUnit(unit, KINDS.level.dimension, options));
    return options.reading === 'rms' ? ok(unit) : refuse(term.unitPlace, { code: 'level-needs-rms', facts: { unit } });
  }
  if (fits(unit, options)) return ok(unit);
  if (kind === 'resistance' && unit.unit === 'K') {
    return refuse(term, {
      code: 'prefix-case',
      facts: { typed: term.text, write: `${term.decimal.replace('-', '−')}k` },
    });
  }
  return refuse(term.unitPlace, wrongUnit(unit.unit, unit.dimension, options, unit.isAngle));
}

const ONE: Unit = { unit: '', dimension: NONE, factor: 1, offset: 0, isAngle: false };

/** An angle is no ratio although both have no dimension, and radians per second are no frequency. */
function fits(unit: Unit, { kind }: ReadOptions): boolean {
  if (kind === 'count') return unit === ONE;
  const dimension = typeof kind === 'string' ? KINDS[kind].dimension : kind;
  if (!sameDimension(unit.dimension, dimension)) return false;
  return typeof kind === 'string' ? unit.isAngle === (kind === 'angle') : true;
}

function siOf(term: Term, unit: Unit | LevelUnit, options: ReadOptions): Result<number, QuantityProblem> {
  const tooSmall: Refusal = { code: 'number-too-small', facts: { typed: shortened(term.text) } };
  if (isLevel(unit)) {
    const peak = peakOfLevel(Number(term.decimal), unit);
    return peak === 0 ? refuse(term, tooSmall) : checkedEnd(peak, term, options);
  }
  const isDifference = options.kind === 'temperature-difference';
  const value = toSi(term.decimal, unit, isDifference) * peakFactor(options);
  if (value === 0 && unit.offset === 0 && /[1-9]/.test(term.decimal.split(/e/i)[0] ?? '')) {
    return refuse(term, tooSmall);
  }
  if (options.kind === 'count' && Number.isFinite(value) && !Number.isInteger(value)) {
    return refuse(term, { code: 'not-whole', facts: { typed: shortened(term.text) } });
  }
  return checkedEnd(value, term, options);
}

function checkedEnd(value: number, place: Slice, options: ReadOptions): Result<number, QuantityProblem> {
  const typed = shortened(place.text);
  if (!Number.isFinite(value)) return refuse(place, { code: 'number-too-large', facts: { typed } });
  if (options.kind === 'temperature' && value < 0)
    return refuse(place, { code: 'below-absolute-zero', facts: { typed } });
  // `+ 0` makes 0 of a typed -0.
  return ok(value + 0);
}

function rangeOf(low: number, high: number, unit: string): ReadValue {
  return { low, high, isRange: low < high, unit };
}

function peakOfLevel(level: number, unit: LevelUnit): number {
  return LEVEL_REFERENCES[unit] * 10 ** (level / 20) * PEAK_FACTORS.rms;
}

function peakFactor(options: ReadOptions): number {
  return options.reading === undefined ? 1 : PEAK_FACTORS[options.reading];
}

function isLevelUnit(word: string): word is LevelUnit {
  return Object.hasOwn(LEVEL_REFERENCES, word);
}

function isLevel(unit: Unit | LevelUnit): unit is LevelUnit {
  return typeof unit === 'string';
}

function symbolOf(unit: Unit | LevelUnit): string {
  return typeof unit === 'string' ? unit : unit.unit;
}

function kindOf({ kind }: ReadOptions): QuantityKind | null {
  return typeof kind === 'string' ? kind : kindOfDimension(kind);
}

function wordsOf({ kind }: ReadOptions): string {
  return typeof kind === 'string' ? KINDS[kind].words : dimensionWords(kind);
}

/** A unit that fits, for hints: the one last shown, or the first of the quantity. */
function expectedUnit(options: ReadOptions): string {
  if (options.unit !== 'required' && options.unit !== '') return options.unit;
  const kind = kindOf(options);
  return kind === null ? dimensionWords(options.kind as Dimension) : KINDS[kind].unit;
}

function exampleOf(options: ReadOptions, number = '1'): string {
  const unit = expectedUnit(options);
  return unit === '°' ? `${number}°` : `${number} ${unit}`.trimEnd();
}

function wrongUnit(unit: string, dimension: Dimension, options: ReadOptions, isAngle = false): Refusal {
  const measured = dimensionWords(dimension);
  const measures = !isAngle ? measured : sameDimension(dimension, NONE) ? KINDS.angle.words : `angular ${measured}`;
  return { code: 'unit-wrong', facts: { unit, measures, quantity: wordsOf(options), expected: expectedUnit(options) } };
}

function unknownUnit(word: string, options: ReadOptions): Refusal {
  const near = unitsSpeltLike(word).filter((symbol) => isFitting(symbol, options));
  const [only, ...others] = near;
  const isCase = only !== undefined && others.length === 0 && word.toLowerCase() === only.toLowerCase();
  if (isCase) return { code: 'prefix-case', facts: { typed: word, write: only } };
  // `10 k`: a prefix whose unit was left out.
  const completed = word.length === 1 ? word + expectedUnit(options) : '';
  if (isFitting(completed, options)) near.push(readUnit(completed)?.unit ?? completed);
  return { code: 'unit-unknown', facts: { unit: shortened(word), near, expected: expectedUnit(options) } };
}

function isFitting(symbol: string, options: ReadOptions): boolean {
  const unit = readUnit(symbol);
  return unit !== null && fits(unit, options);
}

/** The number that a refusal quotes, or the whole term where it quotes something else. */
function numberPlace(term: Slice, { facts }: Refusal): Slice {
  return 'typed' in facts && term.text.startsWith(facts.typed) ? { text: facts.typed, start: term.start } : term;
}

function trimmed({ text, start }: Slice): Slice {
  const end = text.trimEnd();
  const inner = end.trimStart();
  return { text: inner, start: start + end.length - inner.length };
}

function refuse(place: Slice, { code, facts }: Refusal): { readonly ok: false; readonly error: QuantityProblem } {
  const span = { start: place.start, end: place.start + place.text.length };
  return fail(problem(code, span, facts) as QuantityProblem);
}
