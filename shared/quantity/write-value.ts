import { superscript } from './dimension-words.ts';
import { KINDS, LEVEL_REFERENCES, type LevelUnit, PEAK_FACTORS, type QuantityKind, type Reading } from './kinds.ts';
import { fromSi, PREFIXES, readUnit, type Unit } from './units.ts';

export interface WriteOptions {
  /** Null where no quantity has the dimension; then `unit` is its coherent unit. */
  readonly kind: QuantityKind | null;
  /** The unit to use, with prefix; without it the quantity's own, with an engineering prefix. */
  readonly unit?: string | undefined;
  /** Significant digits, 1 to 15; 4 if absent. */
  readonly digits?: number | undefined;
  readonly reading?: Reading | undefined;
  /** All digits and an ordinary space, so that `readValue` gives the same number back; for texts that are read again. */
  readonly plain?: boolean;
}

export interface Written {
  readonly number: string;
  readonly unit: string;
  readonly text: string;
}

/** `low` and `high` are numbers in `unit`; where one unit cannot serve both, each carries its own and `unit` is ''. */
export interface WrittenRange {
  readonly low: string;
  readonly high: string;
  readonly unit: string;
  readonly text: string;
}

const USUAL_DIGITS = 4;
/** A level beyond this is a rejection that nothing real has: it is told in words. */
const HIGHEST_LEVEL = 200;
/** Positional notation from 0.0001 up to below a million; beyond, a power of ten. */
const LEAST_EXPONENT = -4;
const GREATEST_EXPONENT = 5;

/** Quantities that take no prefix: their numbers stand as they are, as in data sheets. */
const UNPREFIXED: ReadonlySet<QuantityKind> = new Set<QuantityKind>([
  'temperature',
  'temperature-difference',
  'ratio',
  'level',
  'count',
  'angle',
  'thermal-resistance',
  'temperature-coefficient',
]);

/** Scales whose zero is arbitrary: a digit has the same worth near zero as elsewhere, so the decimals are capped. */
const EVEN_SCALES: ReadonlySet<QuantityKind> = new Set<QuantityKind>(['temperature', 'level', 'angle']);

/**
 * Writes a value for people: `1.000 kΩ`, `−4.500 V`, `66.02 dB`, `above 200 dB`, `1.235×10⁻¹⁷ V`.
 *
 * Units: `si` in SI base units, levels in dB, alternating quantities as peaks. The minus is U+2212, the space before
 * the unit U+2009 (none before `°`); never `-0`.
 * When it cannot: words instead of a number for NaN and infinities, which no caller should hold.
 * Source: SI brochure, 9th edition, 5.4.3 and 5.4.7 for spaces; the choice of prefix so that 1 to 3 digits stand before the point is common practice.
 */
export function writeValue(si: number, options: WriteOptions): Written {
  const value = readingOf(si, options);
  const words = wordsFor(value, options);
  if (words !== null) return words;
  const scale = scaleFor(value, options);
  return written(numberIn(value, scale, options), scale.unit, options);
}

/** Writes the lowest and the highest of a result with one unit: `2.007 … 6.993 V`; once, where both read the same. */
export function writeRange(low: number, high: number, options: WriteOptions): WrittenRange {
  return joined(low, high, ' … ', options);
}

/** Writes an input as it stands in a field: `4.500 V`, or for a range `−2.000 to 2.000 V`. */
export function writeEntry(entry: { readonly low: number; readonly high: number }, options: WriteOptions): string {
  return joined(entry.low, entry.high, ' to ', options).text;
}

function joined(low: number, high: number, joint: string, options: WriteOptions): WrittenRange {
  const [first, second] = [writeValue(low, options), writeValue(high, options)];
  if (first.text === second.text) return { low: first.number, high: second.number, unit: first.unit, text: first.text };
  const ends = commonNumbers(readingOf(low, options), readingOf(high, options), options);
  if (ends === null) return { low: first.text, high: second.text, unit: '', text: first.text + joint + second.text };
  const text = ends.low + joint + written(ends.high, ends.unit, options).text;
  return { ...ends, text };
}

interface CommonNumbers {
  readonly low: string;
  readonly high: string;
  readonly unit: string;
}

/** Null where the larger end's unit would leave the smaller one less than two digits, or where an end is told in words. */
function commonNumbers(low: number, high: number, options: WriteOptions): CommonNumbers | null {
  if (wordsFor(low, options) !== null || wordsFor(high, options) !== null) return null;
  const scale = scaleFor(Math.abs(low) > Math.abs(high) ? low : high, options);
  const isEven = hasEvenScale(options);
  const [x, y] = [inScale(low, scale), inScale(high, scale)];
  const larger = Math.max(Math.abs(x), Math.abs(y));
  const exponent = exponentOf(larger, digitsOf(options));
  if (options.plain === true || exponent > GREATEST_EXPONENT || exponent < LEAST_EXPONENT) return null;
  const decimals = digitsOf(options) - 1 - exponent;
  const isWhole = options.kind === 'count' && Number.isInteger(x) && Number.isInteger(y);
  // Rounded to tens or more: no decimals to agree on.
  if (isWhole || decimals < 0) {
    return { low: numberIn(low, scale, options), high: numberIn(high, scale, options), unit: scale.unit };
  }
  const smaller = Math.min(Math.abs(x), Math.abs(y));
  if (!isEven && smaller !== 0 && smaller < 10 ** (1 - decimals)) return null;
  const shown = isEven ? Math.min(evenDecimals(options), decimals) : decimals;
  return { low: signed(x.toFixed(shown)), high: signed(y.toFixed(shown)), unit: scale.unit };
}

