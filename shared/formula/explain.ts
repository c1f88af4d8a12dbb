import { NONE } from '#quantity';
import { assertNever } from '#text';
import { FUNCTIONS } from './functions.ts';
import { linkScalar } from './link.ts';
import type { NoValueReason, Sample, UnboundedReason } from './outcome.ts';
import { formulaText } from './show.ts';
import type { CheckedExpr } from './syntax.ts';

/** The values that a formula was run on. */
export interface Values {
  /** SI base units; may be NaN or an infinity where a name has no finite value. */
  valueOf(name: string): number;
  /** How a name came to its value; with it the cause is found in the formula where it arose. */
  sampleOf?(name: string): Sample | undefined;
}

type Evaluate = (part: CheckedExpr) => number;

/**
 * Turns the number that a linked formula gave for these values into a Sample; walks the tree only if it is not finite.
 * Unbounded: the span is that of the operation which made the infinity, e.g. the division; no value: that of the
 * operation which has none. Cost of the walk: the size of the formula.
 */
export function sampleAt(checked: CheckedExpr, raw: number, values: Values): Sample {
  if (Number.isFinite(raw)) return { kind: 'finite', si: raw };
  const evaluate = evaluator(checked, values);
  const cause = causeOf(checked, evaluate);
  const upstream = cause.kind === 'name' ? values.sampleOf?.(cause.name) : undefined;
  if (!Number.isNaN(raw)) {
    const span = upstream?.kind === 'unbounded' ? upstream.span : cause.span;
    return { kind: 'unbounded', sign: raw > 0 ? 1 : -1, span };
  }
  if (upstream?.kind === 'no-value') return upstream;
  return { kind: 'no-value', reason: reasonOf(cause, evaluate), span: cause.span };
}

/** Finds why a formula is unbounded for these values; null if it is not. */
export function unboundedReason(checked: CheckedExpr, values: Values): UnboundedReason | null {
  const evaluate = evaluator(checked, values);
  const value = evaluate(checked);
  if (Number.isNaN(value) || Number.isFinite(value)) return null;
  const cause = causeOf(checked, evaluate);
  if (cause.kind === 'name') return { kind: 'name', span: cause.span, name: cause.name };
  if (cause.kind === 'call' && cause.name === 'parallel') return cancellingBranches(cause.span, cause.args);
  const zero = zeroBehind(cause);
  if (zero && evaluate(zero) === 0) return reasonOfZero(zero, evaluate);
  return { kind: 'too-large', span: cause.span, term: formulaText(cause) };
}

/**
 * Gives the value of any part of a formula, each computed once: a part is linked alone, with its operands' values put in.
 * Operands that read no name stay constants, as the closure takes powers with a constant exponent in another way.
 */
function evaluator(checked: CheckedExpr, values: Values): Evaluate {
  const known = new Map<CheckedExpr, { readonly value: number; readonly isConstant: boolean }>();
  const visit = (part: CheckedExpr): { readonly value: number; readonly isConstant: boolean } => {
    const before = known.get(part);
    if (before) return before;
    const operands = partsOf(part).map(visit);
    const isConstant = part.kind !== 'name' && operands.every((operand) => operand.isConstant);
    const alone = withParts(
      part,
      operands.map(({ value, isConstant: fixed }, i): CheckedExpr => {
        return fixed
          ? { kind: 'number', span: part.span, type: NONE, value }
          : { kind: 'name', span: part.span, type: NONE, name: String(i) };
      }),
    );
    const frame = Float64Array.from(operands, (operand) => operand.value);
    const value = part.kind === 'name' ? values.valueOf(part.name) : linkScalar(alone, Number)(frame);
    known.set(part, { value, isConstant });
    return { value, isConstant };
  };
  visit(checked);
  return (part) => visit(part).value;
}

function partsOf(expr: CheckedExpr): readonly CheckedExpr[] {
  switch (expr.kind) {
    case 'number':
    case 'quantity':
    case 'constant':
    case 'name':
      return [];
    case 'negate':
    case 'not':
      return [expr.of];
    case 'arithmetic':
    case 'compare':
    case 'logic':
      return [expr.left, expr.right];
    case 'call':
      return expr.args;
    default:
      return assertNever(expr);
  }
}

