import { type CheckedExpr, type Sample, sampleAt, type UnboundedReason, unboundedReason, type Values } from '#formula';
import type { Evaluated, Inputs, Upstream } from './inputs.ts';
import { isBroken, type Judged, limitOutcome, limitPoint, marginOf, waitingLimit } from './limit-state.ts';
import type { Footing, LinkedCalculator, LinkedLimit, LinkedResult } from './link.ts';
import type { Evaluation, LimitOutcome, Outcome } from './outcome.ts';
import { readInputs } from './read-inputs.ts';
import {
  type Axis,
  axisFor,
  type Extremes,
  moveTo,
  positionOf,
  runSteps,
  searchRanges,
  type Target,
} from './search.ts';

/** Where one evaluation works: the frame at the middle of every range, and what the fields leave open. */
interface Bench {
  readonly linked: LinkedCalculator;
  readonly frame: Float64Array;
  readonly axes: ReadonlyMap<string, Axis>;
  readonly missing: ReadonlySet<string>;
}

/**
 * Works out every result and judges every limit: at the middle of the ranges and over the ranges that each depends on.
 * A range of frequency has its middle in ratio. Synchronous and pure.
 * Cost: see `searchRanges`; results and limits on the same ranges share one search. Called on every keystroke.
 */
export function evaluate(linked: LinkedCalculator, inputs: Inputs): Evaluation {
  const bench = benchFor(linked, inputs);
  const results = [...linked.results.values()];
  for (const result of results) runSteps(bench.frame, result.steps.slice(-1));
  const extremes = searchAll(bench);
  const outcomes: Record<string, Outcome> = {};
  for (const result of results) {
    const waitsFor = waitingFor(bench, result);
    outcomes[result.model.name] =
      waitsFor.length > 0 ? { state: 'waiting', for: waitsFor } : knownOutcome(bench, result, extremes.get(result));
  }
  const limits = linked.limits.map((limit) => judge(bench, limit, extremes.get(limit)));
  return { outcomes, limits, notValid: notValid(linked, inputs, limits) };
}

/** Reads and evaluates the calculators of a page from top to bottom, each seeing those above it. `texts` by calculator id. */
export function evaluateInOrder(
  calculators: readonly LinkedCalculator[],
  texts: Readonly<Record<string, Readonly<Record<string, string | null>>>>,
  options: { readonly decimalComma?: boolean; readonly lastShown?: Readonly<Record<string, Inputs>> } = {},
): ReadonlyMap<string, Evaluated> {
  const { decimalComma = false, lastShown = {} } = options;
  const done = new Map<string, Evaluated>();
  for (const linked of calculators) {
    const { id } = linked.model;
    const upstream: Upstream = Object.fromEntries(done);
    const shown = Object.hasOwn(lastShown, id) ? lastShown[id] : undefined;
    const typed = Object.hasOwn(texts, id) ? (texts[id] ?? {}) : {};
    const inputs = readInputs(linked.model, typed, { decimalComma, upstream, ...(shown ? { lastShown: shown } : {}) });
    done.set(id, { linked, inputs, evaluation: evaluate(linked, inputs) });
  }
  return done;
}

/** Another value or range of one given, in SI base units. */
export interface Change {
  readonly name: string;
  readonly low: number;
  readonly high: number;
}

/** Judges one limit alone, with one input changed, as the search for a cure does some hundred times. */
export function evaluateLimit(
  linked: LinkedCalculator,
  inputs: Inputs,
  limit: LinkedLimit,
  change?: Change,
): LimitOutcome {
  const bench = benchFor(linked, inputs, change);
  const axes = axesOf(bench, limit);
  if (axes.length === 0 || waitingFor(bench, limit).length > 0) return judge(bench, limit, undefined);
  const [found] = searchRanges(bench.frame.slice(), axes, [targetOf(limit)]);
  return judge(bench, limit, found);
}