/** A level has no number where it is beyond measure, and neither has what is not finite. */
function wordsFor(value: number, options: WriteOptions): Written | null {
  if (Number.isNaN(value)) return { number: 'no value', unit: '', text: 'no value' };
  if (!Number.isFinite(value)) return { number: 'unbounded', unit: '', text: 'unbounded' };
  // Finite in SI, but beyond a double in the unit: 1e308 rad in degrees.
  const scale = scaleFor(value, options);
  if (scale.level === null && !Number.isFinite(inScale(value, scale)))
    return wordsFor(value * Number.POSITIVE_INFINITY, options);
  const unit = options.kind === 'level' ? 'dB' : scale.level;
  if (unit === null || (options.plain === true && options.kind === 'level')) return null;
  const level = inScale(value, scale);
  if (level > HIGHEST_LEVEL) return written(`above ${HIGHEST_LEVEL}`, unit, options);
  if (level < -HIGHEST_LEVEL) return written(`below −${HIGHEST_LEVEL}`, unit, options);
  return null;
}

/** The peak inside becomes what the reading shows. */
function readingOf(si: number, { reading }: WriteOptions): number {
  return reading === undefined ? si : si / PEAK_FACTORS[reading];
}

function levelUnit({ kind, unit, reading }: WriteOptions): LevelUnit | null {
  const isShown = kind === 'voltage' && reading === 'rms' && (unit === 'dBu' || unit === 'dBV');
  return isShown ? unit : null;
}

function levelOf(rms: number, unit: LevelUnit): number {
  return rms > 0 ? 20 * Math.log10(rms / LEVEL_REFERENCES[unit]) : Number.NEGATIVE_INFINITY;
}

/** How the numbers before one unit are made; `level` for an absolute level, which no factor makes. */
interface Scale {
  readonly unit: string;
  readonly factor: number;
  readonly offset: number;
  readonly level: LevelUnit | null;
}

function scaleFor(value: number, options: WriteOptions): Scale {
  const level = levelUnit(options);
  if (level !== null) return { unit: level, factor: 1, offset: 0, level };
  const asked = readUnit(options.unit ?? '');
  if (asked) return scaleOf(asked, options);
  const own = options.kind === null ? (options.unit ?? '') : KINDS[options.kind].unit;
  const unit = readUnit(own);
  if (unit === null) return { unit: own, factor: 1, offset: 0, level: null };
  if (options.kind === null || UNPREFIXED.has(options.kind)) return scaleOf(unit, options);
  return scaleOf(readUnit(prefixFor(fromSi(value, unit), options) + own) ?? unit, options);
}

/** Kelvins and degrees Celsius differ by an offset only where a temperature is meant, not a difference of two. */
function scaleOf({ unit, factor, offset }: Unit, { kind }: WriteOptions): Scale {
  return { unit, factor, offset: kind === 'temperature-difference' ? 0 : offset, level: null };
}

/** '' beyond the prefixes, where a power of ten stands instead. */
function prefixFor(value: number, options: WriteOptions): string {
  if (value === 0) return '';
  // Of the rounded number, so that 999.96 takes the next prefix.
  const group = 3 * Math.floor(exponentOf(value, digitsOf(options)) / 3);
  return Object.entries(PREFIXES).find(([, exponent]) => exponent === group)?.[0] ?? '';
}

function numberIn(value: number, scale: Scale, options: WriteOptions): string {
  const number = inScale(value, scale);
  if (options.kind === 'count' && Number.isSafeInteger(number)) return signed(String(number));
  if (options.plain === true) return signed(String(number));
  if (number === 0) return '0';
  const [mantissa = '', power = '0'] = Math.abs(number)
    .toExponential(digitsOf(options) - 1)
    .split('e');
  const exponent = Number(power);
  const sign = number < 0 ? '−' : '';
  if (hasEvenScale(options) && exponent < 0) return signed(number.toFixed(evenDecimals(options)));
  if (exponent < LEAST_EXPONENT || exponent > GREATEST_EXPONENT) return `${sign}${mantissa}×10${superscript(exponent)}`;
  return sign + positional(mantissa.replace('.', ''), exponent);
}

function inScale(value: number, scale: Scale): number {
  return scale.level === null ? fromSi(value, scale) : levelOf(value, scale.level);
}

function hasEvenScale(options: WriteOptions): boolean {
  return levelUnit(options) !== null || (options.kind !== null && EVEN_SCALES.has(options.kind));
}

function evenDecimals(options: WriteOptions): number {
  return Math.max(1, digitsOf(options) - 1);
}

function digitsOf({ digits, plain }: WriteOptions): number {
  if (plain === true) return 15;
  return Math.min(15, Math.max(1, Math.round(digits ?? USUAL_DIGITS)));
}

/** The power of ten of the first digit once rounded. */
function exponentOf(number: number, digits: number): number {
  return Number(number.toExponential(digits - 1).split('e')[1]);
}

function positional(digits: string, exponent: number): string {
  if (exponent < 0) return `0.${'0'.repeat(-exponent - 1)}${digits}`;
  const whole = digits.slice(0, exponent + 1).padEnd(exponent + 1, '0');
  const part = digits.slice(exponent + 1);
  return part === '' ? whole : `${whole}.${part}`;
}

/** Gives a minus its sign, and a rounded zero none. */
function signed(number: string): string {
  const hasSize = /[1-9]/.test(number.split('e')[0] ?? '');
  return number.startsWith('-')
    ? `${hasSize ? '−' : ''}${number.slice(1).replace('e-', 'e−')}`
    : number.replace('e-', 'e−');
}

function written(number: string, unit: string, options: WriteOptions): Written {
  const gap = unit === '' || unit === '°' ? '' : options.plain === true ? ' ' : '\u2009';
  return { number, unit, text: number + gap + unit };
}
