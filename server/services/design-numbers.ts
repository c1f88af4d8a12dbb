import type { ReviewPage } from '#api';
import { describeLimit, describeOutcome, type Evaluated, evaluateInOrder, linkCalculator } from '#calculator';
import type { RecipeDocument } from '#recipe';

type Inputs = Readonly<Record<string, Readonly<Record<string, string>>>>;
export type DesignChange = ReviewPage['designs']['seen'][number]['changes'][number];

/**
 * Gives each result and each limit that reads differently with the same inputs in two documents, in the order of the pages.
 * Inputs that a document lacks are ignored there, and what it has beyond them stands at the recipe's own values.
 * Cost: one evaluation of every calculator in both documents.
 */
export function compareWithInputs(
  before: RecipeDocument,
  after: RecipeDocument,
  inputs: Inputs,
): readonly DesignChange[] {
  const old = shownNumbers(before, inputs);
  const fresh = shownNumbers(after, inputs);
  return [...new Set([...old.keys(), ...fresh.keys()])].flatMap((key) => {
    const [was, is] = [old.get(key), fresh.get(key)];
    if (was?.text === is?.text && was?.label === is?.label) return [];
    const newlyBroken = is?.broken === true && was?.broken !== true;
    return [
      { label: is?.label ?? was?.label ?? key, before: was?.text ?? MISSING, after: is?.text ?? MISSING, newlyBroken },
    ];
  });
}

const MISSING = 'not there';

interface Shown {
  readonly label: string;
  readonly text: string;
  readonly broken: boolean;
}

function shownNumbers(document: RecipeDocument, inputs: Inputs): ReadonlyMap<string, Shown> {
  const linked = document.calculators.map(linkCalculator);
  // Texts were read once in the browser of the person who typed them, whose locale may write a decimal comma.
  const evaluated = evaluateInOrder(linked, inputs, { decimalComma: true });
  const shown = new Map<string, Shown>();
  for (const [id, one] of evaluated) {
    addResults(shown, id, one);
    addLimits(shown, id, one);
  }
  return shown;
}

function addResults(shown: Map<string, Shown>, id: string, { linked, evaluation }: Evaluated): void {
  for (const result of linked.model.results) {
    const outcome = evaluation.outcomes[result.name];
    if (outcome === undefined) continue;
    shown.set(`${id} result ${result.name}`, {
      label: result.label,
      text: describeOutcome(outcome, result).text,
      broken: false,
    });
  }
}

function addLimits(shown: Map<string, Shown>, id: string, { linked, evaluation }: Evaluated): void {
  for (const outcome of evaluation.limits) {
    const limit = linked.model.limits.find((one) => one.name === outcome.name);
    if (limit === undefined) continue;
    const broken = outcome.state !== 'waiting' && !outcome.held;
    shown.set(`${id} limit ${limit.name}`, { label: limit.name, text: describeLimit(outcome, limit).state, broken });
  }
}
