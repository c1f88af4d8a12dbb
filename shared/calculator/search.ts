import type { LinkedFormula } from '#formula';
import type { QuantityKind } from '#quantity';
import type { Step } from './link.ts';

/** One range to search along; `byRatio` for a frequency, which is even in ratio. */
export interface Axis {
  readonly slot: number;
  readonly low: number;
  readonly high: number;
  readonly byRatio: boolean;
}

/** What is searched: a number made of the frame after its steps have run. */
export interface Target {
  readonly steps: readonly Step[];
  readonly run: LinkedFormula;
  readonly wants: 'both' | 'lowest';
}

/** An extreme and where it lies, as shares 0…1 of each axis. `raw` may be an infinity. */
export interface Found {
  readonly raw: number;
  readonly at: readonly number[];
}

/** Null where no point had a value; `everywhere` is false where some point had none. */
export interface Extremes {
  lowest: Found | null;
  highest: Found | null;
  everywhere: boolean;
}

/** Both ends and 33 points between them: the recipe language, section 5. Odd, so that the middle is among them. */
const POINTS = 35;
/** Share of the span at which the golden-section search stops: the recipe language, section 5. */
const FINEST = 1e-9;
const GOLDEN = (Math.sqrt(5) - 1) / 2;

/**
 * Width at which a refinement is looked at for the first time, and how many steps it goes on past `FINEST`, so that all
 * three widths lie about four decades apart: a pole and a logarithm of zero gain as much again, a bounded peak does not.
 */
const COARSE = 1e-5;
const STEPS_BEYOND = 20;

/** Where the values of a line change sign, bisections until a pole must have grown, and until it cannot be told finer. */
const POLE_GLANCE = 6;
const POLE_GLANCE_GROWTH = 3;
const POLE_BISECTIONS = 44;
const POLE_GROWTH = 1e4;

/** An extreme inside a line that is so much smaller than the line's largest is what the rounding of doubles left of a zero. */
const NOISE = 1e-14;

/** Most rounds along each axis in turn from an extreme that is no corner; a slanting valley takes about 20. */
const ROUNDS = 40;

/** Makes the axis of a given's range; a frequency is even in ratio where it can be. */
export function axisFor(quantity: QuantityKind, slot: number, low: number, high: number): Axis {
  return { slot, low, high, byRatio: quantity === 'frequency' && low > 0 };
}

/** Puts a frame's axis at a share of its span; the ends are exact. */
export function positionOf({ low, high, byRatio }: Axis, share: number): number {
  if (share <= 0) return low;
  if (share >= 1) return high;
  return byRatio ? low * (high / low) ** share : low + (high - low) * share;
}

export function moveTo(frame: Float64Array, axes: readonly Axis[], at: readonly number[]): void {
  for (const [i, axis] of axes.entries()) frame[axis.slot] = positionOf(axis, at[i] ?? 0.5);
}

export function runSteps(frame: Float64Array, steps: readonly Step[]): void {
  for (const step of steps) frame[step.slot] = step.run(frame);
}

/**
 * Finds the lowest and the highest of each target over the ranges: along each axis, at every corner (and the middle) of
 * the others, 35 points, then a golden-section search round the best interior point; from an extreme that is no corner,
 * along each axis in turn until nothing is gained. Poles that no point hits are found by their sign change or growth.
 *
 * Shape: the frame holds every other input; its axes and results are overwritten.
 * Source: golden-section search, Kiefer, "Sequential minimax search for a maximum", Proc. AMS 4 (1953), from memory;
 * what finds poles is common practice, no source.
 * Cost: for n axes 35·n·(2ⁿ⁻¹ + 1) runs of all steps, then about 40 of the target's own for each interior extreme.
 */
export function searchRanges(
  frame: Float64Array,
  axes: readonly Axis[],
  targets: readonly Target[],
): readonly Extremes[] {
  const searches = targets.map((target) => new Search(frame, axes, target));
  const steps = new Map(targets.flatMap((target) => target.steps).map((step) => [step.slot, step]));
  const all = [...steps.values()];
  for (const [along, axis] of axes.entries()) {
    for (const line of linesAlong(along, axes.length)) {
      moveTo(frame, axes, line);
      for (let i = 0; i < POINTS; i++) {
        frame[axis.slot] = positionOf(axis, i / (POINTS - 1));
        runSteps(frame, all);
        for (const search of searches) search.values[i] = search.target.run(frame);
      }
      for (const search of searches) search.takeLine(along, line);
    }
  }
  for (const search of searches) search.climb();
  return searches.map((search) => search.extremes);
}

