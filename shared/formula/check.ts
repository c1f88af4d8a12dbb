import {
  coherentUnit,
  type Dimension,
  dimensionWords,
  KINDS,
  NONE,
  perDimension,
  powerOfDimension,
  readUnit,
  sameDimension,
  timesDimension,
} from '#quantity';
import { assertNever, type Diagnostic, type Facts, problem, type Span } from '#text';
import { CONSTANTS, FUNCTIONS, type FunctionRow } from './functions.ts';
import { nearestName } from './names.ts';
import type { CheckedExpr, Expr, Type } from './syntax.ts';
import type { FormulaCode } from './wording.ts';

/** The names a formula may read. */
export interface FormulaScope {
  /** Gives undefined for a name that does not exist, null for one whose type is not known because its own formula is faulty. */
  typeOf(name: string): Type | null | undefined;
  /** All names, for the hint after a misspelt one. */
  readonly names: Iterable<string>;
}

const LEVEL: Dimension = KINDS.level.dimension;
const TEMPERATURE: Dimension = KINDS.temperature.dimension;

/** Largest whole exponent of a dimensioned value; no formula of the trade needs more. Common practice, no source. */
const LARGEST_EXPONENT = 20;

type Numeric = CheckedExpr & { readonly type: Dimension };
type Of<Kind extends Expr['kind']> = Extract<Expr, { readonly kind: Kind }>;

interface Checker {
  readonly scope: FormulaScope;
  readonly diagnostics: Diagnostic<FormulaCode>[];
}

/**
 * Finds every name and checks every dimension. `checked` is null if anything is wrong; `diagnostics` is then empty only
 * if the cause has been told already (a hole, a name of unknown type).
 */
export function checkFormula(
  expr: Expr,
  scope: FormulaScope,
): { readonly checked: CheckedExpr | null; readonly diagnostics: readonly Diagnostic<FormulaCode>[] } {
  const checker: Checker = { scope, diagnostics: [] };
  const checked = check(checker, expr);
  return { checked: checker.diagnostics.length > 0 ? null : checked, diagnostics: checker.diagnostics };
}

/** A type in words: "voltage", "level in dB", "yes or no". */
export function typeWords(type: Type): string {
  return type === 'truth' ? 'yes or no' : dimensionWords(type);
}

function report(checker: Checker, code: FormulaCode, span: Span, facts: Facts = {}): null {
  checker.diagnostics.push(problem(code, span, facts));
  return null;
}

function check(checker: Checker, expr: Expr): CheckedExpr | null {
  switch (expr.kind) {
    case 'hole':
      return null;
    case 'number':
      return { kind: 'number', span: expr.span, type: NONE, value: expr.value };
    case 'quantity':
      return { kind: 'quantity', span: expr.span, type: expr.dimension, si: expr.si, text: expr.text };
    case 'name':
      return checkName(checker, expr);
    case 'negate': {
      const of = checkNumber(checker, expr.of);
      return of && { kind: 'negate', span: expr.span, type: of.type, of };
    }
    case 'not': {
      const of = checkTruth(checker, expr.of);
      return of && { kind: 'not', span: expr.span, type: 'truth', of };
    }
    case 'arithmetic':
      return expr.operator === '^' ? checkPower(checker, expr) : checkArithmetic(checker, expr);
    case 'compare': {
      const left = checkNumber(checker, expr.left);
      const right = checkNumber(checker, expr.right);
      if (!left || !right || !alike(checker, expr.operator, left, right)) return null;
      return { kind: 'compare', span: expr.span, type: 'truth', operator: expr.operator, left, right };
    }
    case 'logic': {
      const left = checkTruth(checker, expr.left);
      const right = checkTruth(checker, expr.right);
      return left && right && { kind: 'logic', span: expr.span, type: 'truth', operator: expr.operator, left, right };
    }
    case 'call':
      return checkCall(checker, expr);
    default:
      return assertNever(expr);
  }
}

function checkName(checker: Checker, { span, name }: Of<'name'>): CheckedExpr | null {
  const constant = CONSTANTS.get(name);
  if (constant) return { kind: 'constant', span, type: constant.dimension, name, si: constant.si };
  const type = checker.scope.typeOf(name);
  if (type === null) return null;
  if (type !== undefined) {
    // The contract gives names a dimension only; a comparison used by name is written where it is needed.
    return type === 'truth' ? report(checker, 'truth-for-number', span) : { kind: 'name', span, type, name };
  }
  const near = nearestName(name, [...checker.scope.names, ...CONSTANTS.keys()]) ?? '';
  const isUnit = near === '' && readUnit(name) !== null;
  return isUnit
    ? report(checker, 'unit-without-number', span, { unit: name })
    : report(checker, 'unknown-name', span, { name, near });
}

function checkNumber(checker: Checker, expr: Expr): Numeric | null {
  const checked = check(checker, expr);
  if (checked === null || isNumeric(checked)) return checked;
  return report(checker, 'truth-for-number', expr.span);
}

function isNumeric(checked: CheckedExpr): checked is Numeric {
  return checked.type !== 'truth';
}

function checkTruth(checker: Checker, expr: Expr): CheckedExpr | null {
  const checked = check(checker, expr);
  if (checked === null || checked.type === 'truth') return checked;
  return report(checker, 'number-for-truth', expr.span, { found: typeWords(checked.type) });
}

/** Says so if two values that meet have different dimensions; the one that comes later is taken for the wrong one. */
function alike(checker: Checker, operation: string, left: CheckedExpr, right: CheckedExpr): boolean {
  const same =
    left.type === 'truth' || right.type === 'truth' ? left.type === right.type : sameDimension(left.type, right.type);
  if (!same) {
    const facts = {
      operation,
      left: typeWords(left.type),
      right: typeWords(right.type),
      levels: levelsIn(left, right),
    };
    report(checker, 'dimension-mismatch', right.span, facts);
  }
  return same;
}

