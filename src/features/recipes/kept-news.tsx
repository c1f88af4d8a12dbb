import type { CalculatorsState } from '../../document/use-calculators.ts';
import { Button } from '../../ui/button.tsx';
import type { KeptInputsState } from './use-kept-inputs.ts';

export interface KeptNewsProps {
  readonly kept: KeptInputsState;
  readonly calculators: CalculatorsState;
}

/** What happened to kept numbers elsewhere: the last to arrive wins, and nobody is left guessing. */
export function KeptNews({ kept, calculators }: KeptNewsProps) {
  const labelOf = (calculator: string, name: string) =>
    calculators.byId.get(calculator)?.linked.model.givens.find((given) => given.name === name)?.label;
  const moved = kept.moved.flatMap(({ calculator, name }) => labelOf(calculator, name) ?? []);
  const offered = Object.entries(kept.offered).flatMap(([calculator, fields]) =>
    Object.entries(fields).map(
      ([name, { text }]) => `${labelOf(calculator, name) ?? name} ${text ?? 'as in the recipe'}`,
    ),
  );
  return (
    <>
      {moved.length > 0 && (
        <p className="note">Also changed elsewhere meanwhile; what was typed here is kept: {moved.join(', ')}.</p>
      )}
      {offered.length > 0 && (
        <div role="note" className="border border-ink bg-sheet px-4 py-2">
          <p>
            Typed in this browser and never kept, while it was changed elsewhere: <b>{offered.join('; ')}</b>.
          </p>
          <p className="flex gap-4">
            <Button kind="text" onClick={() => kept.answerOffer(true)}>
              Use them
            </Button>
            <Button kind="text" onClick={() => kept.answerOffer(false)}>
              Leave them
            </Button>
          </p>
        </div>
      )}
    </>
  );
}
