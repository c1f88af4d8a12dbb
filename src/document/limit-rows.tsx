import { useState } from 'react';
import { type Cure, describeLimit, type LimitModel, type LimitOutcome } from '#calculator';
import { LimitMark } from '../ui/marks.tsx';
import { Letter } from './letter.tsx';
import type { CalculatorState } from './use-calculators.ts';
import { useCures } from './use-cures.ts';
import { useFocusAfter } from './use-focus-after.ts';

/** Limits in the order of their urgency; equal ones as the author wrote them. */
const URGENCY = {
  exceeded: 0,
  'no-value': 1,
  'only-nominally': 2,
  close: 3,
  waiting: 4,
  within: 5,
} as const satisfies Record<LimitOutcome['state'], number>;

export interface LimitRowsProps {
  readonly state: CalculatorState;
  readonly onChange: (name: string, text: string | null) => void;
}

interface Tried {
  readonly limit: string;
  readonly cure: Cure;
  /** What stood in the field; null for the recipe's own. */
  readonly before: string | null;
}

/** How each limit stands. A broken or close one names the nearest change of one input that cures it. */
export function LimitRows({ state, onChange }: LimitRowsProps) {
  const { linked, inputs, evaluation } = state;
  const cures = useCures(state);
  const [tried, setTried] = useState<Tried | null>(null);
  const { box, goTo } = useFocusAfter<HTMLDivElement>();
  if (evaluation.limits.length === 0) return null;
  const stands = tried !== null && inputs.fields.get(tried.cure.name)?.text === tried.cure.to ? tried : null;
  const attempt = (limit: string, cure: Cure) => {
    const field = inputs.fields.get(cure.name);
    setTried({ limit, cure, before: field?.origin === 'typed' ? field.text : null });
    onChange(cure.name, cure.to);
    goTo('.limit-tried button');
  };
  const rows = evaluation.limits
    .flatMap((outcome, i) => {
      const model = linked.model.limits[i];
      return model ? [{ outcome, model }] : [];
    })
    .sort((a, b) => URGENCY[a.outcome.state] - URGENCY[b.outcome.state]);
  return (
    <div ref={box} className="limits" data-last-good={state.isLastGood ? '' : undefined}>
      <h3 className="lab limits-head" tabIndex={-1}>
        Limits
      </h3>
      {stands && (
        <p className="limit-tried" role="status">
          Tried for {stands.limit}: <CureWords state={state} cure={stands.cure} />{' '}
          <button
            type="button"
            className="btn-text"
            onClick={() => {
              onChange(stands.cure.name, stands.before);
              setTried(null);
              goTo('.limits-head');
            }}
          >
            Put back
          </button>
        </p>
      )}
      <ul>
        {rows.map(({ outcome, model }) => (
          <LimitRow
            key={model.name}
            state={state}
            outcome={outcome}
            model={model}
            cure={cures.get(model.name)}
            onTry={(cure) => attempt(model.name, cure)}
          />
        ))}
      </ul>
    </div>
  );
}

interface LimitRowProps {
  readonly state: CalculatorState;
  readonly outcome: LimitOutcome;
  readonly model: LimitModel;
  /** Undefined while it is not looked for yet, null where no single input cures it. */
  readonly cure: Cure | null | undefined;
  readonly onTry: (cure: Cure) => void;
}

function LimitRow({ state, outcome, model, cure, onTry }: LimitRowProps) {
  const described = describeLimit(outcome, model);
  const isCalm = outcome.state === 'within' || outcome.state === 'waiting';
  const isBroken = !isCalm && outcome.state !== 'close';
  return (
    <li className={`limit-row limit-row-${outcome.state}`}>
      <LimitMark state={outcome.state} />
      <span className="limit-name">
        {model.name}
        {model.level === 'caution' && <span className="note"> caution</span>}
        {model.over === 'nominal' && <span className="note"> nominal only</span>}
      </span>
      <span className="limit-value">{described.value}</span>
      <span className="limit-bounds">{described.bounds}</span>
      {outcome.state === 'waiting' && <p className="limit-more note">{`for ${outcome.waitingFor.join(', ')}`}</p>}
      {!isCalm && (
        <p className="limit-more">
          {described.margin !== '' && <>{sentence(described.margin)} </>}
          {isBroken && <>{model.says} </>}
          {cure && (
            <>
              {isBroken ? 'Nearest cure: ' : 'To stay clear: '}
              <CureWords state={state} cure={cure} />{' '}
              <button
                type="button"
                className="btn-text"
                aria-label={`Try it: ${cure.name} ${cure.to}`}
                onClick={() => onTry(cure)}
              >
                Try it
              </button>
            </>
          )}
          {isBroken && cure === null && 'No change of one input alone cures it.'}
        </p>
      )}
    </li>
  );
}

function CureWords({ state, cure }: { state: CalculatorState; cure: Cure }) {
  const label = state.linked.model.givens.find((given) => given.name === cure.name)?.label ?? cure.name;
  return (
    <span>
      {label} <Letter name={cure.name} /> <b>{cure.to}</b> instead of {cure.was}.
    </span>
  );
}

function sentence(text: string): string {
  return `${text.charAt(0).toUpperCase()}${text.slice(1)}.`;
}
