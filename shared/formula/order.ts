import { assertNever, type Diagnostic, problem, type Span } from '#text';
import type { CheckedExpr, Expr } from './syntax.ts';
import type { FormulaCode } from './wording.ts';

export interface Definition {
  readonly name: string;
  /** Names that the formula reads; those that no definition has are ignored. */
  readonly reads: readonly string[];
  readonly span: Span;
}

/** The names that a formula reads, each once, in the order of the text. */
export function namesRead(expr: Expr | CheckedExpr): readonly string[] {
  const names = new Set<string>();
  collect(expr, names);
  return [...names];
}

function collect(expr: Expr | CheckedExpr, names: Set<string>): void {
  switch (expr.kind) {
    case 'number':
    case 'quantity':
    case 'constant':
    case 'hole':
      return;
    case 'name':
      names.add(expr.name);
      return;
    case 'negate':
    case 'not':
      collect(expr.of, names);
      return;
    case 'arithmetic':
    case 'compare':
    case 'logic':
      collect(expr.left, names);
      collect(expr.right, names);
      return;
    case 'call':
      for (const arg of expr.args) collect(arg, names);
      return;
    default:
      assertNever(expr);
  }
}

/**
 * Puts definitions so that each stands after all it reads, else in the order given. Names on a circle are left out and
 * each circle gives one `definition-cycle` with the fact `path`, e.g. ['a', 'b', 'a'].
 * Cost: definitions plus reads; the walk keeps its own stack, so that a chain of any length is fine.
 */
export function orderDefinitions(definitions: readonly Definition[]): {
  readonly order: readonly string[];
  readonly diagnostics: readonly Diagnostic<FormulaCode>[];
} {
  const byName = new Map(definitions.map((definition) => [definition.name, definition]));
  const order: string[] = [];
  const diagnostics: Diagnostic<FormulaCode>[] = [];
  const done = new Set<string>();
  const circular = new Set<string>();
  for (const root of definitions) {
    const path: { readonly definition: Definition; next: number }[] = [];
    const onPath = new Map<string, number>();
    const enter = (definition: Definition): void => {
      onPath.set(definition.name, path.length);
      path.push({ definition, next: 0 });
    };
    if (!done.has(root.name)) enter(root);
    for (let top = path.at(-1); top; top = path.at(-1)) {
      const read = top.definition.reads[top.next++];
      if (read === undefined) {
        path.pop();
        onPath.delete(top.definition.name);
        done.add(top.definition.name);
        if (!circular.has(top.definition.name)) order.push(top.definition.name);
        continue;
      }
      const from = onPath.get(read);
      const definition = byName.get(read);
      if (from !== undefined) {
        const circle = path.slice(from).map((step) => step.definition.name);
        for (const name of circle) circular.add(name);
        diagnostics.push(problem('definition-cycle', top.definition.span, { path: [...circle, read] }));
      } else if (definition && !done.has(read)) enter(definition);
    }
  }
  return { order, diagnostics };
}
