import type { Facts, Wording } from '#text';
import { didYouMean, oneOf } from './word-lists.ts';

/** The sentence and the hint of every code about calculators, examples and hazards. */
export const CALCULATOR_WORDING = {
  'duplicate-id': {
    message: (f) => `The id ${f.id} stands twice on this page.`,
  },
  'id-form': {
    message: (f) => `“${f.id}” is no id: it needs a letter first, then letters, digits, - and _.`,
  },
  'name-form': {
    message: (f) => `“${f.name}” is no name: it needs a letter first, then letters, digits and _.`,
  },
  'name-reserved': {
    message: (f) => `${f.name} is a ${f.meaning} of formulas and cannot be a name.`,
  },
  'duplicate-name': {
    message: (f) => `The name ${f.name} is taken already in this calculator.`,
  },
  'duplicate-limit': {
    message: (f) => `A Limit named “${f.name}” stands already in this calculator.`,
  },
  'ranges-too-many': {
    message: (f) => `This is one range too many: at most ${f.most} inputs of a calculator may be ranges.`,
  },
  'min-above-max': {
    message: (f) => `min is ${f.min}, which is above max, ${f.max}.`,
  },
  'value-outside': {
    message: (f) => `The value is ${f.value}, but the field takes ${limits(f)}.`,
  },
  'value-no-option': {
    message: (f) => `The value is ${f.value}, which is none of the options.`,
    hint: (f) => `Expected ${oneOf(f.options)}.`,
  },
  'options-form': {
    message: (f) => `“${f.found}” is no option: a value, a colon and words are needed.`,
    hint: () => 'Write options="2: two-wire; 4: four-wire".',
  },
  'reading-quantity': {
    message: (f) => `reading is for voltages and currents, but this is a ${f.found}.`,
  },
  'reference-form': {
    message: (f) => `“${f.found}” needs a calculator and a name, such as divider.R2.`,
  },
  'from-later': {
    message: (f) => `The calculator ${f.calculator} does not stand above this one, but from needs an earlier one.`,
  },
  'from-dimension': {
    message: (f) => `The value it comes from is a ${f.found}, but this Given is a ${f.quantity}.`,
  },
  'calculator-unknown': {
    message: (f) => `There is no calculator “${f.id}”.`,
    hint: (f) => (oneOf(f.known) === '' ? undefined : `Expected ${oneOf(f.known)}.`),
  },
  'calculator-name-unknown': {
    message: (f) => `The calculator ${f.id} has no ${f.name}.`,
    hint: (f) => (oneOf(f.known) === '' ? undefined : `Expected ${oneOf(f.known)}.`),
  },
  'tolerance-relative': {
    message: (f) => `A ${f.quantity} has no relative tolerance.`,
    hint: () => 'Write it in the unit of the value.',
  },
  'tolerance-dimension': {
    message: (f) => `The tolerance is a ${f.found}, but needs a ratio such as 1 %, or a ${f.quantity}.`,
  },
  'attribute-dimension': {
    message: (f) => `${f.name} is a ${f.found}, but needs a ${f.needs}.`,
  },
  'within-form': {
    message: () => 'within needs two formulas with a comma between: the lowest and the highest.',
  },
  'within-dimension': {
    message: (f) => `The lowest is a ${f.lowest}, but the highest a ${f.highest}.`,
  },
  'result-without-formula': {
    message: (f) => `The Result ${f.name} has no formula.`,
    hint: () => 'Write formula="…".',
  },
  'limit-without-bound': {
    message: () => 'The Limit has no bound: it needs from, to or both.',
  },
  'limit-dimension': {
    message: (f) => `${f.what} is a ${f.found}, but what is judged is a ${f.of}.`,
  },
  'input-unknown': {
    message: (f) => `There is no input “${f.name}” in this calculator.`,
    hint: (f) => didYouMean(f.near, f.known),
  },
  'result-unknown': {
    message: (f) => `There is no Result “${f.name}” in this calculator.`,
    hint: (f) => didYouMean(f.near, f.known),
  },
  'limit-unknown': {
    message: (f) => `There is no Limit “${f.name}” in this calculator.`,
    hint: (f) => didYouMean(f.near, f.known),
  },
  'set-result': {
    message: (f) => `${f.name} is a Result: it is worked out and cannot be set.`,
  },
  'set-part': {
    message: (f) => `“${f.found}” cannot be set: a name or a name with .tolerance is needed.`,
  },
  'set-twice': {
    message: (f) => `${f.name} is set twice in this example.`,
  },
  'set-outside': {
    message: (f) => `${f.name} is set to ${f.value}, but its field does not take that.`,
  },
  'expect-nothing': {
    message: () => 'Expect needs a name (with to) or a limit (with state).',
  },
  'expect-mixed': {
    message: (f) => `${f.name} does not go with the rest of this Expect.`,
    hint: () => 'A Result goes with to, at and within; a Limit with state.',
  },
  'expect-at': {
    message: (f) => `Unexpected “${f.found}” for at.`,
    hint: () => 'Expected worst low, worst high, p0.1, p1, p50, p99 or p99.9.',
  },
  'expect-zero': {
    message: () => 'Zero is expected, so a relative allowance would be zero too.',
    hint: () => 'Write within in the unit of the Result, such as within="1 mV".',
  },
  'within-positive': {
    message: (f) => `within is ${f.found}, but needs more than zero.`,
  },
  'example-without-expect': {
    message: () => 'The Example expects nothing.',
    hint: () => 'Add an Expect.',
  },
  'source-unknown': {
    message: (f) => `The source “${f.found}” is not in the front matter.`,
    hint: (f) => didYouMean(f.near, f.known),
  },
  'example-failed': {
    message: (f) =>
      `${f.what} is ${f.got}, but the Example expects ${f.expected}${f.within === '' ? '' : ` within ${f.within}`}.`,
  },
  'limit-at-defaults': {
    message: (f) => `With the recipe’s own values this Limit is broken: ${f.words}.`,
    hint: () => 'Choose values that it holds for, or judge it over="nominal".',
  },
  'caution-missing': {
    message: (f) => `The hazard ${f.hazard} has no Caution.`,
    hint: (f) => `Write <Caution kind="${f.hazard}">…</Caution>.`,
  },
  'caution-unlisted': {
    message: (f) => `This Caution is about ${f.kind}, which the hazards of the front matter lack.`,
    hint: (f) => `Add ${f.kind} to hazards.`,
  },
  'hazard-missing': {
    message: (f) => `${f.what} can reach ${f.volts}, which is above ${f.most} peak, but no hazard says so.`,
    hint: () => 'Add mains, high voltage, battery or stored energy to hazards, with its Caution.',
  },
} satisfies Record<string, Wording>;

function limits({ min, max }: Facts): string {
  if (min === '') return `at most ${max}`;
  return max === '' ? `at least ${min}` : `${min} to ${max}`;
}
