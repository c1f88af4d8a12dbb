import { type KeyboardEvent, type ReactNode, useId } from 'react';
import { Button } from '../ui/button.tsx';
import { CopyButton } from '../ui/copy-button.tsx';
import { copiedResults } from './copied-results.ts';
import './document.css';
import { GivenField } from './given-field.tsx';
import { LimitRows } from './limit-rows.tsx';
import { KeyResultRow, ResultRows } from './result-rows.tsx';
import { useSpokenResults } from './spoken-results.ts';
import type { CalculatorState, CalculatorsState } from './use-calculators.ts';
import { useFocusAfter } from './use-focus-after.ts';

export interface CalculatorPanelProps {
  readonly calculators: CalculatorsState;
  readonly id: string;
  /** The first line of what is copied: number, title and version. */
  readonly heading: string;
  /** Stands at the head, right: the line that says whether the numbers are kept. */
  readonly standing?: ReactNode;
  /** Further acts at the foot: "Keep as a design". */
  readonly actions?: ReactNode;
}

/** One calculator: fields, results, limits. Its id is an anchor of the page. */
export function CalculatorPanel({ calculators, id, heading, standing, actions }: CalculatorPanelProps) {
  const state = calculators.byId.get(id);
  return state ? <Panel {...{ calculators, state, heading, standing, actions }} /> : null;
}

interface PanelProps extends Omit<CalculatorPanelProps, 'id'> {
  readonly state: CalculatorState;
}

function Panel({ calculators, state, heading, standing, actions }: PanelProps) {
  const { model } = state.linked;
  const headingId = useId();
  useSpokenResults(state.linked, state.evaluation);
  const titleOf = (calculator: string) => calculators.byId.get(calculator)?.linked.model.title;
  return (
    <section
      id={`calculator-${model.id}`}
      className="calculator"
      aria-labelledby={headingId}
      onKeyDown={(event) => onPanelKey(event, calculators)}
    >
      <header className="calculator-head">
        <h2 id={headingId}>{model.title}</h2>
        <span className="calculator-standing">{standing}</span>
      </header>
      <div className="givens">
        {model.givens.map((given) => {
          const field = state.inputs.fields.get(given.name);
          return field ? (
            <GivenField
              key={given.name}
              given={given}
              field={field}
              fromTitle={given.from && titleOf(given.from.calculator)}
              onChange={(text) => calculators.change(model.id, given.name, text)}
              onBegin={() => calculators.begin(model.id)}
              onSettle={() => calculators.settle(model.id, given.name)}
            />
          ) : null;
        })}
        <PutBack calculators={calculators} state={state} />
      </div>
      {state.isLastGood && (
        <p className="last-good">The results still stand on the last good numbers: a field needs a change.</p>
      )}
      <KeyResultRow state={state} />
      <LimitRows state={state} onChange={(name, text) => calculators.change(model.id, name, text)} />
      <ResultRows state={state} />
      <footer className="calculator-foot">
        {actions}
        <CopyButton text={copiedResults(state, heading)} label="Copy numbers" />
      </footer>
    </section>
  );
}

function PutBack({ calculators, state }: { calculators: CalculatorsState; state: CalculatorState }) {
  const { undo, redo } = calculators;
  const { box, goTo } = useFocusAfter<HTMLParagraphElement>();
  if (state.typedOver === 0 && undo === null && redo === null) return null;
  // The last step takes its button away; the way back from it is there.
  const travel = (step: () => void, back: string) => () => {
    step();
    goTo(back);
  };
  const count = state.typedOver === 1 ? '1 field is yours' : `${state.typedOver} fields are yours`;
  return (
    <p ref={box} className="given-acts">
      {state.typedOver > 0 && (
        <>
          <span>{count};</span>{' '}
          <Button
            kind="text"
            onClick={() => {
              calculators.putBack(state.id);
              goTo('.given-undo');
            }}
          >
            put back the recipe’s values
          </Button>
        </>
      )}
      <span className="given-travel">
        {undo !== null && (
          <Button kind="text" className="given-undo" onClick={travel(undo, '.given-redo')}>
            Undo
          </Button>
        )}
        {redo !== null && (
          <Button kind="text" className="given-redo" onClick={travel(redo, '.given-undo')}>
            Redo
          </Button>
        )}
      </span>
    </p>
  );
}

/** Undo and redo of inputs, by the keys that people know from every field. */
function onPanelKey(event: KeyboardEvent, { undo, redo }: CalculatorsState): void {
  if (!(event.ctrlKey || event.metaKey) || event.altKey) return;
  const key = event.key.toLowerCase();
  const act = key === 'y' || (key === 'z' && event.shiftKey) ? redo : key === 'z' ? undo : undefined;
  if (act === undefined) return;
  event.preventDefault();
  act?.();
}
