/**
 * The calculator of a page: its model as the document stores it, and what it comes to for a set of inputs.
 * Terms: given, choice, result, limit, example; field (a text and what was understood of it), sample (one point),
 * outcome (a result, over its ranges), cure (the nearest change of one input that mends a limit).
 * Order of use: `linkCalculator` once a document, then per change `readInputs` → `evaluate` → `describe…`.
 * Units: SI base units inside, levels in dB, temperatures in kelvin, alternating quantities as peaks.
 * Opens text, quantity and formula.
 */
export { type Cure, findCure } from './cure.ts';
export { type Described, type DescribedLimit, describeLimit, describeOutcome } from './describe.ts';
export { evaluate, evaluateInOrder } from './evaluate.ts';
export { type ExampleRow, type ExampleRun, runExample } from './examples.ts';
export { type Explanation, explainResult, type NumberSource } from './explain.ts';
export type { Evaluated, FieldCode, FieldProblem, InputField, Inputs, ReadField, Upstream } from './inputs.ts';
export { type LinkedCalculator, type LinkedLimit, type LinkedResult, linkCalculator } from './link.ts';
export type {
  CalculatorModel,
  Choice,
  Entry,
  ExampleModel,
  Expectation,
  Given,
  LimitModel,
  LimitState,
  PlotModel,
  ResultModel,
  Uncertainty,
} from './model.ts';
export type { Evaluation, LimitOutcome, NoValueReason, Outcome, Sample, UnboundedReason } from './outcome.ts';
export { type InputOptions, readInputs, withLastGood } from './read-inputs.ts';
export { type RunJson, toRunJson } from './run-json.ts';
export { type ShownNumbers, shownNumbers } from './shown-numbers.ts';
export { fieldMessage, LIMIT_STATE_WORDS } from './wording.ts';
