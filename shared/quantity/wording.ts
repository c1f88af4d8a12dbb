import type { Diagnostic } from '#text';

/** What each refusal of a quantity knows. `typed` and `unit` are as in the text; `write` is what would be read. */
export type QuantityFacts = {
  readonly 'value-missing': { readonly example: string };
  readonly 'not-a-number': { readonly typed: string };
  readonly 'number-too-long': { readonly most: number };
  readonly 'number-too-large': { readonly typed: string };
  readonly 'number-too-small': { readonly typed: string };
  readonly 'not-whole': { readonly typed: string };
  readonly 'decimal-comma': { readonly typed: string; readonly write: string };
  readonly 'comma-unclear': { readonly typed: string; readonly write: string; readonly or: string };
  readonly 'digit-groups': { readonly typed: string; readonly write: string };
  readonly 'too-many-spaces': { readonly write: string };
  readonly 'unit-missing': { readonly typed: string; readonly quantity: string; readonly write: string };
  readonly 'unit-unknown': { readonly unit: string; readonly near: readonly string[]; readonly expected: string };
  readonly 'unit-wrong': {
    readonly unit: string;
    /** What the unit measures. */
    readonly measures: string;
    readonly quantity: string;
    /** A unit that fits; '' where none is written. */
    readonly expected: string;
  };
  readonly 'prefix-case': { readonly typed: string; readonly write: string };
  readonly 'level-needs-rms': { readonly unit: string };
  readonly 'below-absolute-zero': { readonly typed: string };
  readonly 'range-refused': { readonly typed: string };
  readonly 'ends-crossed': { readonly low: string; readonly high: string };
  readonly 'deviation-negative': { readonly typed: string };
};

export type QuantityCode = keyof QuantityFacts;

/** Why a text is no value. The span counts within the text that was given to `readValue`; the caller moves it. */
export type QuantityProblem = {
  readonly [Code in QuantityCode]: Diagnostic<Code> & { readonly facts: QuantityFacts[Code] };
}[QuantityCode];

type QuantityWording = {
  readonly [Code in QuantityCode]: {
    message(facts: QuantityFacts[Code]): string;
    hint?(facts: QuantityFacts[Code]): string | undefined;
  };
};

/** One or two sentences for each code: a table of `Wording`s, but with the facts that each code has. */
export const QUANTITY_WORDING: QuantityWording = {
  'value-missing': {
    message: () => 'A value is missing.',
    hint: ({ example }) => `Write a number${example === '' ? '' : ` and a unit, such as ${example}`}.`,
  },
  'not-a-number': {
    message: ({ typed }) => `Unexpected “${typed}”, expected a number.`,
  },
  'number-too-long': {
    message: ({ most }) => `This value is longer than the ${most} characters that are read.`,
    hint: () => 'Round it, or write it with a prefix or an exponent.',
  },
  'number-too-large': {
    message: ({ typed }) => `${typed} is larger than any number that can be worked with.`,
  },
  'number-too-small': {
    message: ({ typed }) => `${typed} is so small that it would count as zero.`,
    hint: () => 'Write 0 if zero is meant.',
  },
  'not-whole': {
    message: ({ typed }) => `${typed} is not a whole number, but a count needs one.`,
  },
  'decimal-comma': {
    message: ({ typed }) => `${typed} has a decimal comma, but a decimal point is needed here.`,
    hint: ({ write }) => `Write ${write}.`,
  },
  'comma-unclear': {
    message: ({ typed }) => `${typed} can be read in two ways.`,
    hint: ({ write, or }) => `Write ${write} or ${or}.`,
  },
  'digit-groups': {
    message: ({ typed }) => `${typed} has its digits in groups, but a number is written without gaps.`,
    hint: ({ write }) => `Write ${write}.`,
  },
  'too-many-spaces': {
    message: () => 'At most one space stands between a number and its unit.',
    hint: ({ write }) => `Write ${write}.`,
  },
  'unit-missing': {
    message: ({ typed, quantity }) => `${typed} has no unit, but ${one(quantity)} needs one.`,
    hint: ({ write }) => `Write ${write}, for example.`,
  },
  'unit-unknown': {
    message: ({ unit }) => `There is no unit “${unit}”.`,
    hint: ({ near, expected }) => {
      if (near.length > 0) return `Write ${near.join(' or ')}.`;
      return expected === '' ? undefined : `Expected a unit such as ${expected}.`;
    },
  },
  'unit-wrong': {
    message: ({ unit, measures, quantity }) =>
      `${unit} measures ${one(measures)}, but ${one(quantity)} is needed here.`,
    hint: ({ expected }) =>
      expected === '' ? 'Write the number without a unit.' : `Expected a unit such as ${expected}.`,
  },
  'prefix-case': {
    message: ({ typed }) => `In “${typed}” a capital and a small letter are exchanged.`,
    hint: ({ write }) => `Write ${write}.`,
  },
  'level-needs-rms': {
    message: ({ unit }) => `${unit} is a level of an RMS voltage, but this value is not read as RMS.`,
    hint: () => 'Write it in volts, or set reading="rms" on the Given.',
  },
  'below-absolute-zero': {
    message: ({ typed }) => `${typed} is below absolute zero, −273.15 °C.`,
  },
  'range-refused': {
    message: ({ typed }) => `${typed} is a range, but a single value is needed here.`,
  },
  'ends-crossed': {
    message: ({ low, high }) => `The range starts at ${low}, which is above its end, ${high}.`,
    hint: ({ low, high }) => `Write ${high} to ${low}.`,
  },
  'deviation-negative': {
    message: ({ typed }) => `${typed} after ± is negative, but ± needs a size.`,
    hint: () => 'Leave out the minus.',
  },
};

/** A dimension without a name stands as its unit, V·Ω, and takes no article. */
function one(noun: string): string {
  if (!/^[a-zA-Z -]+$/.test(noun)) return noun;
  return `${/^[aeiou]/.test(noun) ? 'an' : 'a'} ${noun}`;
}
