import type { KeptInputs, ShownResults } from '#api';
import { shownNumbers } from '#calculator';
import { COMPILER_VERSION } from '#recipe';
import type { CalculatorsState } from './use-calculators.ts';

/** Results and limit states as they stand on the page, to be stored with a design. */
export function shownResults({ list }: CalculatorsState): ShownResults {
  return { engine: COMPILER_VERSION, calculators: shownNumbers(list) };
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
