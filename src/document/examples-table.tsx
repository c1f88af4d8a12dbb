import { useMemo } from 'react';
import {
  type ExampleModel,
  type ExampleRun,
  evaluateInOrder,
  linkCalculator,
  runExample,
  type Upstream,
} from '#calculator';
import type { RecipeDocument } from '#recipe';
import { Letter } from './letter.tsx';
import { TrueMark } from './true-mark.tsx';
import { WideTable } from './wide-table.tsx';

interface Ran {
  readonly example: ExampleModel;
  readonly run: ExampleRun;
  /** Names of results, as against those of limits. */
  readonly results: ReadonlySet<string>;
}

/** The worked examples, worked out again on this page: what they say, what came out, what they were checked against. */
export function ExamplesTable({ document }: { document: RecipeDocument }) {
  const ran = useMemo(() => runAll(document), [document]);
  if (ran.length === 0)
    return <p>This recipe has no worked examples: nothing but its own formulas stands behind it.</p>;
  return (
    <WideTable label="Worked examples">
      <table className="examples">
        <thead>
          <tr>
            <th scope="col">Of</th>
            <th scope="col" className="number">
              Example says
            </th>
            <th scope="col" className="number">
              This page says
            </th>
            <th scope="col">Agreement</th>
          </tr>
        </thead>
        {ran.map(({ example, run, results }) => (
          <tbody key={`${example.title} ${example.span.start}`}>
            <tr>
              <th scope="rowgroup" colSpan={4} className="example-title">
                {example.title}
                <small>Checked against: {document.front.sources[example.source] ?? example.source}</small>
              </th>
            </tr>
            {run.rows.map((row) => (
              <tr key={row.what}>
                <td>{results.has(row.what) ? <Letter name={row.what} /> : row.what}</td>
                <td className="number">{row.expected}</td>
                <td className="number">{row.got}</td>
                <td>
                  <TrueMark isTrue={row.passed}>{row.passed ? 'agrees' : 'disagrees'}</TrueMark>
                  {row.within !== '' && <small>within {row.within}</small>}
                </td>
              </tr>
            ))}
          </tbody>
        ))}
      </table>
    </WideTable>
  );
}

function runAll(document: RecipeDocument): readonly Ran[] {
  const linked = document.calculators.map(linkCalculator);
  const upstream: Upstream = Object.fromEntries(evaluateInOrder(linked, {}));
  return linked.flatMap((calculator) =>
    calculator.model.examples.map((example) => ({
      example,
      run: runExample(calculator, example, upstream),
      results: new Set(calculator.results.keys()),
    })),
  );
}
