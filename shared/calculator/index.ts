/**
 * The calculator of a page: its model as the document stores it, and what it comes to for a set of inputs.
 * Terms: given, choice, result, limit, example; sample (one point), outcome (a result, over its ranges).
 * Units: SI base units inside, levels in dB, temperatures in kelvin.
 */
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
export type { Evaluation, LimitOutcome, Outcome, Sample } from './outcome.ts';
