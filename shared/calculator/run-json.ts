import type { Inputs } from './inputs.ts';
import type { CalculatorModel, LimitState } from './model.ts';
import type { Evaluation } from './outcome.ts';

/** One calculator of `recipe run --json`: see the recipe language, section 9. Numbers in SI base units, null where none is finite. */
export interface RunJson {
  readonly inputs: Readonly<
    Record<string, { readonly si: number | null; readonly low?: number; readonly high?: number; readonly text: string }>
  >;
  readonly results: Readonly<
    Record<
      string,
      {
        readonly si: number | null;
        readonly low?: number | null;
        readonly high?: number | null;
        readonly unit: string;
        readonly text: string;
        readonly problem?: {
          readonly code: 'unbounded' | 'no-value';
          readonly sign?: 1 | -1;
          readonly message: string;
        };
      }
    >
  >;
  readonly limits: readonly {
    readonly name: string;
    readonly level: 'stop' | 'caution';
    readonly state: LimitState;
    readonly held: boolean;
    readonly held_nominal: boolean;
    readonly value: number | null;
    readonly from: number | null;
    readonly to: number | null;
    readonly margin: number | null;
  }[];
}

/** Makes the calculator's part of the command line's JSON. A waiting result has the problem `no-value` with what it waits for. */
export function toRunJson(_model: CalculatorModel, _inputs: Inputs, _evaluation: Evaluation): RunJson {
  throw new Error('calculator/run-json is being written');
}
