import { assertNever, type Fact, type Facts, type Wording } from '#text';
import type { NoValueReason, UnboundedReason } from './outcome.ts';

export type FormulaCode =
  | 'formula-empty'
  | 'formula-too-long'
  | 'formula-too-deep'
  | 'unexpected-character'
  | 'unexpected-token'
  | 'operator-spelling'
  | 'missing-operand'
  | 'unclosed-bracket'
  | 'malformed-number'
  | 'number-too-large'
  | 'shorthand-number'
  | 'implied-multiplication'
  | 'unit-or-name'
  | 'unit-apart'
  | 'unit-without-number'
  | 'power-of-quantity'
  | 'chained-comparison'
  | 'unknown-name'
  | 'unknown-function'
  | 'function-without-arguments'
  | 'argument-count'
  | 'dimension-mismatch'
  | 'argument-dimension'
  | 'root-dimension'
  | 'power-exponent'
  | 'truth-for-number'
  | 'number-for-truth'
  | 'celsius-sum'
  | 'definition-cycle';

function list(fact: Fact | undefined): readonly string[] {
  return typeof fact === 'object' ? fact : [];
}

function found(facts: Facts): string {
  return facts.found === '' ? 'the end of the formula' : String(facts.found);
}

function didYouMean(facts: Facts): string | undefined {
  return facts.near === '' ? undefined : `Did you mean ${facts.near}?`;
}