function benchFor(linked: LinkedCalculator, inputs: Inputs, change?: Change): Bench {
  const frame = new Float64Array(linked.slots.size).fill(Number.NaN);
  const axes = new Map<string, Axis>();
  const missing = new Set<string>();
  for (const given of linked.model.givens) {
    const slot = linked.slots.get(given.name) ?? -1;
    const field = inputs.fields.get(given.name);
    if (field?.state !== 'read') {
      missing.add(given.name);
      continue;
    }
    const { low, high } = change?.name === given.name ? change : field;
    const axis = axisFor(given.quantity, slot, low, high);
    if (low < high) axes.set(given.name, axis);
    frame[slot] = positionOf(axis, 0.5);
  }
  return { linked, frame, axes, missing };
}

function waitingFor(bench: Bench, { inputs, unavailable }: Footing): readonly string[] {
  return [...new Set([...inputs.filter((name) => bench.missing.has(name)), ...unavailable])];
}

function axesOf(bench: Bench, { inputs }: Footing): readonly Axis[] {
  return inputs.flatMap((name) => bench.axes.get(name) ?? []).sort((a, b) => a.slot - b.slot);
}

function targetOf(of: LinkedResult | LinkedLimit): Target {
  if ('slot' in of) {
    const { slot, steps } = of;
    return { steps, run: (frame) => frame[slot] ?? Number.NaN, wants: 'both' };
  }
  return { steps: of.steps, run: marginOf(of), wants: 'lowest' };
}

/** Searches what stands on ranges, one search for all that stand on the same. */
function searchAll(bench: Bench): ReadonlyMap<LinkedResult | LinkedLimit, Extremes> {
  const { linked } = bench;
  const groups = new Map<
    string,
    { readonly axes: readonly Axis[]; readonly members: (LinkedResult | LinkedLimit)[] }
  >();
  for (const member of [...linked.results.values(), ...linked.limits]) {
    const axes = axesOf(bench, member);
    if (axes.length === 0 || waitingFor(bench, member).length > 0) continue;
    const key = axes.map((axis) => axis.slot).join();
    const group = groups.get(key) ?? { axes, members: [] };
    group.members.push(member);
    groups.set(key, group);
  }
  const found = new Map<LinkedResult | LinkedLimit, Extremes>();
  for (const { axes, members } of groups.values()) {
    const extremes = searchRanges(bench.frame.slice(), axes, members.map(targetOf));
    for (const [i, member] of members.entries()) {
      const one = extremes[i];
      if (one) found.set(member, one);
    }
  }
  return found;
}

interface Explained {
  readonly sample: Sample;
  readonly because: UnboundedReason | undefined;
}

function middleOf(bench: Bench, result: LinkedResult): Explained {
  return sampleOf(bench.linked, result, bench.frame, bench.frame[result.slot] ?? Number.NaN);
}

function sampleOf(linked: LinkedCalculator, { model }: LinkedResult, frame: Float64Array, raw: number): Explained {
  const { formula } = model;
  if (!formula) throw new Error(`${model.name} has no formula, so it waits`);
  const values = valuesIn(linked, frame);
  const sample = sampleAt(formula, raw, values);
  const because = sample.kind === 'unbounded' ? reasonFor(linked, formula, values) : undefined;
  return { sample, because };
}

function valuesIn(linked: LinkedCalculator, frame: Float64Array): Values {
  const values: Values = {
    valueOf: (name) => frame[linked.slots.get(name) ?? -1] ?? Number.NaN,
    sampleOf: (name) => {
      const formula = linked.results.get(name)?.model.formula;
      return formula && sampleAt(formula, values.valueOf(name), values);
    },
  };
  return values;
}

/** Follows the reason through the results between, down to the terms that cancel: not "A_cm is zero". */
function reasonFor(linked: LinkedCalculator, formula: CheckedExpr, values: Values): UnboundedReason | undefined {
  const reason = unboundedReason(formula, values);
  if (reason === null) return undefined;
  const name = reason.kind === 'name' ? reason.name : reason.kind === 'zero' ? reason.term : '';
  const below = linked.results.get(name)?.model.formula;
  if (!below) return reason;
  return reasonFor(linked, reason.kind === 'zero' ? reciprocal(below) : below, values) ?? reason;
}

