import type { NoValueReason, Sample, UnboundedReason } from '#formula';
import type { LimitState } from './model.ts';

export type { NoValueReason, Sample, UnboundedReason };

/** What a result came to: known, or waiting for inputs that are missing or were refused. */
export type Outcome =
  | {
      readonly state: 'known';
      /** At the middle of every range. */
      readonly middle: Sample;
      /** Present when the result depends on a range. `everywhere` is false when some points have no value. */
      readonly over?: { readonly lowest: Sample; readonly highest: Sample; readonly everywhere: boolean };
      /** Why the first unbounded of the samples is so, where its formula shows it. */
      readonly because?: UnboundedReason;
    }
  | { readonly state: 'waiting'; readonly for: readonly string[] };

/** How a limit stands. `value`, `from`, `to` and `margin` belong to the worst point found; null where there is no finite number. */
export interface LimitOutcome {
  readonly name: string;
  readonly level: 'stop' | 'caution';
  readonly state: LimitState | 'waiting';
  readonly held: boolean;
  readonly heldNominal: boolean;
  readonly value: number | null;
  /** Set where `value` is null because the limit's quantity is unbounded. */
  readonly unbounded?: 1 | -1;
  readonly from: number | null;
  readonly to: number | null;
  readonly margin: number | null;
  readonly waitingFor: readonly string[];
}

/** Everything a page, a sheet, a check or the command line shows of one calculator. */
export interface Evaluation {
  readonly outcomes: Readonly<Record<string, Outcome>>;
  readonly limits: readonly LimitOutcome[];
  /** Result → names of the broken stop limits that share an input with it. Such a result is never shown as good. */
  readonly notValid: Readonly<Record<string, readonly string[]>>;
}
