import { fromSi, PEAK_FACTORS, readUnit, toSi } from '#quantity';
import { evaluate, evaluateLimit } from './evaluate.ts';
import type { Inputs, ReadField } from './inputs.ts';
import { isHeld } from './limit-state.ts';
import type { LinkedCalculator, LinkedLimit } from './link.ts';
import type { Given } from './model.ts';
import type { LimitOutcome } from './outcome.ts';
import { fieldText, readInputs } from './read-inputs.ts';

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
const BISECTIONS = 12;
/** Changes that would break another limit are passed over so often. */
const ATTEMPTS = 3;
/** Thirds taken off where a cure is looked for between two stops: a window of 0.5 % of the step is found. */
const NARROWINGS = 12;
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
  /** Where the limit is cured, to a small part of the step before. */
  readonly good: number;
  readonly effort: number;
}

type IsGood = (outcome: LimitOutcome) => boolean;

/** Whether a change cures, and the margin it leaves, which tells how near it comes if not. */
interface Trial {
  readonly isGood: boolean;
  readonly margin: number;
}

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
  const trial = (path: Path, distance: number): Trial => {
    const change = { name: path.given.name, ...path.at(distance) };
    const outcome = evaluateLimit(linked, inputs, limit, change);
    return { isGood: isGood(outcome), margin: outcome.margin ?? Number.NEGATIVE_INFINITY };
  };
  let paths = pathsOf(linked, inputs, limit);
  let second: Cure | null = null;
  for (let attempt = 0; attempt < ATTEMPTS; attempt++) {
    const nearest = nearestOf(paths, trial);
    if (!nearest) break;
    const cure = tidyCure(linked, inputs, limit, nearest, isGood);
    if (cure?.breaks.length === 0) return cure;
    second ??= cure;
    const { path } = nearest;
    paths = paths.filter((other) => other !== path);
  }
  return second;
}

function nearestOf(paths: readonly Path[], trial: (path: Path, distance: number) => Trial): Candidate | null {
  let nearest: Candidate | null = null;
  for (const path of paths) {
    const most: number = nearest?.effort ?? Number.POSITIVE_INFINITY;
    nearest = firstGood(path, (distance) => trial(path, distance), most) ?? nearest;
  }
  return nearest;
}

/** Looks along a path for a cure that needs less than `most`. */
function firstGood(path: Path, test: (distance: number) => Trial, most: number): Candidate | null {
  const margins = [test(0).margin];
  let before = 0;
  for (const stop of path.stops) {
    // The stop before was no cure, so one that needs less may still lie between.
    if (path.effort(before) >= most) break;
    const trial = test(stop);
    if (trial.isGood) {
      const found = nearestGood(path, test, before, stop);
      return found.effort < most ? found : null;
    }
    margins.push(trial.margin);
    before = stop;
  }
  const found = betweenStops(path, test, margins);
  return found && found.effort < most ? found : null;
}

/** Bisects from a stop that does not cure to one that does. A list has nothing between its entries. */
function nearestGood(path: Path, test: (distance: number) => Trial, bad: number, good: number): Candidate {
  let [from, to] = [bad, good];
  for (let i = 0; i < BISECTIONS && !path.given.options; i++) {
    const middle = (from + to) / 2;
    if (test(middle).isGood) to = middle;
    else from = middle;
  }
  return { path, good: to, effort: path.effort(to) };
}

/**
 * A cure may be narrower than the step between two stops, as a match of resistors is: goes where the margin is largest,
 * if it is so inside. `margins` belong to the distance 0 and the stops after it.
 */
function betweenStops(path: Path, test: (distance: number) => Trial, margins: readonly number[]): Candidate | null {
  const best = margins.indexOf(Math.max(...margins));
  if (path.given.options || best <= 0 || best === margins.length - 1) return null;
  const start = path.stops[best - 2] ?? 0;
  let [from, to] = [start, path.stops[best] ?? start];
  for (let i = 0; i < NARROWINGS; i++) {
    const [a, b] = [from + (to - from) / 3, to - (to - from) / 3];
    const [atA, atB] = [test(a), test(b)];
    if (atA.isGood || atB.isGood) return nearestGood(path, test, start, atA.isGood ? a : b);
    if (atA.margin >= atB.margin) to = b;
    else from = a;
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

/** Rounds to as few digits as do not go much further, and checks the result as the reader would type it. */
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
    for (const away of [false, true]) {
      const low = tidyEnd(given, field, [field.low, exact.low], digits, away);
      const high = tidyEnd(given, field, [field.high, exact.high], digits, away);
      if (low === null || high === null || low > high) continue;
      const to = fieldText(given, { low, high }, field.unit);
      const changed = typedInto(linked, inputs, given.name, to);
      if (!changed || !isGood(evaluateLimit(linked, changed, limit))) continue;
      return { name: given.name, to, was: field.understood, ...consequences(linked, inputs, changed, limit) };
    }
  }
  return null;
}

/** One end with few digits in the unit of its field, the nearest or the next one further from what was; null if that goes too far. */
function tidyEnd(
  given: Given,
  field: ReadField,
  [was, exact]: readonly [number, number],
  digits: number,
  away: boolean,
): number | null {
  if (exact === was || given.options) return exact;
  const unit = readUnit(field.unit) ?? { factor: 1, offset: 0 };
  // What is to be tidy is the number as typed, not the peak that it stands for.
  const scale = given.reading === undefined ? 1 : PEAK_FACTORS[given.reading];
  const number = fromSi(exact / scale, unit);
  if (number === 0) return exact;
  const step = given.quantity === 'count' ? 1 : 10 ** (Math.floor(Math.log10(Math.abs(number))) + 1 - digits);
  const round = away ? (exact > was ? Math.ceil : Math.floor) : Math.round;
  const si = toSi(String(Number((round(number / step) * step).toPrecision(12))), unit) * scale;
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
