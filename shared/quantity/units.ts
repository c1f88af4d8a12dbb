import { type Dimension, NONE, perDimension, powerOfDimension, timesDimension } from './dimension.ts';
import { KINDS } from './kinds.ts';

/**
 * Powers of ten by prefix, in the order of size.
 * Source: SI brochure, 9th edition (BIPM 2019), table 7.
 */
export const PREFIXES = { f: -15, p: -12, n: -9, µ: -6, m: -3, '': 0, k: 3, M: 6, G: 9, T: 12 } as const;

interface UnitRow {
  readonly dimension: Dimension;
  /** SI value of one such unit, without its prefix. */
  readonly factor?: number;
  /** What is added after the factor; only for a temperature that stands alone. */
  readonly offset?: number;
  readonly prefixes?: 'all' | 'small';
  readonly isAngle?: true;
}

/** Source: SI brochure, 9th edition: table 4 (named units), table 8 (h, °, for use with the SI), section 5.4.7 (%, ppm). */
const UNITS: Readonly<Record<string, UnitRow>> = {
  V: { dimension: KINDS.voltage.dimension, prefixes: 'all' },
  A: { dimension: KINDS.current.dimension, prefixes: 'all' },
  Ω: { dimension: KINDS.resistance.dimension, prefixes: 'all' },
  S: { dimension: KINDS.conductance.dimension, prefixes: 'all' },
  F: { dimension: KINDS.capacitance.dimension, prefixes: 'all' },
  H: { dimension: KINDS.inductance.dimension, prefixes: 'all' },
  Hz: { dimension: KINDS.frequency.dimension, prefixes: 'all' },
  s: { dimension: KINDS.time.dimension, prefixes: 'all' },
  h: { dimension: KINDS.time.dimension, factor: 3600 },
  W: { dimension: KINDS.power.dimension, prefixes: 'all' },
  J: { dimension: KINDS.energy.dimension, prefixes: 'all' },
  Wh: { dimension: KINDS.energy.dimension, factor: 3600, prefixes: 'all' },
  C: { dimension: KINDS.charge.dimension, prefixes: 'all' },
  Ah: { dimension: KINDS.charge.dimension, factor: 3600, prefixes: 'all' },
  K: { dimension: KINDS.temperature.dimension, prefixes: 'all' },
  '°C': { dimension: KINDS.temperature.dimension, offset: 273.15 },
  m: { dimension: KINDS.length.dimension, prefixes: 'all' },
  kg: { dimension: [2, 0, 0, 0, 0, 0] },
  dB: { dimension: KINDS.level.dimension },
  '%': { dimension: NONE, factor: 1e-2 },
  ppm: { dimension: NONE, factor: 1e-6 },
  ppb: { dimension: NONE, factor: 1e-9 },
  rad: { dimension: NONE, prefixes: 'small', isAngle: true },
  '°': { dimension: NONE, factor: Math.PI / 180, isAngle: true },
};

/** Other spellings that are read; the one in the table is written. U+2126 is the ohm sign, U+03BC the Greek letter mu. */
const OTHER_SPELLINGS: Readonly<Record<string, readonly string[]>> = {
  Ω: ['\u2126', 'ohm'],
  '°': ['deg'],
  µ: ['\u03bc', 'u'],
};

interface UnitWord extends UnitRow {
  readonly symbol: string;
  readonly factor: number;
}

const WORDS: ReadonlyMap<string, UnitWord> = unitWords();

function unitWords(): Map<string, UnitWord> {
  const words = new Map<string, UnitWord>();
  for (const [symbol, row] of Object.entries(UNITS)) {
    for (const [prefix, exponent] of Object.entries(PREFIXES)) {
      if (!mayTake(row, exponent)) continue;
      const word: UnitWord = { ...row, symbol: prefix + symbol, factor: scaled(row.factor ?? 1, exponent) };
      for (const p of [prefix, ...(OTHER_SPELLINGS[prefix] ?? [])]) {
        for (const u of [symbol, ...(OTHER_SPELLINGS[symbol] ?? [])]) words.set(p + u, word);
      }
    }
  }
  return words;
}

function mayTake(row: UnitRow, exponent: number): boolean {
  if (exponent === 0) return true;
  return row.prefixes === 'all' || (row.prefixes === 'small' && exponent < 0);
}

/** Multiplies by a power of ten through the decimal text, so that nano is exactly the number written 1e-9. */
function scaled(factor: number, exponent: number): number {
  const [digits = '0', power = '0'] = factor.toExponential().split('e');
  return Number(`${digits}e${Number(power) + exponent}`);
}

export interface Unit {
  /** As it is written: Greek capital omega, micro sign. */
  readonly unit: string;
  readonly dimension: Dimension;
  /** SI value = number × `factor` + `offset`. The offset is zero in compounds: a `µV/°C` is a `µV/K`. */
  readonly factor: number;
  readonly offset: number;
  /** Whether an angle is part of it: `rad/s` has the dimension of a frequency, but is none. */
  readonly isAngle: boolean;
}

export interface UnitRead extends Unit {
  /** Where the unit ends in the text. */
  readonly end: number;
  /** The single words as typed (`V/µs` has `V` and `µs`), so that a formula can see a name among them. */
  readonly words: readonly string[];
}