/** A formula that is unbounded where the other is zero. */
function reciprocal(of: CheckedExpr): CheckedExpr {
  const { span } = of;
  const one: CheckedExpr = { kind: 'number', span, type: [0, 0, 0, 0, 0, 0], value: 1 };
  return { kind: 'arithmetic', span, type: [0, 0, 0, 0, 0, 0], operator: '/', left: one, right: of };
}

function knownOutcome(bench: Bench, result: LinkedResult, extremes: Extremes | undefined): Outcome {
  const nominal = middleOf(bench, result);
  if (!extremes) return { state: 'known', middle: nominal.sample, ...becauseOf([nominal]) };
  const lowest = extremeSample(bench, result, extremes, 'lowest');
  const highest = extremeSample(bench, result, extremes, 'highest');
  return {
    state: 'known',
    middle: nominal.sample,
    over: { lowest: lowest.sample, highest: highest.sample, everywhere: extremes.everywhere },
    ...becauseOf([nominal, lowest, highest]),
  };
}

function becauseOf(samples: readonly Explained[]): { readonly because?: UnboundedReason } {
  const because = samples.find((one) => one.because)?.because;
  return because ? { because } : {};
}

function extremeSample(bench: Bench, result: LinkedResult, extremes: Extremes, end: 'lowest' | 'highest'): Explained {
  const found = extremes[end];
  // Without a value anywhere, the middle says why.
  if (!found) return middleOf(bench, result);
  const frame = bench.frame.slice();
  moveTo(frame, axesOf(bench, result), found.at);
  runSteps(frame, result.steps);
  const raw = frame[result.slot] ?? Number.NaN;
  if (Number.isFinite(found.raw) || raw === found.raw) return sampleOf(bench.linked, result, frame, found.raw);
  // A pole between two doubles: no formula shows an infinity there.
  const span = result.model.formula?.span ?? result.model.span;
  return { sample: { kind: 'unbounded', sign: found.raw > 0 ? 1 : -1, span }, because: undefined };
}

function judge(bench: Bench, limit: LinkedLimit, extremes: Extremes | undefined): LimitOutcome {
  const waitsFor = waitingFor(bench, limit);
  if (waitsFor.length > 0) return waitingLimit(limit.model, waitsFor);
  return limitOutcome(limit.model, judged(bench, limit, extremes));
}

function judged(bench: Bench, limit: LinkedLimit, extremes: Extremes | undefined): Judged {
  const frame = bench.frame.slice();
  if (extremes) {
    if (!extremes.lowest) return { worst: null, everywhere: false };
    moveTo(frame, axesOf(bench, limit), extremes.lowest.at);
  }
  runSteps(frame, limit.steps);
  const point = limitPoint(limit, frame);
  const everywhere = extremes?.everywhere ?? !Number.isNaN(point.margin);
  const raw = extremes?.lowest?.raw ?? point.margin;
  if (raw !== Number.NEGATIVE_INFINITY || point.margin === raw) return { worst: point, everywhere };
  // A pole between two doubles, on the side of the bound that it breaks.
  const of = !limit.to || (limit.from && point.of < 0) ? Number.NEGATIVE_INFINITY : Number.POSITIVE_INFINITY;
  return { worst: { ...point, of, margin: raw }, everywhere };
}

/** A result is not valid if it stands on an input of a broken stop limit, here or in the calculator that an input comes from. */
function notValid(
  linked: LinkedCalculator,
  inputs: Inputs,
  limits: readonly LimitOutcome[],
): Readonly<Record<string, readonly string[]>> {
  const broken = linked.limits.filter((_, i) => limits[i] && isBroken(limits[i]));
  const names: Record<string, readonly string[]> = {};
  for (const result of linked.results.values()) {
    const own = broken.filter((limit) => limit.inputs.some((name) => result.inputs.includes(name)));
    const earlier = result.inputs.flatMap((name) => {
      const field = inputs.fields.get(name);
      return field?.state === 'read' ? field.notValid : [];
    });
    const all = new Set([...own.map((limit) => limit.model.name), ...earlier]);
    if (all.size > 0) names[result.model.name] = [...all];
  }
  return names;
}
