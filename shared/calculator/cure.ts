import { fromSi, readUnit, toSi } from '#quantity';
import { evaluate, evaluateLimit } from './evaluate.ts';
import type { Inputs, ReadField } from './inputs.ts';
import { isHeld } from './limit-state.ts';
import type { LinkedCalculator, LinkedLimit } from './link.ts';
import type { Given } from './model.ts';
import type { LimitOutcome } from './outcome.ts';
import { fieldText, readInputs, withValue } from './read-inputs.ts';

/** The nearest change of one input that brings a limit within its bounds. `to` and `was` are texts for the field. */
export interface Cure {
  readonly name: string;
  readonly to: string;
  readonly was: string;
  /** The state that the limit then has. */
  readonly state: 'within' | 'close';
  /** Other limits that hold now and then would not; empty unless there is no cure without. */
  readonly breaks: readonly string[];
}

/** Factors from the value outwards, between which a cure is looked for: common practice, no source. */
const FACTORS = [1.001, 1.003, 1.01, 1.02, 1.05, 1.1, 1.2, 1.35, 1.5, 2, 3, 5, 10, 30, 100, 1000] as const;
/** Shares of a range by which an end is drawn in. */
const SHARES = [0.003, 0.01, 0.03, 0.06, 0.1, 0.15, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1] as const;
/** A zero has no ratio to anything: such changes come after all that have. */
const FROM_ZERO = 10;
const BISECTIONS = 14;
/** A rounder number may go this share of the change further. */
const OVERSHOOT = 0.25;
const MOST_DIGITS = 6;

/** A way of changing one given: `at(0)` is as it stands, more is further; `effort` tells how much that is. */
interface Path {
  readonly given: Given;
  readonly field: ReadField;
  readonly stops: readonly number[];
  at(distance: number): { readonly low: number; readonly high: number };
  effort(distance: number): number;
}

interface Candidate {
  readonly path: Path;
  /** Cured at `good`, not at `bad`. */
  readonly bad: number;
  readonly good: number;
  readonly effort: number;
}

type IsGood = (outcome: LimitOutcome) => boolean;

/**
 * Finds the smallest change of one given, in proportion, that brings a broken or close limit within its bounds; of a
 * range an end is drawn in. Rounded to a tidy value that still cures. Fields that were refused are left alone.
 * When it cannot: null, also for a limit that is within, waits or is not there.
 * Cost: some hundred evaluations of the limit, up to 50 ms; for idle moments, not for keystrokes.
 */
export function findCure(linked: LinkedCalculator, inputs: Inputs, name: string): Cure | null {
  const limit = linked.limits.find((one) => one.model.name === name);
  if (!limit) return null;
  const { state } = evaluateLimit(linked, inputs, limit);
  if (state === 'within' || state === 'waiting') return null;
  const isWithin: IsGood = (outcome) => outcome.state === 'within';
  const isAtLeastHeld: IsGood = (outcome) => isHeld(outcome.state);
  for (const isGood of state === 'close' ? [isWithin] : [isWithin, isAtLeastHeld]) {
    const cure = nearestCure(linked, inputs, limit, isGood);
    if (cure) return cure;
  }
  return null;
}

function nearestCure(linked: LinkedCalculator, inputs: Inputs, limit: LinkedLimit, isGood: IsGood): Cure | null {
  const candidates: Candidate[] = [];
  for (const path of pathsOf(linked, inputs, limit)) {
    const test = (distance: number) => {
      const { low, high } = path.at(distance);
      return isGood(evaluateLimit(linked, withValue(inputs, path.given, low, high), limit));
    };
    const found = firstGood(path, test);
    if (found) candidates.push(found);
  }
  candidates.sort((a, b) => a.effort - b.effort);
  let second: Cure | null = null;
  for (const candidate of candidates) {
    const cure = tidyCure(linked, inputs, limit, candidate, isGood);
    if (cure?.breaks.length === 0) return cure;
    second ??= cure;
  }
  return second;
}

function firstGood(path: Path, test: (distance: number) => boolean): Candidate | null {
  let bad = 0;
  for (const stop of path.stops) {
    if (!test(stop)) {
      bad = stop;
      continue;
    }
    let good = stop;
    // A list has nothing between its entries.
    for (let i = 0; i < BISECTIONS && !path.given.options; i++) {
      const middle = (bad + good) / 2;
      if (test(middle)) good = middle;
      else bad = middle;
    }
    return { path, bad, good, effort: path.effort(good) };
  }
  return null;
}

function pathsOf(linked: LinkedCalculator, inputs: Inputs, limit: LinkedLimit): readonly Path[] {
  return linked.model.givens.flatMap((given): readonly Path[] => {
    const field = inputs.fields.get(given.name);
    if (field?.state !== 'read' || !limit.inputs.includes(given.name)) return [];
    if (given.options) return optionPaths(given, field);
    return field.low < field.high ? rangePaths(given, field) : valuePaths(given, field);
  });
}

function optionPaths(given: Given, field: ReadField): readonly Path[] {
  return (given.options ?? [])
    .filter((option) => option.value !== field.low)
    .map((option) => ({
      given,
      field,
      stops: [1],
      at: () => ({ low: option.value, high: option.value }),
      effort: () => ratioBetween(field.low, option.value),
    }));
}

