import type { CheckedExpr } from './syntax.ts';

/** A formula ready to run on a frame of numbers (SI base units, levels in dB; truth is 1 or 0). May give NaN or an infinity: see `sampleAt`. */
export type LinkedFormula = (frame: Float64Array) => number;

/** Makes the closure for one value. `slotOf` gives the place of each name in the frame. The closure allocates nothing and cannot throw. */
export function linkScalar(_checked: CheckedExpr, _slotOf: (name: string) => number): LinkedFormula {
  throw new Error('formula/link is being written');
}
