import type { CheckedExpr } from './syntax.ts';

/** Several formulas as one straight-line program over columns of samples. */
export interface BlockProgram {
  /**
   * Shape: `inputs[slot]` and `outputs[i]` hold at least `count` numbers; outputs stand in the order of the definitions.
   * NaN and infinities may stand in the outputs.
   */
  run(inputs: readonly Float64Array[], outputs: readonly Float64Array[], count: number): void;
}

/**
 * Compiles definitions, each after all it reads, to one program. A name is first looked for among the definitions above,
 * then in the columns by `slotOf`. Gives bit for bit what `linkScalar` gives.
 */
export function linkBlock(
  _definitions: readonly { readonly name: string; readonly formula: CheckedExpr }[],
  _slotOf: (name: string) => number,
): BlockProgram {
  throw new Error('formula/block is being written');
}
