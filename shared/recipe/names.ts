import {
  type CheckedExpr,
  checkFormula,
  type Expr,
  type FormulaScope,
  namesRead,
  parseFormula,
  type Type,
} from '#formula';
import { KINDS, kindOfDimension, type QuantityKind, type Reading } from '#quantity';
import type { Span } from '#text';
import type { Problems } from './problems.ts';

/** What a name of a calculator stands for. `type` is null where its own definition is faulty. */
export interface NameInfo {
  readonly type: Type | null;
  readonly kind: QuantityKind | null;
  readonly reading?: Reading | undefined;
}

/** The names of one calculator and what is known of them so far; formulas are read against it. */
export class Names implements FormulaScope {
  readonly source: string;
  readonly problems: Problems;
  /** Every name that is made in this calculator. */
  readonly names: ReadonlySet<string>;
  readonly #known = new Map<string, NameInfo>();

  constructor(source: string, names: ReadonlySet<string>, problems: Problems) {
    this.source = source;
    this.names = names;
    this.problems = problems;
  }

  typeOf(name: string): Type | null | undefined {
    return this.names.has(name) ? (this.#known.get(name)?.type ?? null) : undefined;
  }

  infoOf(name: string): NameInfo | undefined {
    return this.#known.get(name);
  }

  define(name: string, info: NameInfo): void {
    if (!this.#known.has(name)) this.#known.set(name, info);
  }

  parse(place: Span): Expr {
    const { expr, diagnostics } = parseFormula(this.source, place, this.names);
    this.problems.add(diagnostics.map((diagnostic) => ({ ...diagnostic, span: widened(diagnostic.span, place) })));
    return expr;
  }

  check(expr: Expr): CheckedExpr | null {
    const { checked, diagnostics } = checkFormula(expr, this);
    this.problems.add(diagnostics);
    return checked;
  }

  /** Parses and checks a formula whose names are all defined. */
  read(place: Span): CheckedExpr | null {
    return this.check(this.parse(place));
  }
}

/** A mistake at an empty place is shown at the quotes around it. */
function widened(at: Span, place: Span): Span {
  return at.start < at.end ? at : { start: Math.max(place.start - 1, at.start - 1), end: at.end + 1 };
}

export function infoOfKind(kind: QuantityKind, reading?: Reading): NameInfo {
  return { type: KINDS[kind].dimension, kind, reading };
}

/** The quantity of a formula: that of the name it is, or the usual one of its dimension. */
export function kindOf(checked: CheckedExpr, names: Names): QuantityKind | null {
  if (checked.type === 'truth') return null;
  const named = checked.kind === 'name' ? names.infoOf(checked.name)?.kind : null;
  return named ?? kindOfDimension(checked.type);
}

export function readsOf(exprs: readonly Expr[]): readonly string[] {
  return [...new Set(exprs.flatMap((expr) => namesRead(expr)))];
}
