import { describeOutcome } from './describe.ts';
import type { Evaluated } from './inputs.ts';
import type { Outcome } from './outcome.ts';

/** One calculator's numbers as people read them: results as text with their ends in SI base units (null where none is finite), limits by state. */
export interface ShownNumbers {
  readonly results: Record<string, { text: string; low: number | null; high: number | null }>;
  readonly limits: Record<string, string>;
}

/** Takes down what a page shows, so that a design can tell later whether it still comes out the same. By calculator id. */
export function shownNumbers(
  calculators: Iterable<Pick<Evaluated, 'linked' | 'evaluation'>>,
): Record<string, ShownNumbers> {
  const shown: Record<string, ShownNumbers> = {};
  for (const { linked, evaluation } of calculators) {
    const results: ShownNumbers['results'] = {};
    for (const result of linked.model.results) {
      const outcome = evaluation.outcomes[result.name];
      if (outcome) results[result.name] = { text: describeOutcome(outcome, result).text, ...endsOf(outcome) };
    }
    const limits = Object.fromEntries(evaluation.limits.map((limit) => [limit.name, limit.state]));
    shown[linked.model.id] = { results, limits };
  }
  return shown;
}

function endsOf(outcome: Outcome): { low: number | null; high: number | null } {
  if (outcome.state !== 'known') return { low: null, high: null };
  const { lowest, highest } = outcome.over ?? { lowest: outcome.middle, highest: outcome.middle };
  return { low: lowest.kind === 'finite' ? lowest.si : null, high: highest.kind === 'finite' ? highest.si : null };
}
