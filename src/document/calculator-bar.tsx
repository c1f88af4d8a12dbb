import { describeOutcome, type LimitOutcome } from '#calculator';
import { buttonClass } from '../ui/button.tsx';
import { LimitMark } from '../ui/marks.tsx';
import { isGoodResult, keyResult } from './key-result.ts';
import { Amount } from './result-rows.tsx';
import type { CalculatorState } from './use-calculators.ts';

/** On a phone: the key result and how many limits are broken, always in view, and the way to the fields. */
export function CalculatorBar({ state }: { state: CalculatorState }) {
  const { linked, evaluation } = state;
  const key = keyResult(linked.model);
  const outcome = key && evaluation.outcomes[key.name];
  if (!key || !outcome) return null;
  return (
    <div className="calculator-bar">
      <div className="calculator-bar-result" data-good={isGoodResult(state, key.name) ? '' : undefined}>
        <span className="sr-only">{key.label}: </span>
        <Amount text={describeOutcome(outcome, key).text} />
        <LimitCount limits={evaluation.limits} />
      </div>
      <a className={buttonClass('main')} href={`#calculator-${linked.model.id}`}>
        {linked.model.title}
      </a>
    </div>
  );
}

function LimitCount({ limits }: { limits: readonly LimitOutcome[] }) {
  if (limits.length === 0) return null;
  const count = (state: LimitOutcome['state']) => limits.filter((limit) => limit.state === state).length;
  for (const state of ['exceeded', 'no-value', 'only-nominally', 'close', 'waiting'] as const) {
    const found = count(state);
    if (found > 0) {
      const words = state === 'exceeded' ? 'exceeded' : state.replace('-', ' ');
      return <LimitMark state={state}>{`${found} of ${limits.length} limits ${words}`}</LimitMark>;
    }
  }
  return <LimitMark state="within">{`all ${limits.length} limits within`}</LimitMark>;
}