function withParts(expr: CheckedExpr, parts: readonly CheckedExpr[]): CheckedExpr {
  if (expr.kind === 'call') return { ...expr, args: parts };
  const [first, second] = parts;
  if (first && (expr.kind === 'negate' || expr.kind === 'not')) return { ...expr, of: first };
  const isBinary = expr.kind === 'arithmetic' || expr.kind === 'compare' || expr.kind === 'logic';
  return first && second && isBinary ? { ...expr, left: first, right: second } : expr;
}

/** The innermost part that gave the NaN or the infinity of the whole: its own operands do not. */
function causeOf(whole: CheckedExpr, evaluate: Evaluate): CheckedExpr {
  const value = evaluate(whole);
  const isCause = Number.isNaN(value)
    ? Number.isNaN
    : (operand: number) => Math.abs(operand) === Number.POSITIVE_INFINITY;
  const inner = operandsOf(whole, evaluate).find((operand) => isCause(evaluate(operand)));
  return inner ? causeOf(inner, evaluate) : whole;
}

/** The parts that bear on the value: of an `if` the test, or the branch that it chose. */
function operandsOf(expr: CheckedExpr, evaluate: Evaluate): readonly CheckedExpr[] {
  if (expr.kind !== 'call' || expr.name !== 'if') return partsOf(expr);
  const [test, yes, no] = expr.args;
  const answer = test && evaluate(test);
  const chosen = answer === 1 ? yes : answer === 0 ? no : test;
  return chosen ? [chosen] : [];
}

/** Why a part has no value though its operands have one. */
function reasonOf(cause: CheckedExpr, evaluate: Evaluate): NoValueReason {
  if (cause.kind === 'call') return FUNCTIONS.get(cause.name)?.noValue ?? 'not-a-number';
  if (cause.kind !== 'arithmetic') return 'not-a-number';
  const { operator } = cause;
  switch (operator) {
    case '+':
    case '-':
      return 'infinite-difference';
    case '*':
      return 'zero-times-infinite';
    case '/':
      return evaluate(cause.right) === 0 ? 'zero-over-zero' : 'infinite-over-infinite';
    case '^':
      return evaluate(cause.left) < 0 ? 'root-of-negative' : 'not-a-number';
    default:
      return assertNever(operator);
  }
}

const LOGARITHMS: ReadonlySet<string> = new Set(['ln', 'log10', 'db', 'db_power']);

/** The operand that makes a part unbounded by being zero: what is divided by, a base, what a logarithm is taken of. */
function zeroBehind(cause: CheckedExpr): CheckedExpr | undefined {
  if (cause.kind === 'arithmetic' && cause.operator === '/') return cause.right;
  if (cause.kind === 'arithmetic' && cause.operator === '^') return cause.left;
  return cause.kind === 'call' && LOGARITHMS.has(cause.name) ? cause.args[0] : undefined;
}

/** Follows a zero to the terms that cancel, or to the smallest expression that is zero. */
function reasonOfZero(zero: CheckedExpr, evaluate: Evaluate): UnboundedReason {
  if (zero.kind === 'arithmetic' && (zero.operator === '+' || zero.operator === '-') && evaluate(zero.left) !== 0) {
    return { kind: 'cancel', span: zero.span, left: formulaText(zero.left), right: formulaText(zero.right) };
  }
  const inner = operandsOf(zero, evaluate).find((operand) => evaluate(operand) === 0);
  // A function that is zero at zero: the zero came from inside. log10(1) has no such operand and stands for itself.
  if (inner && zero.kind !== 'compare' && zero.kind !== 'logic') return reasonOfZero(inner, evaluate);
  return { kind: 'zero', span: zero.span, term: formulaText(zero) };
}

/** Branches in parallel are unbounded where their conductances add up to zero. */
function cancellingBranches(span: CheckedExpr['span'], args: readonly CheckedExpr[]): UnboundedReason {
  const texts = args.map((arg) => formulaText(arg));
  return { kind: 'cancel', span, left: texts.slice(0, -1).join(', '), right: texts.at(-1) ?? '' };
}
