import type { LinkedLimit } from './link.ts';
import type { LimitModel, LimitState } from './model.ts';
import type { LimitOutcome } from './outcome.ts';

/** A value that differs from its bound by no more than the rounding of doubles lies on it: 0.1 V + 0.2 V is within 0.3 V. */
const ROUNDING = 1e-12;

/** Without `near`, a margin under this share of the span between both bounds is close: the recipe language, section 5. */
const CLOSE_SHARE = 0.1;

/** A limit at one point; the numbers may be infinite, and NaN where there is no value. */
export interface LimitPoint {
  readonly of: number;
  readonly from: number | null;
  readonly to: number | null;
  readonly near: number | null;
  /** How far the value lies inside the nearer bound; negative outside. */
  readonly margin: number;
}

/** What a search over ranges, or over corners of tolerances, found out about a limit. */
export interface Judged {
  /** Null where no point has a value. */
  readonly worst: LimitPoint | null;
  /** Whether every point had a value. */
  readonly everywhere: boolean;
}

/** How far a value lies inside its bounds at the point that the frame holds. May give NaN or an infinity. */
export function marginOf(limit: LinkedLimit): (frame: Float64Array) => number {
  const { of, from, to } = limit;
  return function evalMargin(frame) {
    const value = of(frame);
    const above = from ? gap(value, from(frame)) : Number.POSITIVE_INFINITY;
    const below = to ? gap(to(frame), value) : Number.POSITIVE_INFINITY;
    return Math.min(above, below);
  };
}

export function limitPoint(limit: LinkedLimit, frame: Float64Array): LimitPoint {
  const at = (formula: LinkedLimit['from']) => formula?.(frame) ?? null;
  const margin = marginOf(limit)(frame);
  return { of: limit.of(frame), from: at(limit.from), to: at(limit.to), near: at(limit.near), margin };
}

/** Two infinities of one sign lie on each other, as in every comparison. */
function gap(high: number, low: number): number {
  if (high === low) return 0;
  const difference = high - low;
  if (!Number.isFinite(difference)) return difference;
  return Math.abs(difference) <= ROUNDING * Math.max(Math.abs(high), Math.abs(low)) ? 0 : difference;
}

/** How a limit stands with parts at their nominal values. `only-nominally` is made by comparing two of these. */
export function nominalState({ worst, everywhere }: Judged): Exclude<LimitState, 'only-nominally'> {
  if (worst === null || Number.isNaN(worst.margin)) return 'no-value';
  if (worst.margin < 0) return 'exceeded';
  if (!everywhere) return 'no-value';
  return worst.margin < closeUnder(worst) ? 'close' : 'within';
}

function closeUnder({ near, from, to }: LimitPoint): number {
  if (near !== null) return near;
  return from !== null && to !== null && Number.isFinite(to - from) ? CLOSE_SHARE * (to - from) : 0;
}

export function isHeld(state: LimitOutcome['state']): boolean {
  return state === 'within' || state === 'close';
}

/** Whether what stands on the limit's inputs must not be shown as good. A limit that waits is not broken. */
export function isBroken(limit: LimitOutcome): boolean {
  return limit.level === 'stop' && !limit.held && limit.state !== 'waiting';
}

/**
 * Makes the outcome of a limit from what was found with nominal parts and, if tolerances were searched, at their corners.
 * A limit that asks for `over="nominal"` looks at the nominal parts only; ranges count for both.
 */
export function limitOutcome(model: LimitModel, nominal: Judged, corners: Judged | null = null): LimitOutcome {
  const judged = model.over === 'nominal' || corners === null ? nominal : corners;
  const heldNominal = isHeld(nominalState(nominal));
  const state = nominalState(judged);
  const held = isHeld(state);
  const { worst } = judged;
  return {
    name: model.name,
    level: model.level,
    state: !held && heldNominal ? 'only-nominally' : state,
    held,
    heldNominal,
    value: finite(worst?.of),
    ...unboundedSide(worst),
    from: finite(worst?.from),
    to: finite(worst?.to),
    margin: finite(worst?.margin),
    waitingFor: [],
  };
}

export function waitingLimit(model: LimitModel, waitingFor: readonly string[]): LimitOutcome {
  const numbers = { value: null, from: null, to: null, margin: null };
  const { name, level } = model;
  return { name, level, state: 'waiting', held: false, heldNominal: false, ...numbers, waitingFor };
}

function unboundedSide(worst: LimitPoint | null): { readonly unbounded?: 1 | -1 } {
  if (worst?.of === Number.POSITIVE_INFINITY) return { unbounded: 1 };
  return worst?.of === Number.NEGATIVE_INFINITY ? { unbounded: -1 } : {};
}

function finite(number: number | null | undefined): number | null {
  return number !== null && number !== undefined && Number.isFinite(number) ? number : null;
}
