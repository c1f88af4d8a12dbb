import type { QuantityProblem } from '#quantity';
import type { Diagnostic } from '#text';
import type { LinkedCalculator } from './link.ts';
import type { Evaluation } from './outcome.ts';

/** What a field can be refused for beyond what no quantity can be read from. */
export type FieldCode = 'outside-limits' | 'not-an-option' | 'too-many-ranges';

/** Why a text in a field is no value. The span counts within that text; `fieldMessage` words it. */
export type FieldProblem = QuantityProblem | Diagnostic<FieldCode>;

interface FieldText {
  readonly name: string;
  /** As it stands in the field: typed, or the recipe's. */
  readonly text: string;
  readonly origin: 'recipe' | 'typed' | 'earlier';
}

/** A value in SI base units, or with `low < high` a range. */
export interface ReadField extends FieldText {
  readonly state: 'read';
  readonly low: number;
  readonly high: number;
  /** With prefix; what a bare number takes next. */
  readonly unit: string;
  /** What was understood, to the last digit and with its unit: `4.7 kΩ`, `−2 V to 2 V`. Reading it gives the same value, whatever unit was shown before, so it is also the text to keep. */
  readonly understood: string;
  /** Broken stop limits of the earlier calculator that this value comes from, `title: limit`. */
  readonly notValid: readonly string[];
}

export type InputField =
  | ReadField
  /** `lastGood` is the field as last shown with a value, if the caller knew it. */
  | (FieldText & { readonly state: 'refused'; readonly problem: FieldProblem; readonly lastGood?: ReadField })
  /** The earlier calculator has no finite number for it; `because` says why, in words. */
  | (FieldText & { readonly state: 'waiting'; readonly because: string });

export interface Inputs {
  /** By name, one for each given. */
  readonly fields: ReadonlyMap<string, InputField>;
  /** Names whose text was refused, in the order of the givens. */
  readonly refused: readonly string[];
}

/** One calculator with the inputs it was evaluated for. */
export interface Evaluated {
  readonly linked: LinkedCalculator;
  readonly inputs: Inputs;
  readonly evaluation: Evaluation;
}

/** Calculators further up the page, by id. */
export type Upstream = Readonly<Record<string, Evaluated>>;
