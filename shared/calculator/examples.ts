import type { Upstream } from './inputs.ts';
import type { LinkedCalculator } from './link.ts';
import type { ExampleModel } from './model.ts';

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

/** Evaluates the calculator at the recipe's values with those of the example set, and compares. An example that expects nothing has not passed. */
export function runExample(_linked: LinkedCalculator, _example: ExampleModel, _upstream: Upstream = {}): ExampleRun {
  throw new Error('calculator/examples is being written');
}
