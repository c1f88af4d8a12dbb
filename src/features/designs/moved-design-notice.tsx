import { useEffect, useRef } from 'react';
import type { DesignPage } from '#api';
import { typedInputs } from '../../document/shown-results.ts';
import { momentText } from '../../lib/locale.ts';
import { Button } from '../../ui/button.tsx';
import { inputDifferences } from './design-inputs.ts';
import { type DesignForm, type DesignState, FIELD_LABELS, formOf, type MovedDesign } from './use-design.ts';

interface Row {
  readonly key: string;
  readonly label: string;
  readonly there: string;
  readonly here: string;
}

/** The design was changed elsewhere since this page read it. Nothing was done; both are shown, and neither is lost. */
export function MovedDesignNotice({
  page,
  state,
  moved,
}: {
  page: DesignPage;
  state: DesignState;
  moved: MovedDesign;
}) {
  const heading = useRef<HTMLHeadingElement>(null);
  useEffect(() => heading.current?.focus(), []);
  const rows = differingRows(page, state, moved);
  return (
    <section className="design-moved" aria-label="The design has moved">
      <h2 ref={heading} tabIndex={-1}>
        Not kept. This design was changed elsewhere.
      </h2>
      <p>
        It was changed on {momentText(moved.design.updatedAt)}, after this page read it. What you typed is still here.
      </p>
      {rows.length === 0 ? (
        <p>What is there now is what stands here.</p>
      ) : (
        <table className="design-pairs">
          <thead>
            <tr>
              <th scope="col">What differs</th>
              <th scope="col">there now</th>
              <th scope="col">here</th>
            </tr>
          </thead>
          <tbody>
            {rows.map((row) => (
              <tr key={row.key}>
                <th scope="row">{row.label}</th>
                <td data-head="there now">{row.there}</td>
                <td data-head="here">{row.here}</td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
      <div className="mt-3 flex flex-wrap gap-2">
        <Button onClick={() => state.goOnWithMine(moved)}>Go on with my changes</Button>
        <Button onClick={() => state.takeTheirs(moved)}>Take what is there now</Button>
      </div>
      <p className="note mt-2">Going on keeps nothing yet: press “Keep changes” when it is as you want it.</p>
    </section>
  );
}

function differingRows(page: DesignPage, state: DesignState, moved: MovedDesign): readonly Row[] {
  const [there, here] = [formOf(moved), state.form.form.getValues()];
  const named = (Object.keys(FIELD_LABELS) as (keyof DesignForm)[]).flatMap((key): Row[] =>
    there[key] === here[key]
      ? []
      : [{ key, label: FIELD_LABELS[key], there: shown(there[key]), here: shown(here[key]) }],
  );
  const typed = inputDifferences(moved.inputs, typedInputs(state.calculators)).map((one): Row => {
    const model = page.document.calculators.find((calculator) => calculator.id === one.calculator);
    const given = model?.givens.find((each) => each.name === one.name);
    const label = given?.label ?? one.name;
    const own = (text: string | null) => text ?? `the recipe’s own value`;
    return { key: `${one.calculator}.${one.name}`, label, there: own(one.left), here: own(one.right) };
  });
  return [...named, ...typed];
}

function shown(text: string): string {
  return text === '' ? 'empty' : text;
}
