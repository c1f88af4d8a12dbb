import { fail, ok, type Result } from '#text';
import type { QuantityKind } from './kinds.ts';
import type { QuantityCode, QuantityFacts } from './wording.ts';

/** A refusal of a number, before its place is known. */
export type Refusal = {
  readonly [Code in QuantityCode]: { readonly code: Code; readonly facts: QuantityFacts[Code] };
}[QuantityCode];

export interface NumberRead {
  /** With a point, a hyphen for a minus, and the exponent as typed: `Number` reads it. */
  readonly decimal: string;
  readonly end: number;
}

/** Longer numbers are slips of the keyboard; the exact value of a double never needs more. */
const MOST_CHARACTERS = 40;
const NUMBER = /[+\-−]?[0-9.,]+(?:[eE][+\-−]?[0-9]+)?/y;
const PLAIN = /^[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:e[+-]?[0-9]+)?$/i;

/**
 * Reads a number at `offset`: digits, a point, an exponent, `-` or `−`.
 * When it cannot: `not-a-number`, `number-too-long`, `decimal-comma` (commas are not read here), `comma-unclear`
 * (`4,700` may be four thousand), `digit-groups`.
 */
export function readNumberAt(text: string, offset: number, readsComma: boolean): Result<NumberRead, Refusal> {
  NUMBER.lastIndex = offset;
  const typed = NUMBER.exec(text)?.[0];
  if (typed === undefined || !/[0-9]/.test(typed)) {
    return fail({ code: 'not-a-number', facts: { typed: shortened(text.slice(offset)) } });
  }
  if (typed.length > MOST_CHARACTERS) return fail({ code: 'number-too-long', facts: { most: MOST_CHARACTERS } });
  const withPoint = withoutComma(typed.replaceAll('−', '-'), readsComma);
  if (!withPoint.ok) return withPoint;
  if (!PLAIN.test(withPoint.value)) return fail({ code: 'not-a-number', facts: { typed } });
  return ok({ decimal: withPoint.value, end: offset + typed.length });
}

function withoutComma(typed: string, readsComma: boolean): Result<string, Refusal> {
  if (!typed.includes(',')) return ok(typed);
  const write = typed.replace(',', '.');
  if (write.includes(',') || typed.includes('.')) {
    return fail({ code: 'digit-groups', facts: { typed, write: withoutGroups(typed) } });
  }
  if (!readsComma) return fail({ code: 'decimal-comma', facts: { typed, write } });
  if (/^[+-]?[1-9][0-9]{0,2},[0-9]{3}$/.test(typed)) {
    return fail({ code: 'comma-unclear', facts: { typed, write, or: typed.replace(',', '') } });
  }
  return ok(write);
}

/** The sign that stands last and once is the decimal sign: 1,234.5 and 1.234,5 both give 1234.5. */
function withoutGroups(typed: string): string {
  const last = Math.max(typed.lastIndexOf(','), typed.lastIndexOf('.'));
  const isDecimal = typed.indexOf(typed.charAt(last)) === last;
  const head = typed.slice(0, last).replace(/[.,]/g, '');
  return `${head}${isDecimal ? '.' : ''}${typed.slice(last + 1)}`;
}

/** Cuts what is quoted in a message. */
export function shortened(typed: string): string {
  return typed.length <= 24 ? typed : `${typed.slice(0, 23)}…`;
}

interface MarkingLetters {
  readonly letters: Readonly<Record<string, string>>;
  readonly pattern: RegExp;
}

/**
 * The letter stands for the prefix and, between digits, for the point: 4k7, 2R2, R33, 4n7.
 * Source: IEC 60062:2016 for resistors and capacitors (`L` for milliohm from memory; the standard writes `K`, common
 * practice `k`); for inductors common practice, no source.
 */
const MARKINGS: { readonly [Kind in QuantityKind]?: MarkingLetters } = {
  resistance: {
    letters: { L: 'mΩ', R: 'Ω', k: 'kΩ', K: 'kΩ', M: 'MΩ', G: 'GΩ', T: 'TΩ' },
    pattern: /^([+\-−]?)([0-9]*\.?[0-9]*)([LRkKMGT])([0-9]*)$/,
  },
  capacitance: {
    letters: { p: 'pF', n: 'nF', µ: 'µF', '\u03bc': 'µF', u: 'µF', m: 'mF', F: 'F' },
    pattern: /^([+\-−]?)([0-9]*\.?[0-9]*)([pnµ\u03bcumF])([0-9]*)$/,
  },
  inductance: {
    letters: { n: 'nH', µ: 'µH', '\u03bc': 'µH', u: 'µH', m: 'mH' },
    pattern: /^([+\-−]?)([0-9]*\.?[0-9]*)([nµ\u03bcum])([0-9]*)$/,
  },
};

export interface MarkingRead {
  readonly decimal: string;
  readonly unit: string;
}

/**
 * Reads a marking code, or a number that ends in its letter (`18.7k`: common practice, no source); null where the text is none for this kind. Tolerance letters (`4K7J`) are not read.
 * When it cannot: `prefix-case` for `10K`, which looks like kelvins, and `number-too-long`.
 */
export function readMarking(text: string, kind: QuantityKind): Result<MarkingRead, Refusal> | null {
  const marking = MARKINGS[kind];
  const match = marking?.pattern.exec(text);
  if (marking === undefined || !match) return null;
  const [, sign = '', whole = '', letter = '', part = ''] = match;
  if (!/[0-9]/.test(whole + part) || (whole.includes('.') && part !== '')) return null;
  if (text.length > MOST_CHARACTERS) return fail({ code: 'number-too-long', facts: { most: MOST_CHARACTERS } });
  if (letter === 'K' && part === '') {
    return fail({ code: 'prefix-case', facts: { typed: text, write: `${sign}${whole}k` } });
  }
  const decimal = `${sign.replace('−', '-')}${whole || '0'}${part === '' ? '' : `.${part}`}`;
  return ok({ decimal, unit: marking.letters[letter] ?? '' });
}
