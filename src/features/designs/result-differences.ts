import type { ShownResults } from '#api';
import { LIMIT_STATE_WORDS } from '#calculator';
import type { RecipeDocument } from '#recipe';

/** A result or a limit that does not come out as it was shown when the design was kept. */
export interface ResultDifference {
  readonly key: string;
  readonly label: string;
  readonly kept: string;
  readonly now: string;
}

/** Two evaluations of the same formula may differ by rounding of doubles; far below any digit shown. */
const ROUNDING = 1e-9;

type Shown = ShownResults['calculators'][string]['results'][string];

/** Compares what the owner last saw with what the same inputs give now. Rounding is no difference, also where it moves the last digit. */
export function resultDifferences(
  document: RecipeDocument,
  kept: ShownResults,
  now: ShownResults,
): readonly ResultDifference[] {
  return document.calculators.flatMap(({ id, title, results, limits }) => {
    const [was, is] = [at(kept.calculators, id), at(now.calculators, id)];
    // A calculator that was not shown then has nothing to differ from.
    if (was === undefined || is === undefined) return [];
    const place = document.calculators.length > 1 ? `${title}: ` : '';
    const moved = results.flatMap((result) => {
      const [before, after] = [at(was.results, result.name), at(is.results, result.name)];
      if (before === undefined || after === undefined || isSame(before, after)) return [];
      const label = `${place}${result.label}`;
      return [{ key: `${id} ${result.name}`, label, kept: before.text, now: after.text }];
    });
    const crossed = limits.flatMap((limit) => {
      const [before, after] = [at(was.limits, limit.name), at(is.limits, limit.name)];
      if (before === undefined || after === undefined || before === after) return [];
      const label = `${place}limit ${limit.name}`;
      return [{ key: `${id} limit ${limit.name}`, label, kept: stateWords(before), now: stateWords(after) }];
    });
    return [...moved, ...crossed];
  });
}

function isSame(before: Shown, after: Shown): boolean {
  if (before.text === after.text) return true;
  return isNear(before.low, after.low) && isNear(before.high, after.high);
}

function isNear(a: number | null, b: number | null): boolean {
  if (a === null || b === null) return false;
  return Math.abs(a - b) <= ROUNDING * Math.max(Math.abs(a), Math.abs(b));
}

function stateWords(state: string): string {
  return Object.hasOwn(LIMIT_STATE_WORDS, state) ? String(Reflect.get(LIMIT_STATE_WORDS, state)) : state;
}

function at<T>(record: Readonly<Record<string, T>>, key: string): T | undefined {
  return Object.hasOwn(record, key) ? record[key] : undefined;
}

/** Why numbers of the same version with the same inputs may differ. */
export function whyDifferent(kept: ShownResults, now: ShownResults): string {
  if (kept.engine !== now.engine) {
    return `They were worked out by engine ${kept.engine} when they were kept; this page works with engine ${now.engine}.`;
  }
  return `The engine is the same (${now.engine}), so an input may be read otherwise here than in the browser that kept it: look at the inputs first.`;
}
