import { describeLimit, describeOutcome } from '#calculator';
import { brokenUnder } from './key-result.ts';
import { notValidWords } from './result-rows.tsx';
import type { CalculatorState } from './use-calculators.ts';

/** A calculator as tab-separated lines, for a sheet or a mail; what is not valid says so there too. */
export function copiedResults(state: CalculatorState, heading: string): string {
  const { linked, shown, evaluation } = state;
  const { model } = linked;
  const inputs = model.givens.map((given) => {
    const field = shown.fields.get(given.name);
    return [given.label, given.name, field?.state === 'read' ? field.understood : 'no value'];
  });
  const results = model.results.map((result) => {
    const outcome = evaluation.outcomes[result.name];
    const broken = brokenUnder(evaluation, result.name);
    const text = outcome ? describeOutcome(outcome, result).words : '';
    return [result.label, result.name, text, ...(broken.length > 0 ? [notValidWords(broken)] : [])];
  });
  const limits = evaluation.limits.flatMap((limit, i) => {
    const of = model.limits[i];
    if (!of) return [];
    const { words, bounds } = describeLimit(limit, of);
    return [[`Limit: ${limit.name}`, '', words, bounds]];
  });
  const lines = [[heading], ...inputs, ...results, ...limits];
  if (state.isLastGood) lines.push(['Some fields were refused; these results stand on their last good numbers.']);
  return lines.map((line) => line.join('\t')).join('\n');
}