/** The other axes at every corner and, if there are any, at their middle. */
function linesAlong(along: number, count: number): readonly (readonly number[])[] {
  const others = Array.from({ length: count }, (_, i) => i).filter((i) => i !== along);
  const corners = Array.from({ length: 2 ** others.length }, (_, corner) => {
    const at = new Array<number>(count).fill(0.5);
    for (const [bit, axis] of others.entries()) at[axis] = (corner >> bit) & 1;
    return at;
  });
  return others.length === 0 ? corners : [...corners, new Array<number>(count).fill(0.5)];
}

/** 1 looks for the lowest, -1 for the highest: what is made small is the sign times the value. */
type Sign = 1 | -1;

/** The search of one target. One object for one call; nobody else sees it. */
class Search {
  readonly values = new Float64Array(POINTS);
  readonly extremes: Extremes = { lowest: null, highest: null, everywhere: true };
  readonly target: Target;
  readonly #frame: Float64Array;
  readonly #axes: readonly Axis[];

  constructor(frame: Float64Array, axes: readonly Axis[], target: Target) {
    this.#frame = frame;
    this.#axes = axes;
    this.target = target;
  }

  /** Takes the values along a line; the frame must stand on it. */
  takeLine(along: number, line: readonly number[]): void {
    const { values } = this;
    let largest = 0;
    for (const [i, value] of values.entries()) {
      this.#offer(value, line, along, i / (POINTS - 1));
      if (Number.isFinite(value)) largest = Math.max(largest, Math.abs(value));
    }
    for (let i = 1; i < POINTS; i++) {
      const before = values[i - 1] ?? Number.NaN;
      const after = values[i] ?? Number.NaN;
      // Rounding noise about zero changes sign too.
      const counts = Math.max(Math.abs(before), Math.abs(after)) > 1e-9 * largest;
      if (before * after < 0 && counts) this.#lookForPole(along, line, i, before, after);
    }
    for (const sign of this.#signs()) this.#refineBest(sign, along, line, largest);
  }

  /** Goes on along each axis in turn from an extreme that lies inside; corners have been seen along every axis. */
  climb(): void {
    if (this.#axes.length < 2) return;
    for (const sign of this.#signs()) {
      for (let round = 0; round < ROUNDS; round++) {
        const start = this.#best(sign);
        if (!start || !Number.isFinite(start.raw) || start.at.every((share) => share === 0 || share === 1)) break;
        for (const [along, axis] of this.#axes.entries()) {
          const line = this.#best(sign)?.at ?? start.at;
          moveTo(this.#frame, this.#axes, line);
          for (let i = 0; i < POINTS; i++) this.values[i] = this.#valueAt(axis, i / (POINTS - 1));
          this.takeLine(along, line);
        }
        const gained = Math.abs((this.#best(sign)?.raw ?? 0) - start.raw);
        if (!(gained > 1e-12 * Math.abs(start.raw))) break;
      }
    }
  }

  #signs(): readonly Sign[] {
    return this.target.wants === 'both' ? [1, -1] : [1];
  }

  #best(sign: Sign): Found | null {
    return sign === 1 ? this.extremes.lowest : this.extremes.highest;
  }

  /** Nothing can lie beyond. A target that wants only the lowest counts as done on the other side. */
  #isUnbounded(sign: Sign): boolean {
    if (sign === -1 && this.target.wants === 'lowest') return true;
    return this.#best(sign)?.raw === -sign * Number.POSITIVE_INFINITY;
  }

  #offer(raw: number, line: readonly number[], along: number, share: number): void {
    const { extremes } = this;
    if (Number.isNaN(raw)) {
      extremes.everywhere = false;
      return;
    }
    if (!extremes.lowest || raw < extremes.lowest.raw) extremes.lowest = { raw, at: line.with(along, share) };
    if (!extremes.highest || raw > extremes.highest.raw) extremes.highest = { raw, at: line.with(along, share) };
  }

  #valueAt(axis: Axis, share: number): number {
    this.#frame[axis.slot] = positionOf(axis, share);
    runSteps(this.#frame, this.target.steps);
    return this.target.run(this.#frame);
  }

  /** Bisects a change of sign: a zero shrinks, a pole grows without end and is unbounded on both sides. */
  #lookForPole(along: number, line: readonly number[], right: number, before: number, after: number): void {
    const axis = this.#axes[along];
    if (!axis || (this.#isUnbounded(1) && this.#isUnbounded(-1))) return;
    // Where one side is an infinity already, the other must grow towards it.
    const first = Math.max(...[before, after].map((value) => (Number.isFinite(value) ? Math.abs(value) : 0)));
    if (first === 0) return;
    let a = (right - 1) / (POINTS - 1);
    let b = right / (POINTS - 1);
    let size = first;
    for (let i = 1; i <= POLE_BISECTIONS; i++) {
      const middle = (a + b) / 2;
      const value = this.#valueAt(axis, middle);
      if (Number.isNaN(value)) return;
      if (value > 0 === before > 0) a = middle;
      else b = middle;
      size = Math.max(size, Math.abs(value));
      if (i === POLE_GLANCE && size < POLE_GLANCE_GROWTH * first) return;
    }
    if (size < POLE_GROWTH * first) return;
    this.#offer(Number.POSITIVE_INFINITY, line, along, a);
    this.#offer(Number.NEGATIVE_INFINITY, line, along, a);
  }

  #refineBest(sign: Sign, along: number, line: readonly number[], largest: number): void {
    const axis = this.#axes[along];
    const best = bestInterior(this.values, sign);
    if (!axis || best === null || this.#isUnbounded(sign)) return;
    const share = (i: number) => i / (POINTS - 1);
    const at = (x: number) => {
      const value = this.#valueAt(axis, x);
      this.#offer(value, line, along, x);
      return costOf(value, sign);
    };
    const start = costOf(this.values[best], sign);
    const found = golden(at, share(best - 1), share(best + 1), start);
    // A range's round numbers are where people put zeros and corners, and the search comes only near them.
    at(shareOf(axis, roundNear(positionOf(axis, found.at), axis.high - axis.low)));
    if (Math.abs(found.cost) < NOISE * largest) this.#offer(0, line, along, found.at);
    if (found.isUnbounded) this.#offer(-sign * Number.POSITIVE_INFINITY, line, along, found.at);
  }
}

/** The roundest number within the last steps of a search. */
function roundNear(position: number, span: number): number {
  const step = 10 ** Math.floor(Math.log10(span * 10 * FINEST));
  return Math.round(position / step) * step;
}

function shareOf({ low, high, byRatio }: Axis, position: number): number {
  const share = byRatio ? Math.log(position / low) / Math.log(high / low) : (position - low) / (high - low);
  return Math.min(1, Math.max(0, share));
}

/** What is made small; no value is worse than any. */
function costOf(value: number | undefined, sign: Sign): number {
  return value === undefined || Number.isNaN(value) ? Number.POSITIVE_INFINITY : sign * value;
}

/** The lowest point that lies below a neighbour and not above the other; null on a line that only rises, falls or stays. */
function bestInterior(values: Float64Array, sign: Sign): number | null {
  let best: number | null = null;
  for (let i = 1; i < POINTS - 1; i++) {
    const [before, here, after] = [values[i - 1], values[i], values[i + 1]].map((value) => costOf(value, sign));
    if (before === undefined || here === undefined || after === undefined || !Number.isFinite(here)) continue;
    if (here > before || here > after || (here === before && here === after)) continue;
    if (best === null || here < costOf(values[best], sign)) best = i;
  }
  return best;
}

/** Makes `cost` small between two shares; `start` is the cost of the best point known there. */
function golden(cost: (share: number) => number, from: number, to: number, start: number) {
  let [a, b] = [from, to];
  let c = b - GOLDEN * (b - a);
  let d = a + GOLDEN * (b - a);
  let [atC, atD] = [cost(c), cost(d)];
  let best = start;
  const shrink = () => {
    best = Math.min(best, atC, atD);
    if (atC <= atD) {
      [b, d, atD] = [d, c, atC];
      c = b - GOLDEN * (b - a);
      atC = cost(c);
    } else {
      [a, c, atC] = [c, d, atD];
      d = a + GOLDEN * (b - a);
      atD = cost(d);
    }
  };
  while (b - a > COARSE) shrink();
  const coarse = best;
  while (b - a > FINEST) shrink();
  const fine = best;
  const gained = coarse - fine;
  // A smooth extreme gains nothing between the two widths; only what still gains is followed further.
  const isSteep = Number.isFinite(fine) && gained > 1e-6 * Math.abs(coarse);
  for (let i = 0; isSteep && i < STEPS_BEYOND; i++) shrink();
  return { at: (a + b) / 2, cost: best, isUnbounded: isSteep && fine - best > 0.5 * gained };
}
