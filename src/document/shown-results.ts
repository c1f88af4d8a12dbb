import type { KeptInputs, ShownResults } from '#api';
import { describeOutcome, type Outcome } from '#calculator';
import { COMPILER_VERSION } from '#recipe';
import type { CalculatorsState } from './use-calculators.ts';

/** Results and limit states as they stand on the page, to be stored with a design. Numbers in SI base units, null where none is finite. */
export function shownResults({ list }: CalculatorsState): ShownResults {
  const calculators: ShownResults['calculators'] = {};
  for (const { id, linked, evaluation } of list) {
    const results: ShownResults['calculators'][string]['results'] = {};
    for (const result of linked.model.results) {
      const outcome = evaluation.outcomes[result.name];
      if (outcome) results[result.name] = { text: describeOutcome(outcome, result).text, ...endsOf(outcome) };
    }
    const limits = Object.fromEntries(evaluation.limits.map((limit) => [limit.name, limit.state]));
    calculators[id] = { results, limits };
  }
  return { engine: COMPILER_VERSION, calculators };
}

function endsOf(outcome: Outcome): { low: number | null; high: number | null } {
  if (outcome.state !== 'known') return { low: null, high: null };
  const { lowest, highest } = outcome.over ?? { lowest: outcome.middle, highest: outcome.middle };
  return { low: lowest.kind === 'finite' ? lowest.si : null, high: highest.kind === 'finite' ? highest.si : null };
}

/** What was typed over, as understood; a field that is refused keeps the text as typed. */
export function typedInputs({ list }: CalculatorsState): KeptInputs {
  const inputs: KeptInputs = {};
  for (const { id, inputs: read } of list) {
    const typed = [...read.fields.values()].filter((field) => field.origin === 'typed');
    if (typed.length === 0) continue;
    inputs[id] = Object.fromEntries(
      typed.map((field) => [field.name, field.state === 'read' ? field.understood : field.text]),
    );
  }
  return inputs;
}
