import type { Layout } from '#formula';
import type { Described } from './describe.ts';
import type { Inputs } from './inputs.ts';
import type { LinkedCalculator } from './link.ts';
import type { Evaluation } from './outcome.ts';

/** Where one number of a formula comes from. */
export interface NumberSource {
  readonly name: string;
  readonly label: string;
  readonly from: 'recipe' | 'typed' | 'earlier' | 'worked-out' | 'missing';
  /** The number with its unit, a range as such; words where there is none. */
  readonly text: string;
}

export interface Explanation {
  readonly name: string;
  readonly label: string;
  readonly formula: Layout;
  readonly formulaText: string;
  /** Numbers and units put in, ranges at their middle. */
  readonly withNumbers: Layout;
  readonly withNumbersText: string;
  /** Whether a range stands behind it, so that `withNumbers` is only its middle. */
  readonly atMiddle: boolean;
  readonly outcome: Described;
  readonly sources: readonly NumberSource[];
}

/** Shows how a result comes to its number. When it cannot: null, for a name that is no result or has no formula. */
export function explainResult(
  _linked: LinkedCalculator,
  _inputs: Inputs,
  _evaluation: Evaluation,
  _name: string,
): Explanation | null {
  throw new Error('calculator/explain is being written');
}
