import type { CalculatorModel, Evaluation, ResultModel } from '#calculator';
import { namesRead } from '#formula';
import type { CalculatorState } from './use-calculators.ts';

/**
 * The result a calculator is for: the first that a stop limit is about, since authors guard what they came for. Without
 * one, the first result that no other result reads; results that are read by others are steps on the way.
 */
export function keyResult(model: CalculatorModel): ResultModel | undefined {
  const named = (name: string) => model.results.find((result) => result.name === name);
  for (const limit of model.limits.filter(({ level }) => level === 'stop')) {
    const about = namesRead(limit.of).map(named).find(Boolean);
    if (about) return about;
  }
  const read = new Set(model.results.flatMap((result) => (result.formula ? namesRead(result.formula) : [])));
  return model.results.find((result) => !read.has(result.name)) ?? model.results.at(-1);
}

/** Whether a result may be shown as good: it is known, no stop limit beneath it is broken, and it keeps every limit that is about it. */
export function isGoodResult({ linked, evaluation, isLastGood }: CalculatorState, result: string): boolean {
  if (isLastGood || evaluation.outcomes[result]?.state !== 'known') return false;
  if (brokenUnder(evaluation, result).length > 0) return false;
  return evaluation.limits.every((limit, i) => {
    const of = linked.model.limits[i]?.of;
    return limit.held || limit.state === 'waiting' || !of || !namesRead(of).includes(result);
  });
}

/** Names of the broken stop limits that a result stands on; empty for a result that may be shown as good. */
export function brokenUnder(evaluation: Evaluation, result: string): readonly string[] {
  return Object.hasOwn(evaluation.notValid, result) ? (evaluation.notValid[result] ?? []) : [];
}