const FACTOR = /(√?)([A-Za-z°%µ\u03bcΩ\u2126]{1,8})(?![A-Za-z0-9_])(⁻?[¹²³⁴⁵⁶⁷⁸⁹][⁰¹²³⁴⁵⁶⁷⁸⁹]?)?/y;
/** More joints than any unit has; a text of 100,000 of them must not take long. */
const MOST_FACTORS = 12;

/**
 * Reads the longest unit that starts at `offset`: one word, or a compound without spaces (`V/µs`, `nV/√Hz`, `V²/Hz`, `V·s`).
 * In a formula `2 V/R1` gives `V`, as R1 is no unit; `2 V / t` gives `V`, for the space.
 * When it cannot: null, where no unit starts, also where a word merely begins like one (`V1`, `mVx`, `V_s`).
 */
export function readUnitAt(text: string, offset: number): UnitRead | null {
  const first = readFactorAt(text, offset);
  if (first === null) return null;
  let read: UnitRead = first;
  for (let factors = 1; factors < MOST_FACTORS; factors++) {
    const joint = text.charAt(read.end);
    if (joint !== '/' && joint !== '·' && joint !== '\u22c5') return read;
    const next = readFactorAt(text, read.end + 1);
    if (next === null) return read;
    const isBelow = joint === '/';
    const factor = isBelow ? quotient(read.factor, next.factor) : product(read.factor, next.factor);
    if (!Number.isFinite(factor) || factor === 0) return read;
    read = {
      unit: `${read.unit}${isBelow ? '/' : '·'}${next.unit}`,
      words: [...read.words, ...next.words],
      end: next.end,
      dimension: (isBelow ? perDimension : timesDimension)(read.dimension, next.dimension),
      factor,
      offset: 0,
      isAngle: read.isAngle || next.isAngle,
    };
  }
  return read;
}

function readFactorAt(text: string, offset: number): UnitRead | null {
  FACTOR.lastIndex = offset;
  const match = FACTOR.exec(text);
  if (match === null) return null;
  const [all, root = '', typed = '', raised = ''] = match;
  const word = WORDS.get(typed);
  if (word === undefined) return null;
  const power = (root === '' ? 1 : 0.5) * (raised === '' ? 1 : exponentOf(raised));
  const dimension = powerOfDimension(word.dimension, power);
  const factor = raise(word.factor, power);
  if (dimension === null || !Number.isFinite(factor) || factor === 0) return null;
  return {
    unit: root + word.symbol + raised,
    words: [typed],
    end: offset + all.length,
    dimension,
    factor,
    offset: power === 1 ? (word.offset ?? 0) : 0,
    isAngle: word.isAngle === true,
  };
}

function exponentOf(raised: string): number {
  return Number(raised.replace(/./g, (sign) => (sign === '⁻' ? '-' : String('⁰¹²³⁴⁵⁶⁷⁸⁹'.indexOf(sign)))));
}

// The three below keep powers of ten exact: V/µs is 1e6, not 999999.9999999999.
function product(a: number, b: number): number {
  const exponent = powerOfTen(b);
  return exponent === null ? a * b : scaled(a, exponent);
}

function quotient(a: number, b: number): number {
  const exponent = powerOfTen(b);
  return exponent === null ? a / b : scaled(a, -exponent);
}

function raise(factor: number, power: number): number {
  const exponent = (powerOfTen(factor) ?? Number.NaN) * power;
  return Number.isInteger(exponent) ? scaled(1, exponent) : factor ** power;
}

/** Gives n where the factor is exactly 10ⁿ, else null. */
export function powerOfTen(factor: number): number | null {
  const [digits, power] = factor.toExponential().split('e');
  return digits === '1' ? Number(power) : null;
}

/** Reads a text that is one unit and nothing else; null where it is not. */
export function readUnit(text: string): Unit | null {
  const read = readUnitAt(text, 0);
  return read !== null && read.end === text.length ? read : null;
}

/**
 * Converts a number as typed (digits with a point, an exponent if need be) to SI, each decimal prefix exactly:
 * `4.7` in nF gives the number written 4.7e-9. `difference` leaves the offset of °C out.
 */
export function toSi(decimal: string, unit: Pick<Unit, 'factor' | 'offset'>, difference = false): number {
  const exponent = powerOfTen(unit.factor);
  const [digits = '', power = '0'] = decimal.toLowerCase().split('e');
  // Clamped, as a power of 24 digits would itself be written with an exponent.
  const shift = Math.min(9999, Math.max(-9999, Number(power))) + (exponent ?? 0);
  const product = exponent === null ? Number(decimal) * unit.factor : Number(`${digits}e${shift}`);
  return difference ? product : product + unit.offset;
}

/** Undoes `toSi`: the number that is written before the unit, decimal prefixes exactly. */
export function fromSi(si: number, unit: Pick<Unit, 'factor' | 'offset'>, difference = false): number {
  const exponent = powerOfTen(unit.factor);
  const product = difference ? si : si - unit.offset;
  return exponent === null ? product / unit.factor : scaled(product, -exponent);
}

/** Units of the same dimension whose spelling differs only by case or by Ω and µ written in letters; for hints. */
export function unitsSpeltLike(typed: string): readonly string[] {
  const folded = fold(typed);
  const found = new Set<string>();
  for (const [spelling, word] of WORDS) if (fold(spelling) === folded) found.add(word.symbol);
  return [...found];
}

function fold(spelling: string): string {
  return spelling
    .toLowerCase()
    .replace(/ω|\u2126/g, 'ohm')
    .replace(/[µ\u03bc]/g, 'u');
}
