import { type WriteOptions, writeRange, writeValue } from '#quantity';
import { assertNever } from '#text';
import { describeLimit, describeOutcome, resultWriting } from './describe.ts';
import { evaluate } from './evaluate.ts';
import type { Inputs, Upstream } from './inputs.ts';
import type { LinkedCalculator } from './link.ts';
import type { ExampleModel, Expectation, ResultModel } from './model.ts';
import type { Evaluation, Outcome } from './outcome.ts';
import { readInputs, withValue } from './read-inputs.ts';
import { LIMIT_STATE_WORDS } from './wording.ts';

/** One expectation beside what came out, all written for people. */
export interface ExampleRow {
  readonly what: string;
  readonly expected: string;
  readonly got: string;
  /** The allowance; '' for the state of a limit. */
  readonly within: string;
  readonly passed: boolean;
  /** Set where this release cannot tell; such a row has not passed. */
  readonly code?: 'not-available-yet';
}

export interface ExampleRun {
  readonly passed: boolean;
  readonly rows: readonly ExampleRow[];
}

type NumberExpected = Extract<Expectation, { kind: 'number' }>;

/** Rounding of doubles that a bound of an allowance may be passed by; without it `to="0.3"` within 0.1 refuses 0.4. */
const ROUNDING = 1e-12;

/**
 * Evaluates the calculator at the recipe's values with those of the example set, and compares. An expectation of one
 * number holds for the lowest and the highest of a result over ranges. An example that expects nothing has not passed.
 * Tolerances that an example sets have no effect yet, so `only nominally` and `at` cannot be told: `not-available-yet`.
 */
export function runExample(linked: LinkedCalculator, example: ExampleModel, upstream: Upstream = {}): ExampleRun {
  const inputs = exampleInputs(linked, example, upstream);
  const evaluation = evaluate(linked, inputs);
  const rows = example.expects.map((expected) =>
    expected.kind === 'number'
      ? numberRow(linked, evaluation, expected)
      : limitRow(linked, evaluation, expected.limit, expected.state),
  );
  const setsAll = example.sets.every((set) => set.part === 'tolerance' || inputs.fields.has(set.name));
  return { passed: rows.length > 0 && setsAll && rows.every((row) => row.passed), rows };
}

function exampleInputs(linked: LinkedCalculator, example: ExampleModel, upstream: Upstream): Inputs {
  let inputs = readInputs(linked.model, {}, { upstream });
  for (const { name, part, to } of example.sets) {
    const given = linked.model.givens.find((one) => one.name === name);
    if (given && part === 'value') inputs = withValue(inputs, given, to.low, to.high);
  }
  return inputs;
}

function numberRow(linked: LinkedCalculator, evaluation: Evaluation, expected: NumberExpected): ExampleRow {
  const { name, to, at } = expected;
  const result = linked.results.get(name)?.model;
  const outcome = evaluation.outcomes[name];
  if (!result || !outcome) return unknownRow(name, to.text);
  const allowance =
    expected.withinIs === 'relative'
      ? expected.within * Math.max(Math.abs(to.low), Math.abs(to.high))
      : expected.within;
  const row = { what: name, expected: to.text, within: allowanceText(allowance, result) };
  if (at !== undefined) {
    return { ...row, what: `${name} at ${at}`, got: 'not worked out yet', passed: false, code: 'not-available-yet' };
  }
  return { ...row, got: gotText(outcome, result, to), passed: agrees(outcome, to, allowance) };
}

function agrees(outcome: Outcome, to: { readonly low: number; readonly high: number }, allowance: number): boolean {
  if (outcome.state !== 'known') return false;
  const { middle, over } = outcome;
  if (over && !over.everywhere) return false;
  const [lowest, highest] = over ? [over.lowest, over.highest] : [middle, middle];
  if (lowest.kind !== 'finite' || highest.kind !== 'finite') return false;
  const most = allowance + ROUNDING * Math.max(Math.abs(to.low), Math.abs(to.high));
  return Math.abs(lowest.si - to.low) <= most && Math.abs(highest.si - to.high) <= most;
}

/** With two digits more than are usual, so that a difference under the allowance shows. */
function gotText(outcome: Outcome, result: ResultModel, to: { readonly unit: string }): string {
  const options: WriteOptions = { ...resultWriting(result), digits: Math.max(result.digits ?? 0, 6), unit: to.unit };
  if (outcome.state === 'known') {
    const { middle, over } = outcome;
    if (over?.everywhere && over.lowest.kind === 'finite' && over.highest.kind === 'finite') {
      return writeRange(over.lowest.si, over.highest.si, options).text;
    }
    if (!over && middle.kind === 'finite') return writeValue(middle.si, options).text;
  }
  return describeOutcome(outcome, result).words;
}

function allowanceText(allowance: number, { quantity, dimensionUnit, reading }: ResultModel): string {
  const kind = quantity === 'temperature' ? 'temperature-difference' : quantity;
  // A level has as many places at every size, so that a small one needs more digits than two to show at all.
  const digits = kind === 'level' && allowance > 0 ? Math.max(2, 1 - Math.floor(Math.log10(allowance))) : 2;
  const options = { kind, unit: kind === null ? dimensionUnit : undefined, digits, reading };
  return `±${writeValue(allowance, options).text}`;
}

function limitRow(
  linked: LinkedCalculator,
  evaluation: Evaluation,
  name: string,
  state: Extract<Expectation, { kind: 'limit' }>['state'],
): ExampleRow {
  const model = linked.limits.find((limit) => limit.model.name === name)?.model;
  const outcome = evaluation.limits.find((limit) => limit.name === name);
  if (!model || !outcome) return unknownRow(name, LIMIT_STATE_WORDS[state]);
  const row = { what: name, expected: LIMIT_STATE_WORDS[state], within: '' };
  switch (state) {
    case 'only-nominally':
      return { ...row, got: 'not worked out yet', passed: false, code: 'not-available-yet' };
    case 'within':
    case 'close':
    case 'exceeded':
    case 'no-value':
      return { ...row, got: describeLimit(outcome, model).words, passed: outcome.state === state };
    default:
      return assertNever(state);
  }
}

function unknownRow(what: string, expected: string): ExampleRow {
  return { what, expected, got: 'not in this calculator', within: '', passed: false };
}
