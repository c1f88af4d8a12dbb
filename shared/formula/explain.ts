import type { Sample, UnboundedReason } from './outcome.ts';
import type { CheckedExpr } from './syntax.ts';

/** The values that a formula was run on. */
export interface Values {
  /** SI base units; may be NaN or an infinity where a name has no finite value. */
  valueOf(name: string): number;
  /** How a name came to its value; with it the cause is found in the formula where it arose. */
  sampleOf?(name: string): Sample | undefined;
}

/** Turns the number that a linked formula gave for these values into a Sample; walks the tree only if it is not finite. */
export function sampleAt(_checked: CheckedExpr, _raw: number, _values: Values): Sample {
  throw new Error('formula/explain is being written');
}

/** Finds why a formula is unbounded for these values; null if it is not. */
export function unboundedReason(_checked: CheckedExpr, _values: Values): UnboundedReason | null {
  throw new Error('formula/explain is being written');
}