/** 1 where one side is a level and the other a ratio, which db() and from_db() turn into each other. */
function levelsIn(left: CheckedExpr, right: CheckedExpr): number {
  const is = (side: CheckedExpr, dimension: Dimension) => side.type !== 'truth' && sameDimension(side.type, dimension);
  return (is(left, LEVEL) && is(right, NONE)) || (is(left, NONE) && is(right, LEVEL)) ? 1 : 0;
}

function checkArithmetic(checker: Checker, expr: Of<'arithmetic'>): CheckedExpr | null {
  const left = checkNumber(checker, expr.left);
  const right = checkNumber(checker, expr.right);
  if (!left || !right) return null;
  const { span, operator } = expr;
  if (operator === '*' || operator === '/') {
    const type = operator === '*' ? timesDimension(left.type, right.type) : perDimension(left.type, right.type);
    return { kind: 'arithmetic', span, type, operator, left, right };
  }
  if (!alike(checker, operator, left, right)) return null;
  if (operator === '+' && isCelsius(left) && isCelsius(right)) {
    return report(checker, 'celsius-sum', right.span, { found: right.kind === 'quantity' ? right.text : '' });
  }
  return { kind: 'arithmetic', span, type: left.type, operator, left, right };
}

/** A temperature on the Celsius scale counts from absolute zero here; the sum of two is never meant. */
function isCelsius(expr: Numeric): boolean {
  return expr.kind === 'quantity' && expr.text.endsWith('°C') && sameDimension(expr.type, TEMPERATURE);
}

function checkPower(checker: Checker, expr: Of<'arithmetic'>): CheckedExpr | null {
  const left = checkNumber(checker, expr.left);
  const right = checkNumber(checker, expr.right);
  if (!left || !right) return null;
  if (!sameDimension(right.type, NONE)) {
    return report(checker, 'argument-dimension', right.span, argumentFacts('^', 'ratio', right.type));
  }
  const { span } = expr;
  if (sameDimension(left.type, NONE)) return { kind: 'arithmetic', span, type: NONE, operator: '^', left, right };
  const exponent = constantValue(right);
  const isHalf = exponent !== null && Number.isInteger(exponent * 2) && Math.abs(exponent) <= LARGEST_EXPONENT;
  if (!isHalf) {
    const found = exponent === null ? '' : String(exponent);
    return report(checker, 'power-exponent', right.span, { base: typeWords(left.type), found, most: LARGEST_EXPONENT });
  }
  const type = powerOfDimension(left.type, exponent);
  if (type === null) return report(checker, 'root-dimension', left.span, { found: typeWords(left.type) });
  return { kind: 'arithmetic', span, type, operator: '^', left, right };
}

/** Folds plain arithmetic on numbers; null for anything else. */
function constantValue(expr: CheckedExpr): number | null {
  if (expr.kind === 'number') return expr.value;
  if (expr.kind === 'negate') {
    const of = constantValue(expr.of);
    return of === null ? null : -of;
  }
  if (expr.kind !== 'arithmetic') return null;
  const left = constantValue(expr.left);
  const right = constantValue(expr.right);
  if (left === null || right === null) return null;
  const { operator } = expr;
  switch (operator) {
    case '+':
      return left + right;
    case '-':
      return left - right;
    case '*':
      return left * right;
    case '/':
      return left / right;
    case '^':
      return left ** right;
    default:
      return assertNever(operator);
  }
}

function checkCall(checker: Checker, expr: Of<'call'>): CheckedExpr | null {
  const { span, name, nameSpan } = expr;
  const row = FUNCTIONS.get(name);
  if (!row) {
    for (const arg of expr.args) check(checker, arg);
    return report(checker, 'unknown-function', nameSpan, { name, near: nearestName(name, FUNCTIONS.keys()) ?? '' });
  }
  const args = expr.args.map((arg, i) =>
    row.takes !== 'choice' ? checkNumber(checker, arg) : i === 0 ? checkTruth(checker, arg) : check(checker, arg),
  );
  const count = args.length;
  if (count < row.least || count > row.most) {
    return report(checker, 'argument-count', nameSpan, { name, count, least: row.least, most: row.most });
  }
  const known = args.filter((arg) => arg !== null);
  if (known.length < count) return null;
  const type = callType(checker, expr, row, known);
  return type && { kind: 'call', span, type, name, args: known };
}

function callType(checker: Checker, expr: Of<'call'>, row: FunctionRow, args: readonly CheckedExpr[]): Type | null {
  if (row.takes === 'ratio' || row.takes === 'level') {
    const needed = row.takes === 'ratio' ? NONE : LEVEL;
    const wrong = args.filter((arg) => arg.type === 'truth' || !sameDimension(arg.type, needed));
    for (const arg of wrong) {
      report(checker, 'argument-dimension', arg.span, argumentFacts(expr.name, row.takes, arg.type));
    }
    if (wrong.length > 0) return null;
  }
  const [first, ...others] = row.takes === 'choice' ? args.slice(1) : args;
  if (!first) return null;
  if (!others.every((other) => alike(checker, expr.name, first, other))) return null;
  if (row.gives !== 'root') return row.gives === 'ratio' ? NONE : row.gives === 'level' ? LEVEL : first.type;
  const type = first.type === 'truth' ? null : powerOfDimension(first.type, 0.5);
  return type ?? report(checker, 'root-dimension', first.span, { found: typeWords(first.type) });
}

function argumentFacts(name: string, needs: 'ratio' | 'level', found: Type): Facts {
  return { name, needs, found: typeWords(found), unit: found === 'truth' ? '' : coherentUnit(found) };
}
