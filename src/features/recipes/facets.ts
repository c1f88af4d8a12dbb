import type { RecipeRow } from '#api';

/** What the list can be narrowed by, in the order shown; each gives a recipe's values. */
export const FACETS = {
  topic: { label: 'Topic', of: (row) => row.topics },
  supply: { label: 'Supply', of: (row) => (row.supply === '' ? [] : [row.supply]) },
  state: { label: 'State', of: (row) => (row.reviewOverdue ? [row.state, 'review overdue'] : [row.state]) },
  hazard: { label: 'Caution for', of: (row) => (row.hazards.length === 0 ? ['nothing named'] : row.hazards) },
  origin: { label: 'Origin', of: (row) => [ORIGINS[row.origin]] },
} as const satisfies Record<string, { label: string; of: (row: RecipeRow) => readonly string[] }>;

const ORIGINS = { team: 'the team', supplied: 'supplied, not signed off' } as const satisfies Record<
  RecipeRow['origin'],
  string
>;

export type FacetName = keyof typeof FACETS;
export const FACET_NAMES = Object.keys(FACETS).filter((name): name is FacetName => name in FACETS);

/** Ticked values by facet. Within a facet any of them will do, between facets all must hold. */
export type Ticked = Readonly<Record<FacetName, readonly string[]>>;

export interface FacetValue {
  readonly value: string;
  /** How many recipes are left with it, under what is ticked in the other facets. */
  readonly count: number;
}

export function narrowed(rows: readonly RecipeRow[], ticked: Ticked, but?: FacetName): readonly RecipeRow[] {
  const names = FACET_NAMES.filter((name) => name !== but && ticked[name].length > 0);
  return rows.filter((row) =>
    names.every((name) => FACETS[name].of(row).some((value) => ticked[name].includes(value))),
  );
}

/** Every value that any recipe has, also those that are left with none; the most frequent in the whole list first. */
export function facetValues(
  all: readonly RecipeRow[],
  found: readonly RecipeRow[],
  ticked: Ticked,
  facet: FacetName,
): readonly FacetValue[] {
  const total = tally(all, facet);
  const left = tally(narrowed(found, ticked, facet), facet);
  return [...total]
    .sort(([a, x], [b, y]) => y - x || a.localeCompare(b, 'en'))
    .map(([value]) => ({ value, count: left.get(value) ?? 0 }));
}

function tally(rows: readonly RecipeRow[], facet: FacetName): ReadonlyMap<string, number> {
  const counts = new Map<string, number>();
  for (const value of rows.flatMap((row) => FACETS[facet].of(row))) counts.set(value, (counts.get(value) ?? 0) + 1);
  return counts;
}

/** Reads what is ticked from the page's address, so that going back finds the same list. */
export function tickedIn(search: URLSearchParams): Ticked {
  return {
    topic: search.getAll('topic'),
    supply: search.getAll('supply'),
    state: search.getAll('state'),
    hazard: search.getAll('hazard'),
    origin: search.getAll('origin'),
  };
}

export interface Group {
  readonly purpose: string;
  readonly rows: readonly RecipeRow[];
}

const NO_PURPOSE = 'Other purposes';

/** Groups by purpose: with `ranked` in the order of the best hit, else by name, those without a purpose last. */
export function grouped(rows: readonly RecipeRow[], isRanked: boolean): readonly Group[] {
  const groups = new Map<string, RecipeRow[]>();
  for (const row of rows) {
    const purpose = row.purpose === '' ? NO_PURPOSE : row.purpose;
    groups.set(purpose, [...(groups.get(purpose) ?? []), row]);
  }
  const list = [...groups].map(([purpose, members]) => ({ purpose, rows: members }));
  if (isRanked) return list;
  return list.sort(
    (a, b) =>
      Number(a.purpose === NO_PURPOSE) - Number(b.purpose === NO_PURPOSE) || a.purpose.localeCompare(b.purpose, 'en'),
  );
}
