import { useState } from 'react';
import type { RecipeRow } from '#api';
import { FACET_NAMES, FACETS, type FacetName, facetValues, type Ticked } from './facets.ts';

/** Values shown before "more". */
const SHOWN = 5;
const PHONE_PX = 760;

export interface FacetListsProps {
  readonly all: readonly RecipeRow[];
  readonly found: readonly RecipeRow[];
  readonly ticked: Ticked;
  readonly onTick: (facet: FacetName, value: string, isTicked: boolean) => void;
}

/** Four or five ruled columns of boxes with counts; what is left with none stays visible. */
export function FacetLists({ all, found, ticked, onTick }: FacetListsProps) {
  const count = Object.values(ticked).flat().length;
  // Folded on a phone, where the list would begin below the screen.
  const [opensAtFirst] = useState(() => count > 0 || window.innerWidth > PHONE_PX);
  return (
    <details className="facets" open={opensAtFirst}>
      <summary>Topic, supply, state, caution, origin{count > 0 && <b>{` · ${count} ticked`}</b>}</summary>
      <div className="facet-columns">
        {FACET_NAMES.map((facet) => (
          <FacetList key={facet} facet={facet} {...{ all, found, ticked, onTick }} />
        ))}
      </div>
    </details>
  );
}

function FacetList({ facet, all, found, ticked, onTick }: FacetListsProps & { facet: FacetName }) {
  const [showsAll, setShowsAll] = useState(false);
  const values = facetValues(all, found, ticked, facet);
  const shown = showsAll ? values : values.filter(({ value }, i) => i < SHOWN || ticked[facet].includes(value));
  return (
    <fieldset className={`facet facet-${facet}`}>
      <legend className="lab">{FACETS[facet].label}</legend>
      {shown.map(({ value, count }) => (
        <label key={value} className="check facet-value" data-none={count === 0 ? '' : undefined}>
          <input
            type="checkbox"
            checked={ticked[facet].includes(value)}
            onChange={(event) => onTick(facet, value, event.target.checked)}
          />
          <span>{value}</span>
          <span className="facet-count">{count}</span>
        </label>
      ))}
      {shown.length < values.length && (
        <button type="button" className="btn-text text-note" onClick={() => setShowsAll(true)}>
          {values.length - shown.length} more<span className="sr-only"> under {FACETS[facet].label}</span>
        </button>
      )}
    </fieldset>
  );
}
