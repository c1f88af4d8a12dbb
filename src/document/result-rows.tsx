import { type Described, describeOutcome, type Explanation, explainResult, type ResultModel } from '#calculator';
import { Hint } from '../ui/hint.tsx';
import { FormulaMath } from './formula-math.tsx';
import { brokenUnder, isGoodResult, keyResult } from './key-result.ts';
import { Letter } from './letter.tsx';
import type { CalculatorState } from './use-calculators.ts';

/** The key result, largest of all. */
export function KeyResultRow({ state }: { state: CalculatorState }) {
  const key = keyResult(state.linked.model);
  if (!key) return null;
  return (
    <dl className="results" data-last-good={state.isLastGood ? '' : undefined}>
      <ResultRow state={state} result={key} isKey />
    </dl>
  );
}

/** The results beside the key result, in the author's order. Each opens to its formula, with the numbers put in. */
export function ResultRows({ state }: { state: CalculatorState }) {
  const { model } = state.linked;
  const key = keyResult(model);
  const others = model.results.filter((result) => result !== key);
  if (others.length === 0) return null;
  return (
    <dl className="results" data-last-good={state.isLastGood ? '' : undefined}>
      {others.map((result) => (
        <ResultRow key={result.name} state={state} result={result} />
      ))}
    </dl>
  );
}

function ResultRow({ state, result, isKey = false }: { state: CalculatorState; result: ResultModel; isKey?: boolean }) {
  const outcome = state.evaluation.outcomes[result.name];
  if (!outcome) return null;
  const described = describeOutcome(outcome, result);
  const broken = brokenUnder(state.evaluation, result.name);
  const remark = remarkFor(described, broken);
  const isGood = isGoodResult(state, result.name);
  return (
    <div className={isKey ? 'result result-key' : 'result'} data-good={isGood ? '' : undefined}>
      <dt className="result-label">
        {result.label} <Letter name={result.name} />
      </dt>
      <dd className="result-value">
        <Hint
          className="result-open"
          label={`${result.label}: ${described.words}${broken.length > 0 ? `, ${notValidWords(broken)}` : ''}. How it comes about`}
          note={
            <ExplanationNote explanation={explainResult(state.linked, state.shown, state.evaluation, result.name)} />
          }
        >
          <Amount text={described.text} />
        </Hint>
      </dd>
      {remark !== null && <dd className="result-remark">{remark}</dd>}
    </div>
  );
}

export function notValidWords(broken: readonly string[]): string {
  return `not valid: ${broken.join(', ')}`;
}

function remarkFor(described: Described, broken: readonly string[]): string | null {
  const parts = broken.length > 0 ? [notValidWords(broken)] : [];
  if (described.words !== described.text.replace(' … ', ' to ')) parts.push(described.words);
  return parts.length === 0 ? null : parts.join('; ');
}

/** Up to the last decimal point, and from there: decimal points of a column stand beneath each other, also those of ranges. */
const LANES = /^(.*?\d)((?:\.\d+)?)(?:\u2009(\D[^…]*))?$/;

export function Amount({ text }: { text: string }) {
  const lanes = /^[−\d]/.test(text) ? LANES.exec(text) : null;
  if (!lanes) return <span className="amount">{text}</span>;
  const [, whole = '', part = '', unit = ''] = lanes;
  return (
    <span className="amount amount-lanes">
      <span>{whole}</span>
      <span>
        {part}
        {unit !== '' && <span className="unit">{`\u2009${unit}`}</span>}
      </span>
    </span>
  );
}

const ORIGIN_WORDS = {
  recipe: 'from the recipe',
  typed: 'typed in',
  earlier: 'from the calculator above',
  'worked-out': 'worked out',
  missing: 'missing',
} as const satisfies Record<Explanation['sources'][number]['from'], string>;

/** The formula, the same with numbers and units put in, and where each number comes from. */
export function ExplanationNote({ explanation }: { explanation: Explanation | null }) {
  if (explanation === null) return <p>This result has no formula of its own.</p>;
  return (
    <div className="explanation">
      <FormulaMath
        of={explanation.name}
        layout={explanation.formula}
        text={`${explanation.name} = ${explanation.formulaText}`}
      />
      <FormulaMath
        of={explanation.name}
        layout={explanation.withNumbers}
        text={`with the numbers: ${explanation.withNumbersText}`}
      />
      <p className="explanation-outcome">
        = {explanation.outcome.words}
        {explanation.atMiddle && <span className="note"> (the numbers above are at the middle of each range)</span>}
      </p>
      {explanation.sources.length > 0 && (
        <table className="explanation-sources">
          <tbody>
            {explanation.sources.map((source) => (
              <tr key={source.name}>
                <th scope="row">
                  <Letter name={source.name} />
                </th>
                <td>{source.label}</td>
                <td className="explanation-number">{source.text}</td>
                <td className="note">{ORIGIN_WORDS[source.from]}</td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </div>
  );
}