/** The sentence and the hint of every code of this room. */
export const FORMULA_WORDING = {
  'formula-empty': {
    message: () => 'The formula is empty, but it needs an expression.',
    hint: () => 'Write for example R2 / R1.',
  },
  'formula-too-long': {
    message: (f) => `The formula is ${f.length} characters long, but at most ${f.most} are read.`,
    hint: () => 'Split it into several Results.',
  },
  'formula-too-deep': {
    message: (f) => `The formula is nested deeper than ${f.most} levels.`,
    hint: () => 'Split it into several Results.',
  },
  'unexpected-character': {
    message: (f) => `Unexpected ${f.found}, which is not read in a formula.`,
    hint: (f) =>
      f.instead !== ''
        ? `Write ${f.instead} instead.`
        : String(f.found).startsWith('&')
          ? 'Write the character itself.'
          : undefined,
  },
  'unexpected-token': {
    message: (f) => `Unexpected ${found(f)}, expected ${f.expected}.`,
    hint: (f) =>
      f.found === ',' ? 'Write decimals with a point; a comma separates the arguments of a function.' : undefined,
  },
  'operator-spelling': {
    message: (f) => `Unexpected ${f.found}, expected ${f.instead}.`,
    hint: (f) => `Write ${f.instead} instead of ${f.found}.`,
  },
  'missing-operand': {
    message: (f) => `Unexpected ${found(f)}, expected a value.`,
    hint: () => 'Write a number, a name or a bracket here.',
  },
  'unclosed-bracket': {
    message: () => 'The bracket is opened here, but not closed.',
    hint: () => 'Add ) where it ends.',
  },
  'malformed-number': {
    message: (f) => `Unexpected ${f.found}, expected a number such as 4700, 4.7 or 4.7e3.`,
    hint: () => 'Write digits, at most one point with a digit after it, and no separators.',
  },
  'number-too-large': {
    message: (f) => `${f.found} is larger than any number that can be calculated with (1.8e308).`,
  },
  'shorthand-number': {
    message: (f) => `${f.found} is read in fields and attributes, but a formula needs the unit.`,
    hint: (f) => `Write ${f.write}.`,
  },
  'implied-multiplication': {
    message: (f) => `Unexpected ${f.after} after ${f.before}, expected an operator: no multiplication is implied.`,
    hint: (f) => {
      const like = list(f.units);
      const unit = like.length > 0 ? ` The unit is written ${like.join(' or ')}.` : '';
      return `To multiply, write ${f.write}.${unit}`;
    },
  },
  'unit-or-name': {
    message: (f) => `${f.name} is a unit, but it is also a name in this calculator.`,
    hint: (f) =>
      f.asUnit === ''
        ? `Write ${f.asName} for the name. For the unit, give the name ${f.name} another spelling.`
        : `Write ${f.asName} for the name, ${f.asUnit} for the unit.`,
  },
  'unit-apart': {
    message: (f) => `The unit ${f.unit} stands too far from ${f.number}: at most one space may be between them.`,
    hint: (f) => `Write ${f.number} ${f.unit}.`,
  },
  'unit-without-number': {
    message: (f) => `${f.unit} is a unit, but it has no number before it, and no name in this calculator is ${f.unit}.`,
    hint: (f) => `Write 1 ${f.unit} for the unit.`,
  },
  'power-of-quantity': {
    message: (f) => `${f.number} ${f.unit} with an exponent can be read in two ways.`,
    hint: (f) => `Write (${f.number} ${f.unit})^… to raise the number as well, ${f.number} * (1 ${f.unit})^… if not.`,
  },
  'chained-comparison': {
    message: () => 'Unexpected second comparison, expected the end of the first.',
    hint: () => 'Write a < x and x < b.',
  },
  'unknown-name': {
    message: (f) => `${f.name} is not a name in this calculator.`,
    hint: (f) => didYouMean(f) ?? 'Names are those of its Givens, choices and Results; case matters.',
  },
  'unknown-function': {
    message: (f) => `${f.name} is not a function.`,
    hint: didYouMean,
  },
  'function-without-arguments': {
    message: (f) => `${f.name} is a function, but it has no arguments here.`,
    hint: (f) => `Write ${f.name}(…).`,
  },
  'argument-count': {
    message: (f) => {
      const needs = f.least === f.most ? `${f.least}` : `${f.least} to ${f.most}`;
      return `${f.name} has ${f.count} argument${f.count === 1 ? '' : 's'}, but it needs ${needs}.`;
    },
  },
  'dimension-mismatch': {
    message: (f) =>
      /^[a-z]/.test(String(f.operation))
        ? `This is of the kind ${f.right}, but ${f.operation} needs it to be like its other arguments: ${f.left}.`
        : `${f.left} ${f.operation} ${f.right}: both sides of ${f.operation} need the same kind of quantity.`,
    hint: (f) => (f.levels === 1 ? 'db(x) makes a level of a ratio, from_db(x) a ratio of a level.' : undefined),
  },
  'argument-dimension': {
    message: (f) =>
      f.name === '^'
        ? `The exponent is of the kind ${f.found}, but it needs to be a ratio.`
        : `The argument of ${f.name} is of the kind ${f.found}, but it needs to be a ${f.needs}.`,
    hint: (f) => {
      if (f.needs === 'level') return 'A level is a number in dB, such as 20 dB or db(x).';
      if (f.found === 'level in dB') return 'from_db(x) makes a ratio of a level.';
      return f.unit === '' ? undefined : `Divide it by a value of the same kind, such as 1 ${f.unit}.`;
    },
  },
  'root-dimension': {
    message: (f) => `The root of this has no unit: its kind is ${f.found}.`,
    hint: () => 'Roots are taken of ratios and of squares, such as V², and of Hz.',
  },
  'power-exponent': {
    message: (f) =>
      f.found === ''
        ? `The base is of the kind ${f.base}, but then the exponent needs to be a constant.`
        : `The base is of the kind ${f.base}, but then the exponent needs to be a whole or half number of at most ${f.most}, not ${f.found}.`,
    hint: () => 'Divide the base by a value of its kind first, or write an exponent such as 2, 1/2 or -1.',
  },
  'truth-for-number': {
    message: () => 'This is a comparison, which is true or false, but a number is needed here.',
    hint: () => 'Write if(test, a, b) to choose between two numbers.',
  },
  'number-for-truth': {
    message: (f) => `This is a number (${f.found}), but a comparison is needed here.`,
    hint: () => 'Write for example x > 0.',
  },
  'celsius-sum': {
    message: (f) =>
      `Both are temperatures on the Celsius scale, but their sum is none: ${f.found} counts from −273.15 °C.`,
    hint: () => 'Write the difference in K.',
  },
  'definition-cycle': {
    message: (f) => `The definitions go in a circle: ${list(f.path).join(' → ')}.`,
    hint: () => 'At least one of them needs a formula without the others.',
  },
} as const satisfies Record<FormulaCode, Wording>;

/** Why a result is unbounded, to stand after "unbounded: ": `R1·R4 and R2·R3 cancel`. */
export function unboundedWords(reason: UnboundedReason): string {
  switch (reason.kind) {
    case 'cancel':
      return `${reason.left} and ${reason.right} cancel`;
    case 'zero':
      return reason.term === '0' ? 'zero stands in its place' : `${reason.term} is zero`;
    case 'too-large':
      return `${reason.term} is too large to calculate`;
    case 'name':
      return `${reason.name} is unbounded`;
    default:
      return assertNever(reason);
  }
}

const NO_VALUE_WORDS = {
  'zero-over-zero': 'zero divided by zero',
  'infinite-over-infinite': 'unbounded divided by unbounded',
  'infinite-difference': 'the difference of two unbounded values',
  'zero-times-infinite': 'zero times an unbounded value',
  'root-of-negative': 'root of a negative number',
  'log-of-negative': 'logarithm of a negative number',
  'outside-domain': 'the function is not defined there',
  'not-a-number': 'a value that it needs is missing',
} as const satisfies Record<NoValueReason, string>;

/** Why there is no value, to stand after "no value: ": `zero divided by zero`. */
export function noValueWords(reason: NoValueReason): string {
  return NO_VALUE_WORDS[reason];
}
