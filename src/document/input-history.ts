/** One field of one calculator, before and after. Null is the recipe's own value. */
export interface Change {
  readonly calculator: string;
  readonly name: string;
  readonly before: string | null;
  readonly after: string | null;
}

type Step = readonly Change[];

export interface History {
  readonly past: readonly Step[];
  readonly future: readonly Step[];
  /** Whether the newest step still takes what is typed in the same field; closed when a field gets the focus. */
  readonly isOpen: boolean;
}

export const EMPTY_HISTORY: History = { past: [], future: [], isOpen: false };

/** More steps than anybody walks back. Source: common practice, no source. */
const MOST_STEPS = 200;

/** Adds a step. With `merges`, what is typed in one field without leaving it becomes one step. */
export function addStep(history: History, changes: Step, merges: boolean): History {
  const [first, ...others] = changes;
  const newest = history.past.at(-1);
  const [open, ...rest] = newest ?? [];
  if (merges && history.isOpen && first && open && others.length === 0 && rest.length === 0) {
    if (open.calculator === first.calculator && open.name === first.name) {
      const merged = [{ ...open, after: first.after }];
      return { past: [...history.past.slice(0, -1), merged], future: [], isOpen: true };
    }
  }
  return { past: [...history.past, changes].slice(-MOST_STEPS), future: [], isOpen: merges };
}

interface Travel {
  readonly history: History;
  readonly changes: Step;
}

/** The newest step taken back: `changes` are to be made. Null where there is none. */
export function undone({ past, future }: History): Travel | null {
  const step = past.at(-1);
  if (!step) return null;
  const changes = step.map((change) => ({ ...change, before: change.after, after: change.before }));
  return { history: { past: past.slice(0, -1), future: [...future, step], isOpen: false }, changes };
}

/** The step last taken back, made again. Null where there is none. */
export function redone({ past, future }: History): Travel | null {
  const step = future.at(-1);
  if (!step) return null;
  return { history: { past: [...past, step], future: future.slice(0, -1), isOpen: false }, changes: step };
}
