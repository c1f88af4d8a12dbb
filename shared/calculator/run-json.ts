import { unboundedWords } from '#formula';
import { describeOutcome, describeSample, resultWriting } from './describe.ts';
import type { Inputs } from './inputs.ts';
import type { CalculatorModel, LimitState, ResultModel } from './model.ts';
import type { Evaluation, Outcome, Sample } from './outcome.ts';
import { axisFor, positionOf } from './search.ts';

interface InputJson {
  readonly si: number | null;
  readonly low?: number;
  readonly high?: number;
  readonly text: string;
}

interface ResultJson {
  readonly si: number | null;
  readonly low?: number | null;
  readonly high?: number | null;
  /** The coherent unit that `si`, `low` and `high` count in. */
  readonly unit: string;
  readonly text: string;
  readonly problem?: { readonly code: 'unbounded' | 'no-value'; readonly sign?: 1 | -1; readonly message: string };
}

/** One calculator of `recipe run --json`: see the recipe language, section 9. Numbers in SI base units, null where none is finite. */
export interface RunJson {
  readonly inputs: Readonly<Record<string, InputJson>>;
  readonly results: Readonly<Record<string, ResultJson>>;
  readonly limits: readonly {
    readonly name: string;
    readonly level: 'stop' | 'caution';
    readonly state: LimitState;
    readonly held: boolean;
    readonly held_nominal: boolean;
    readonly value: number | null;
    readonly from: number | null;
    readonly to: number | null;
    readonly margin: number | null;
  }[];
}

/**
 * Makes the calculator's part of the command line's JSON. The language has no word there for waiting: such a result has
 * the problem `no-value` with what it waits for, such a limit the state `no-value`.
 */
export function toRunJson(model: CalculatorModel, inputs: Inputs, evaluation: Evaluation): RunJson {
  return {
    inputs: Object.fromEntries(
      model.givens.map((given) => [given.name, inputJson(given.quantity, inputs, given.name)]),
    ),
    results: Object.fromEntries(
      model.results.map((result) => [result.name, resultJson(result, evaluation.outcomes[result.name])]),
    ),
    limits: evaluation.limits.map(({ name, level, state, held, heldNominal, value, from, to, margin }) => ({
      name,
      level,
      state: state === 'waiting' ? 'no-value' : state,
      held,
      held_nominal: heldNominal,
      value,
      from,
      to,
      margin,
    })),
  };
}

function inputJson(quantity: CalculatorModel['givens'][number]['quantity'], inputs: Inputs, name: string): InputJson {
  const field = inputs.fields.get(name);
  if (field?.state !== 'read') return { si: null, text: field?.text ?? '' };
  const { low, high, understood } = field;
  const si = positionOf(axisFor(quantity, 0, low, high), 0.5);
  return { si, ...(low < high ? { low, high } : {}), text: understood };
}

function resultJson(result: ResultModel, outcome: Outcome | undefined): ResultJson {
  const unit = result.dimensionUnit;
  if (!outcome) throw new Error(`the evaluation lacks ${result.name}`);
  const { text, words } = describeOutcome(outcome, result);
  if (outcome.state === 'waiting') return { si: null, unit, text, problem: { code: 'no-value', message: words } };
  const { middle, over } = outcome;
  return {
    si: finite(middle),
    ...(over ? { low: finite(over.lowest), high: finite(over.highest) } : {}),
    unit,
    text,
    ...problemOf(result, outcome),
  };
}

/** The first trouble among the middle and the ends; that only some points have no value is one too. */
function problemOf(result: ResultModel, outcome: Extract<Outcome, { state: 'known' }>): Pick<ResultJson, 'problem'> {
  const { middle, over, because } = outcome;
  const samples = over ? [middle, over.lowest, over.highest] : [middle];
  const bad = samples.find((sample) => sample.kind !== 'finite');
  if (bad?.kind === 'unbounded') {
    const message = because ? `unbounded: ${unboundedWords(because)}` : 'unbounded';
    return { problem: { code: 'unbounded', sign: bad.sign, message } };
  }
  if (bad) return { problem: { code: 'no-value', message: describeSample(bad, resultWriting(result)).words } };
  if (over?.everywhere === false)
    return { problem: { code: 'no-value', message: 'no value at some points of the range' } };
  return {};
}

function finite(sample: Sample): number | null {
  return sample.kind === 'finite' ? sample.si : null;
}
