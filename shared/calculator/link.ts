import { type CheckedExpr, type LinkedFormula, linkScalar, namesRead } from '#formula';
import type { CalculatorModel, LimitModel, ResultModel } from './model.ts';

/** Writes one result into its place in the frame. */
export interface Step {
  readonly slot: number;
  readonly run: LinkedFormula;
}

/** What a formula of the calculator stands on, through every result between. */
export interface Footing {
  /** Results to run before it, each after all it reads. */
  readonly steps: readonly Step[];
  /** Givens that it depends on, in the order of the model, and chosen names. */
  readonly inputs: readonly string[];
  /** Names that this release cannot work out: chosen values, results that are only measured. */
  readonly unavailable: readonly string[];
}

export interface LinkedResult extends Footing {
  readonly model: ResultModel;
  readonly slot: number;
}

export interface LinkedLimit extends Footing {
  readonly model: LimitModel;
  readonly of: LinkedFormula;
  readonly from: LinkedFormula | null;
  readonly to: LinkedFormula | null;
  readonly near: LinkedFormula | null;
}

/** A calculator ready to run: every name has a place in one frame of numbers, givens first. */
export interface LinkedCalculator {
  readonly model: CalculatorModel;
  readonly slots: ReadonlyMap<string, number>;
  readonly results: ReadonlyMap<string, LinkedResult>;
  readonly limits: readonly LinkedLimit[];
}

/**
 * Makes closures of every formula and finds what each result and limit depends on, transitively. Once for a document:
 * the answer holds functions and is not data. Cost: linear in the formulas times the depth of their definitions.
 */
export function linkCalculator(model: CalculatorModel): LinkedCalculator {
  const slots = new Map<string, number>();
  const place = (name: string) => slots.set(name, slots.size);
  for (const given of model.givens) place(given.name);
  for (const name of model.choices.flatMap(chosenNames)) place(name);
  for (const result of model.results) place(result.name);
  const slotOf = (name: string): number => {
    const slot = slots.get(name);
    if (slot === undefined) throw new Error(`the model of ${model.id} has no ${name}, though a formula reads it`);
    return slot;
  };
  const results = linkResults(model, slotOf);
  const limits = model.limits.map((limit): LinkedLimit => {
    const formulas = [limit.of, limit.from, limit.to, limit.near].filter((formula) => formula !== undefined);
    const link = (formula: CheckedExpr | undefined) => (formula ? linkScalar(formula, slotOf) : null);
    return {
      model: limit,
      of: linkScalar(limit.of, slotOf),
      from: link(limit.from),
      to: link(limit.to),
      near: link(limit.near),
      ...footingOf(formulas, model, results),
    };
  });
  return { model, slots, results, limits };
}

function chosenNames(choice: CalculatorModel['choices'][number]): readonly string[] {
  return [...choice.names, ...choice.twins.map((twin) => twin.name)];
}

function linkResults(model: CalculatorModel, slotOf: (name: string) => number): Map<string, LinkedResult> {
  const byName = new Map(model.results.map((result) => [result.name, result]));
  const linked = new Map<string, LinkedResult>();
  for (const name of model.order) {
    const result = byName.get(name);
    if (!result) continue;
    const slot = slotOf(name);
    if (!result.formula) {
      linked.set(name, { model: result, slot, steps: [], inputs: [], unavailable: [name] });
      continue;
    }
    const below = footingOf([result.formula], model, linked);
    linked.set(name, {
      ...below,
      model: result,
      slot,
      steps: [...below.steps, { slot, run: linkScalar(result.formula, slotOf) }],
    });
  }
  return linked;
}

/** `results` must hold every result that the formulas read. */
function footingOf(
  formulas: readonly CheckedExpr[],
  model: CalculatorModel,
  results: ReadonlyMap<string, LinkedResult>,
): Footing {
  const needed = new Set<string>();
  const inputs = new Set<string>();
  const unavailable = new Set<string>();
  const givens = new Set(model.givens.map((given) => given.name));
  for (const name of formulas.flatMap(namesRead)) {
    const result = results.get(name);
    if (result) {
      for (const input of result.inputs) inputs.add(input);
      for (const missing of result.unavailable) unavailable.add(missing);
      needed.add(name);
    } else {
      inputs.add(name);
      if (!givens.has(name)) unavailable.add(name);
    }
  }
  const steps = new Map<number, Step>();
  for (const name of needed) for (const step of results.get(name)?.steps ?? []) steps.set(step.slot, step);
  const inOrder = model.givens.map((given) => given.name).filter((name) => inputs.has(name));
  const chosen = [...inputs].filter((name) => !givens.has(name));
  return { steps: [...steps.values()], inputs: [...inOrder, ...chosen], unavailable: [...unavailable] };
}
