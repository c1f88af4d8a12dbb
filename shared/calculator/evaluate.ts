import type { Inputs } from './inputs.ts';
import type { LinkedCalculator } from './link.ts';
import type { Evaluation } from './outcome.ts';

/** One calculator with the inputs it was evaluated for. */
export interface Evaluated {
  readonly linked: LinkedCalculator;
  readonly inputs: Inputs;
  readonly evaluation: Evaluation;
}

/**
 * Works out every result and judges every limit: at the middle of the ranges and over the ranges that each depends on.
 * Synchronous and pure. Cost: see `searchRanges`; called on every keystroke.
 */
export function evaluate(_linked: LinkedCalculator, _inputs: Inputs): Evaluation {
  throw new Error('calculator/evaluate is being written');
}

/** Reads and evaluates the calculators of a page from top to bottom, each seeing those above it. `texts` by calculator id. */
export function evaluateInOrder(
  _calculators: readonly LinkedCalculator[],
  _texts: Readonly<Record<string, Readonly<Record<string, string | null>>>>,
  _options: { readonly decimalComma?: boolean; readonly lastShown?: Readonly<Record<string, Inputs>> } = {},
): ReadonlyMap<string, Evaluated> {
  throw new Error('calculator/evaluate is being written');
}
