import type { QuantityProblem } from '#quantity';
import type { Diagnostic } from '#text';
import type { Evaluated } from './evaluate.ts';
import type { CalculatorModel } from './model.ts';
import type { FieldCode } from './wording.ts';

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
  /** What was understood, for people: `4.700 kΩ`, `−2.000 to 2.000 V`. */
  readonly understood: string;
  /** The same to the last digit and with its unit, for keeping: `4.7 kΩ`, `-2 V to 2 V`. */
  readonly plain: string;
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

/** Calculators further up the page, by id. */
export type Upstream = Readonly<Record<string, Evaluated>>;

export interface InputOptions {
  /** Whether a comma is a decimal sign for this person. */
  readonly decimalComma?: boolean;
  readonly upstream?: Upstream;
  /** The inputs as last shown, e.g. before the field got the focus: the unit of a bare number and the last good numbers. */
  readonly lastShown?: Inputs;
}

/**
 * Reads every field of a calculator. A field without text (absent or null) takes the recipe's value or, with `from`, the
 * earlier calculator's; names that the calculator lacks are ignored.
 * When it cannot: the field is refused with a problem, and what depends on it waits. Never throws on a text.
 */
export function readInputs(
  _model: CalculatorModel,
  _texts: Readonly<Record<string, string | null>>,
  _options: InputOptions = {},
): Inputs {
  throw new Error('calculator/inputs is being written');
}

/** Puts the last good numbers in place of refused fields, so that the last good results can be shown, marked as such. */
export function withLastGood(_inputs: Inputs): Inputs {
  throw new Error('calculator/inputs is being written');
}
