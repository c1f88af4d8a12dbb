import type { LimitModel, ResultModel } from './model.ts';
import type { LimitOutcome, Outcome } from './outcome.ts';

export interface Described {
  /** Short, for the number's place: `2.007 … 6.993 V`, `unbounded`, `no value`, `waiting`. */
  readonly text: string;
  /** In full, also for reading aloud: `unbounded: R1·R4 and R2·R3 cancel`, `waiting for V_ref`, `no value: zero divided by zero`. */
  readonly words: string;
}

/** Writes an outcome with the result's unit, digits and reading. */
export function describeOutcome(_outcome: Outcome, _result: ResultModel): Described {
  throw new Error('calculator/describe is being written');
}

export interface DescribedLimit {
  /** `within`, `close`, `only nominally`, `exceeded`, `no value`, `waiting`. */
  readonly state: string;
  /** The value at the worst point; '' where there is none. */
  readonly value: string;
  /** The bounds there: `0.05 … 7.5 V`, `at least 50 dB`, `at most 7.5 V`. */
  readonly bounds: string;
  /** `over by 0.217 V`, `under by 3.2 dB`, `0.4 V to spare`; '' where there is no finite margin. */
  readonly margin: string;
  /** One sentence part with all of it: `exceeded: 7.717 V, over by 0.217 V`. */
  readonly words: string;
}

/** Words how a limit stands at its worst point. */
export function describeLimit(_outcome: LimitOutcome, _limit: LimitModel): DescribedLimit {
  throw new Error('calculator/describe is being written');
}
