import { formulaLayout, formulaText, type Layout, namesRead, type Substitute } from '#formula';
import { writeEntry, writeValue } from '#quantity';
import { type Described, describeOutcome, describeSample, resultWriting } from './describe.ts';
import type { Inputs } from './inputs.ts';
import type { LinkedCalculator } from './link.ts';
import type { Given } from './model.ts';
import type { Evaluation } from './outcome.ts';
import { axisFor, positionOf } from './search.ts';

/** Where one number of a formula comes from. */
export interface NumberSource {
  readonly name: string;
  readonly label: string;
  readonly from: 'recipe' | 'typed' | 'earlier' | 'worked-out' | 'missing';
  /** The number with its unit, a range as such; words where there is none. */
  readonly text: string;
}

export interface Explanation {
  readonly name: string;
  readonly label: string;
  readonly formula: Layout;
  readonly formulaText: string;
  /** Numbers and units put in, ranges at their middle. */
  readonly withNumbers: Layout;
  readonly withNumbersText: string;
  /** Whether a range stands behind it, so that `withNumbers` is only its middle. */
  readonly atMiddle: boolean;
  readonly outcome: Described;
  readonly sources: readonly NumberSource[];
}

/** A number to put in, and where it comes from; null where a name has none. */
interface Traced {
  readonly middle: string | null;
  readonly source: NumberSource;
}

/** Shows how a result comes to its number. When it cannot: null, for a name that is no result or has no formula. */
export function explainResult(
  linked: LinkedCalculator,
  inputs: Inputs,
  evaluation: Evaluation,
  name: string,
): Explanation | null {
  const model = linked.results.get(name)?.model;
  const outcome = Object.hasOwn(evaluation.outcomes, name) ? evaluation.outcomes[name] : undefined;
  if (!model?.formula || !outcome) return null;
  const { formula } = model;
  const traced = new Map(namesRead(formula).map((read) => [read, trace(linked, inputs, evaluation, read)]));
  const substitute: Substitute = (read) => {
    const text = traced.get(read)?.middle ?? null;
    return text === null ? null : { text };
  };
  return {
    name,
    label: model.label,
    formula: formulaLayout(formula),
    formulaText: formulaText(formula),
    withNumbers: formulaLayout(formula, substitute),
    withNumbersText: formulaText(formula, substitute),
    atMiddle: outcome.state === 'known' && outcome.over !== undefined,
    outcome: describeOutcome(outcome, model),
    sources: [...traced.values()].map(({ source }) => source),
  };
}

function trace(linked: LinkedCalculator, inputs: Inputs, evaluation: Evaluation, name: string): Traced {
  const given = linked.model.givens.find((one) => one.name === name);
  if (given) return traceGiven(inputs, given);
  const result = linked.results.get(name)?.model;
  const outcome = evaluation.outcomes[name];
  if (!result || !outcome) {
    return { middle: null, source: { name, label: name, from: 'missing', text: 'not worked out' } };
  }
  const middle =
    outcome.state === 'known' && outcome.middle.kind !== 'no-value'
      ? describeSample(outcome.middle, resultWriting(result)).text
      : null;
  const { words } = describeOutcome(outcome, result);
  const from = outcome.state === 'known' ? 'worked-out' : 'missing';
  return { middle, source: { name, label: result.label, from, text: words } };
}

function traceGiven(inputs: Inputs, given: Given): Traced {
  const { name, label, quantity, reading } = given;
  const field = inputs.fields.get(name);
  if (field?.state !== 'read') {
    const text = field?.state === 'waiting' ? field.because : 'refused';
    return { middle: null, source: { name, label, from: 'missing', text } };
  }
  const { low, high, unit, origin } = field;
  const options = { kind: quantity, unit, reading };
  // Formulas work on peaks, so the numbers put in are peaks too.
  const middle = writeValue(positionOf(axisFor(quantity, 0, low, high), 0.5), { kind: quantity, unit: peakUnit(unit) });
  return { middle: middle.text, source: { name, label, from: origin, text: writeEntry({ low, high }, options) } };
}

/** An absolute level counts RMS; its peak is written in volts. */
function peakUnit(unit: string): string | undefined {
  return unit === 'dBu' || unit === 'dBV' ? undefined : unit;
}
