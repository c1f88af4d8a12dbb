import { useId, useState } from 'react';
import { KINDS, type QuantityKind } from '#quantity';
import { TextArea } from '../../ui/field.tsx';
import { asQuantity, type PastedGiven, readPastedList, understood } from './pasted-list.ts';

export interface PastedListFormProps {
  readonly onChange: (givens: readonly PastedGiven[]) => void;
}

/** A list of parts and values, read line by line; what was understood is shown before it is used. */
export function PastedListForm({ onChange }: PastedListFormProps) {
  const [text, setText] = useState('');
  const [chosen, setChosen] = useState<ReadonlyMap<string, QuantityKind>>(new Map());
  const lines = readPastedList(text);
  const givens = givensOf(text, chosen);
  const problems = lines.flatMap((line) => (line.kind === 'problem' ? [line] : []));
  const retype = (next: string) => {
    setText(next);
    onChange(givensOf(next, chosen));
  };
  const choose = (name: string, quantity: QuantityKind) => {
    const next = new Map(chosen).set(name, quantity);
    setChosen(next);
    onChange(givensOf(text, next));
  };
  return (
    <div className="grid gap-4">
      <TextArea
        label="Names and values, one a line"
        hint="R1 = 10k, V_in: ±2 V, C1 = 4n7 # input filter. What follows # becomes the label."
        className="font-code"
        rows={6}
        spellCheck={false}
        value={text}
        onChange={(event) => retype(event.target.value)}
      />
      {givens.length > 0 && (
        <table className="register">
          <caption className="sr-only">What was understood</caption>
          <thead>
            <tr>
              <th scope="col">Name</th>
              <th scope="col">Value</th>
              <th scope="col">Quantity</th>
              <th scope="col">Label</th>
            </tr>
          </thead>
          <tbody>
            {givens.map((given) => (
              <tr key={given.name}>
                <th scope="row">{given.name}</th>
                <td data-head="Value">{understood(given)}</td>
                <td data-head="Quantity">
                  <QuantityChoice given={given} onChoose={(quantity) => choose(given.name, quantity)} />
                </td>
                <td data-head="Label">{given.label}</td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
      {problems.length > 0 && (
        <ul aria-label="Lines not read">
          {problems.map((problem) => (
            <li key={problem.line} className="field-error">
              Line {problem.line} is left out. {problem.why}
            </li>
          ))}
        </ul>
      )}
    </div>
  );
}

function QuantityChoice({ given, onChoose }: { given: PastedGiven; onChoose: (quantity: QuantityKind) => void }) {
  const id = useId();
  if (given.mayBe.length === 1) return KINDS[given.quantity].words;
  return (
    <>
      <label htmlFor={id} className="sr-only">
        Quantity of {given.name}
      </label>
      <select
        id={id}
        className="field-box"
        value={given.quantity}
        onChange={(event) => {
          const picked = given.mayBe.find((kind) => kind === event.target.value);
          if (picked !== undefined) onChoose(picked);
        }}
      >
        {given.mayBe.map((kind) => (
          <option key={kind} value={kind}>
            {KINDS[kind].words}
          </option>
        ))}
      </select>
    </>
  );
}

function givensOf(text: string, chosen: ReadonlyMap<string, QuantityKind>): readonly PastedGiven[] {
  return readPastedList(text).flatMap((line) => {
    if (line.kind === 'problem') return [];
    const quantity = chosen.get(line.name);
    return [quantity !== undefined && line.mayBe.includes(quantity) ? asQuantity(line, quantity) : line];
  });
}
