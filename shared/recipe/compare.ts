import {
  describeOutcome,
  type ExampleModel,
  evaluateInOrder,
  linkCalculator,
  type Outcome,
  type ResultModel,
} from '#calculator';
import type { RecipeDocument } from './document.ts';

/** A number of an example that differs between two documents; null where one of them has no such number. */
export interface NumberChange {
  readonly calculator: string;
  readonly example: string;
  readonly result: string;
  readonly label: string;
  readonly before: string | null;
  readonly after: string | null;
}

/** Stands for the title of an example: the recipe's own values. */
const OWN_VALUES = 'the recipe’s own values';

interface Shown {
  readonly calculator: string;
  readonly example: string;
  readonly result: string;
  readonly label: string;
  readonly text: string;
}

/**
 * Gives every result whose number, as it is shown, is not the same in both documents: at the recipe's own values and for
 * each example. Examples are known by their title. Cost: evaluates every calculator once an example.
 */
export function compareDocuments(before: RecipeDocument, after: RecipeDocument): readonly NumberChange[] {
  const old = numbersOf(before);
  const now = numbersOf(after);
  const keys = new Set([...now.keys(), ...old.keys()]);
  return [...keys].flatMap((key): NumberChange[] => {
    const [was, is] = [old.get(key), now.get(key)];
    const either = is ?? was;
    if (either === undefined || was?.text === is?.text) return [];
    const { calculator, example, result, label } = either;
    return [{ calculator, example, result, label, before: was?.text ?? null, after: is?.text ?? null }];
  });
}

function numbersOf({ calculators }: RecipeDocument): ReadonlyMap<string, Shown> {
  const linked = calculators.map((model) => linkCalculator(model));
  const numbers = new Map<string, Shown>();
  const collect = (
    id: string,
    example: string,
    texts: Readonly<Record<string, Readonly<Record<string, string>>>>,
  ): void => {
    const evaluated = evaluateInOrder(linked, texts).get(id);
    for (const result of evaluated?.linked.model.results ?? []) {
      const { name, label } = result;
      const text = textOf(evaluated?.evaluation.outcomes[name], result);
      numbers.set([id, example, name].join('\0'), { calculator: id, example, result: name, label, text });
    }
  };
  for (const { id, examples } of calculators) {
    collect(id, OWN_VALUES, {});
    for (const example of examples) collect(id, example.title, { [id]: textsOf(example) });
  }
  return numbers;
}

function textsOf({ sets }: ExampleModel): Readonly<Record<string, string>> {
  return Object.fromEntries(sets.filter((set) => set.part === 'value').map((set) => [set.name, set.to.text]));
}

function textOf(outcome: Outcome | undefined, result: ResultModel): string {
  return outcome === undefined ? '' : describeOutcome(outcome, result).words;
}
