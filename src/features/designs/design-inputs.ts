import type { KeptInputs } from '#api';

export function textAt(inputs: KeptInputs, calculator: string, name: string): string | null {
  const own = Object.hasOwn(inputs, calculator) ? inputs[calculator] : undefined;
  return own && Object.hasOwn(own, name) ? (own[name] ?? null) : null;
}

/** The inputs with one field changed; null gives it back to the recipe's own value. */
export function withText(inputs: KeptInputs, calculator: string, name: string, text: string | null): KeptInputs {
  const { [name]: _old, ...others } = Object.hasOwn(inputs, calculator) ? (inputs[calculator] ?? {}) : {};
  return { ...inputs, [calculator]: text === null ? others : { ...others, [name]: text } };
}

export interface InputDifference {
  readonly calculator: string;
  readonly name: string;
  readonly left: string | null;
  readonly right: string | null;
}

/** Every field whose text is not the same in both. */
export function inputDifferences(left: KeptInputs, right: KeptInputs): readonly InputDifference[] {
  const calculators = new Set([...Object.keys(left), ...Object.keys(right)]);
  return [...calculators].flatMap((calculator) => {
    const names = new Set([...namesOf(left, calculator), ...namesOf(right, calculator)]);
    return [...names].flatMap((name) => {
      const [one, other] = [textAt(left, calculator, name), textAt(right, calculator, name)];
      return one === other ? [] : [{ calculator, name, left: one, right: other }];
    });
  });
}

/** What was changed here stays, the rest is as it is there now. `base` is what both started from. */
export function mergedInputs(base: KeptInputs, mine: KeptInputs, theirs: KeptInputs): KeptInputs {
  return inputDifferences(base, mine).reduce(
    (merged, { calculator, name, right }) => withText(merged, calculator, name, right),
    theirs,
  );
}

function namesOf(inputs: KeptInputs, calculator: string): readonly string[] {
  return Object.hasOwn(inputs, calculator) ? Object.keys(inputs[calculator] ?? {}) : [];
}