function rangePaths(given: Given, field: ReadField): readonly Path[] {
  const { low, high } = field;
  const span = high - low;
  const effort = (share: number) => (share * span) / Math.max(Math.abs(low), Math.abs(high));
  const path = (at: Path['at']): Path => ({ given, field, stops: SHARES, at, effort });
  return [
    path((share) => ({ low, high: share === 1 ? low : high - share * span })),
    path((share) => ({ low: share === 1 ? high : low + share * span, high })),
    ...(low === -high ? [path((share) => ({ low: low * (1 - share), high: high * (1 - share) }))] : []),
  ];
}

/** Upwards and downwards by ratio as far as the limits of entry allow; from zero, by shares of what is allowed. */
function valuePaths(given: Given, field: ReadField): readonly Path[] {
  const { low: value } = field;
  const { min, max } = given;
  if (value === 0) return [max ?? 1, min ?? 0].filter((end) => end !== 0).map((end) => pathFromZero(given, field, end));
  const path = (sign: 1 | -1): Path => {
    const end = value > 0 === sign > 0 ? max : min;
    const farthest = Math.log(FACTORS.at(-1) ?? 1);
    const most = end !== undefined && end / value > 0 ? Math.min(Math.abs(Math.log(end / value)), farthest) : farthest;
    const stops = FACTORS.map((factor) => Math.log(factor)).filter((stop) => stop < most);
    const at = (distance: number) => {
      const changed =
        distance === most && end !== undefined && most < farthest ? end : value * Math.exp(sign * distance);
      return { low: changed, high: changed };
    };
    return { given, field, stops: most > 0 ? [...stops, most] : [], at, effort: (distance) => distance };
  };
  return [path(1), path(-1)];
}

function pathFromZero(given: Given, field: ReadField, end: number): Path {
  const at = (share: number) => ({ low: end * share, high: end * share });
  return { given, field, stops: SHARES, at, effort: (share) => FROM_ZERO + share };
}

function ratioBetween(a: number, b: number): number {
  return a / b > 0 ? Math.abs(Math.log(a / b)) : FROM_ZERO;
}

/** Rounds away from the value as it stands, to as few digits as do not go much further, and checks it as the reader would type it. */
function tidyCure(
  linked: LinkedCalculator,
  inputs: Inputs,
  limit: LinkedLimit,
  { path, good }: Candidate,
  isGood: IsGood,
): Cure | null {
  const { given, field } = path;
  const exact = path.at(good);
  for (let digits = 1; digits <= MOST_DIGITS; digits++) {
    const low = tidyEnd(given, field, field.low, exact.low, digits);
    const high = tidyEnd(given, field, field.high, exact.high, digits);
    if (low === null || high === null || low > high) continue;
    const to = fieldText(given, { low, high }, field.unit);
    const changed = typedInto(linked, inputs, given.name, to);
    if (!changed || !isGood(evaluateLimit(linked, changed, limit))) continue;
    return { name: given.name, to, was: field.understood, ...consequences(linked, inputs, changed, limit) };
  }
  return null;
}

/** One end with few digits in the unit of its field; null if that goes too far. */
function tidyEnd(given: Given, field: ReadField, was: number, exact: number, digits: number): number | null {
  if (exact === was || given.options) return exact;
  const unit = readUnit(field.unit) ?? { factor: 1, offset: 0 };
  // Through the field's own reading: what is tidy is the number as typed.
  const scale = given.reading === 'rms' ? Math.SQRT2 : given.reading === 'peak-to-peak' ? 0.5 : 1;
  const number = fromSi(exact / scale, unit);
  const step = given.quantity === 'count' ? 1 : 10 ** (Math.floor(Math.log10(Math.abs(number))) + 1 - digits);
  if (number === 0) return exact;
  const rounded = exact > was ? Math.ceil(number / step) * step : Math.floor(number / step) * step;
  const si = toSi(String(Number(rounded.toPrecision(12))), unit) * scale;
  const isTooFar = Math.abs(si - exact) > OVERSHOOT * Math.abs(exact - was) && given.quantity !== 'count';
  return isTooFar ? null : si;
}

/** The inputs with one field typed over; null if the text would be refused. */
function typedInto(linked: LinkedCalculator, inputs: Inputs, name: string, text: string): Inputs | null {
  const read = readInputs(linked.model, { [name]: text }, { lastShown: inputs }).fields.get(name);
  return read?.state === 'read' ? { ...inputs, fields: new Map(inputs.fields).set(name, read) } : null;
}

function consequences(
  linked: LinkedCalculator,
  before: Inputs,
  after: Inputs,
  limit: LinkedLimit,
): Pick<Cure, 'state' | 'breaks'> {
  const held = new Set(evaluate(linked, before).limits.flatMap((one) => (one.held ? [one.name] : [])));
  const then = evaluate(linked, after).limits;
  const state = then.find((one) => one.name === limit.model.name)?.state === 'within' ? 'within' : 'close';
  return { state, breaks: then.flatMap((one) => (held.has(one.name) && !one.held ? [one.name] : [])) };
}
