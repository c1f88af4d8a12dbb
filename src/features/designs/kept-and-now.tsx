import { useState } from 'react';
import type { DesignPage } from '#api';
import { shownResults } from '../../document/shown-results.ts';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { resultDifferences, whyDifferent } from './result-differences.ts';
import type { DesignState } from './use-design.ts';

/** Results as they were shown when the design was kept, beside what the same inputs give now, where the two differ. */
export function KeptAndNow({ page, state }: { page: DesignPage; state: DesignState }) {
  const [failed, setFailed] = useState<string | null>(null);
  const now = shownResults(state.kept);
  const differences = resultDifferences(page.document, page.shown, now);
  if (differences.length === 0) return null;
  return (
    <section className="kept-and-now" aria-label="Results that differ from when this was kept">
      <h2>Not as it was kept</h2>
      <p>
        With the inputs that were kept,{' '}
        {differences.length === 1 ? 'one line comes' : `${differences.length} lines come`} out otherwise now.{' '}
        {whyDifferent(page.shown, now)}
      </p>
      <table className="design-pairs">
        <thead>
          <tr>
            <th scope="col">Result or limit</th>
            <th scope="col">as kept</th>
            <th scope="col">worked out now</th>
          </tr>
        </thead>
        <tbody>
          {differences.map((one) => (
            <tr key={one.key}>
              <th scope="row">{one.label}</th>
              <td data-head="as kept">{one.kept}</td>
              <td data-head="now">{one.now}</td>
            </tr>
          ))}
        </tbody>
      </table>
      {failed !== null && <Failure lead="Not kept.">{failed} Both numbers are still here.</Failure>}
      {page.mayChange && (
        <p className="kept-act">
          <Button
            small
            acting="Keeping"
            isActing={state.isUpdating}
            cannot={state.isDirty ? 'Keep or put back your other changes first.' : undefined}
            onClick={() => void state.takeShown().then(setFailed)}
          >
            Keep the numbers as they come out now
          </Button>
        </p>
      )}
    </section>
  );
}
