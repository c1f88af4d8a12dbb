import { assertNever } from '#text';
import type { CheckedExpr } from './syntax.ts';

/** A formula as it is drawn: plain data for MathML, for print and for one line of text. */
export type Layout =
  | { readonly kind: 'number'; readonly text: string }
  | { readonly kind: 'quantity'; readonly number: string; readonly unit: string }
  /** `R_load` has base `R` and subscript `load`. */
  | { readonly kind: 'name'; readonly name: string; readonly base: string; readonly subscript?: string }
  /** A name with its value put in. */
  | { readonly kind: 'value'; readonly name: string; readonly text: string }
  /** The first in a row stands before its operand: `−x`, `not x`. */
  | { readonly kind: 'operator'; readonly text: string }
  | { readonly kind: 'row'; readonly items: readonly Layout[] }
  | { readonly kind: 'fenced'; readonly open: '(' | '|'; readonly close: ')' | '|'; readonly of: Layout }
  | { readonly kind: 'fraction'; readonly above: Layout; readonly below: Layout }
  | { readonly kind: 'root'; readonly of: Layout }
  | { readonly kind: 'power'; readonly base: Layout; readonly exponent: Layout }
  | { readonly kind: 'call'; readonly name: string; readonly args: readonly Layout[] };

/** Gives the text that stands for a name, or null to keep the name. */
export type Substitute = (name: string) => { readonly text: string } | null;

/** How tightly a written part holds together; a looser one inside a tighter one needs brackets. */
const HOLD = { or: 1, and: 2, not: 3, compare: 4, sum: 5, product: 6, fraction: 7, power: 8, whole: 9 } as const;

interface Drawn {
  readonly layout: Layout;
  readonly hold: number;
}

const SIGNS = {
  '+': '+',
  '-': '−',
  '*': '·',
  '<': '<',
  '<=': '≤',
  '>': '>',
  '>=': '≥',
  '==': '=',
  '!=': '≠',
} as const;

/** Lays a formula out for drawing; with `substitute` the numbers are put in. */
export function formulaLayout(checked: CheckedExpr, substitute: Substitute = () => null): Layout {
  return draw(checked, substitute).layout;
}

/** Writes a formula on one line: `(R1·R4 − R2·R3) / R1`. */
export function formulaText(checked: CheckedExpr, substitute?: Substitute): string {
  return lineOf(formulaLayout(checked, substitute));
}

function draw(expr: CheckedExpr, substitute: Substitute): Drawn {
  const inner = (of: CheckedExpr) => draw(of, substitute);
  switch (expr.kind) {
    case 'number':
      return drawNumber(expr.value);
    case 'quantity':
      return drawQuantity(expr.text);
    case 'constant':
      return drawName(expr.name);
    case 'name': {
      const value = substitute(expr.name);
      return value ? drawValue(expr.name, value.text) : drawName(expr.name);
    }
    case 'negate':
      return { layout: row([sign('−'), atLeast(HOLD.product, inner(expr.of))]), hold: HOLD.sum };
    case 'not':
      return { layout: row([sign('not'), atLeast(HOLD.compare, inner(expr.of))]), hold: HOLD.not };
    case 'arithmetic':
      return drawArithmetic(expr, inner);
    case 'compare':
      return infix(inner(expr.left), SIGNS[expr.operator], inner(expr.right), HOLD.compare);
    case 'logic':
      return infix(inner(expr.left), expr.operator, inner(expr.right), HOLD[expr.operator]);
    case 'call':
      return drawCall(expr.name, expr.args.map(inner));
    default:
      return assertNever(expr);
  }
}

function drawArithmetic(
  { operator, left, right }: Extract<CheckedExpr, { readonly kind: 'arithmetic' }>,
  inner: (of: CheckedExpr) => Drawn,
): Drawn {
  switch (operator) {
    case '+':
    case '-':
      return infix(inner(left), SIGNS[operator], inner(right), HOLD.sum);
    case '*':
      return infix(inner(left), SIGNS[operator], inner(right), HOLD.product);
    case '/':
      return {
        layout: { kind: 'fraction', above: inner(left).layout, below: inner(right).layout },
        hold: HOLD.fraction,
      };
    case '^':
      return {
        layout: { kind: 'power', base: atLeast(HOLD.whole, inner(left)), exponent: inner(right).layout },
        hold: HOLD.power,
      };
    default:
      return assertNever(operator);
  }
}

function drawCall(name: string, args: readonly Drawn[]): Drawn {
  const layouts = args.map((arg) => arg.layout);
  const [of] = layouts;
  if (name === 'sqrt' && of) return { layout: { kind: 'root', of }, hold: HOLD.whole };
  if (name === 'abs' && of) return { layout: { kind: 'fenced', open: '|', close: '|', of }, hold: HOLD.whole };
  return { layout: { kind: 'call', name, args: layouts }, hold: HOLD.whole };
}

/** Left-associative: the right side must hold tighter. */
function infix(left: Drawn, operator: string, right: Drawn, hold: number): Drawn {
  return { layout: row([atLeast(hold, left), sign(operator), atLeast(hold + 1, right)]), hold };
}

function atLeast(hold: number, { layout, hold: has }: Drawn): Layout {
  return has >= hold ? layout : { kind: 'fenced', open: '(', close: ')', of: layout };
}

function row(items: readonly Layout[]): Layout {
  return { kind: 'row', items };
}

function sign(text: string): Layout {
  return { kind: 'operator', text };
}

/** Very large and small numbers are written as powers of ten. */
function drawNumber(value: number): Drawn {
  const [digits = '', exponent] = String(value).split('e');
  if (exponent === undefined) return { layout: { kind: 'number', text: digits }, hold: HOLD.whole };
  const text = exponent.replace('+', '').replace('-', '−');
  const ten: Layout = {
    kind: 'power',
    base: { kind: 'number', text: '10' },
    exponent: { kind: 'number', text },
  };
  if (digits === '1') return { layout: ten, hold: HOLD.power };
  return { layout: row([{ kind: 'number', text: digits }, sign('·'), ten]), hold: HOLD.product };
}

function drawQuantity(text: string): Drawn {
  const [number = '', unit = ''] = text.split(' ');
  return { layout: { kind: 'quantity', number, unit }, hold: number.startsWith('−') ? HOLD.sum : HOLD.fraction };
}

function drawName(name: string): Drawn {
  const [base = name, ...rest] = name.split('_');
  const subscript = rest.join(' ').trim();
  const layout: Layout =
    subscript === '' ? { kind: 'name', name, base: name } : { kind: 'name', name, base, subscript };
  return { layout, hold: HOLD.whole };
}

/** A negative value needs brackets after an operator, and one with a unit where it is raised to a power. */
function drawValue(name: string, text: string): Drawn {
  const hold = /^[-−]/.test(text) ? HOLD.sum : /\s/.test(text) ? HOLD.fraction : HOLD.whole;
  return { layout: { kind: 'value', name, text }, hold };
}

function lineOf(layout: Layout): string {
  switch (layout.kind) {
    case 'number':
    case 'value':
    case 'operator':
      return layout.text;
    case 'quantity':
      return `${layout.number} ${layout.unit}`;
    case 'name':
      return layout.name;
    case 'row':
      return lineOfRow(layout.items);
    case 'fenced':
      return `${layout.open}${lineOf(layout.of)}${layout.close}`;
    case 'fraction':
      return `${bracketed(layout.above)} / ${bracketed(layout.below)}`;
    case 'root':
      return layout.of.kind === 'name' ? `√${lineOf(layout.of)}` : `√(${lineOf(layout.of)})`;
    case 'power':
      return `${lineOf(layout.base)}^${bracketed(layout.exponent)}`;
    case 'call':
      return `${layout.name}(${layout.args.map(lineOf).join(', ')})`;
    default:
      return assertNever(layout);
  }
}

function lineOfRow(items: readonly Layout[]): string {
  const isProduct = items.some((item) => item.kind === 'operator' && item.text === '·');
  return items
    .map((item, i) => {
      if (item.kind !== 'operator') return isProduct && item.kind === 'fraction' ? bracketed(item) : lineOf(item);
      if (i === 0) return item.text === '−' ? '−' : `${item.text} `;
      return item.text === '·' ? '·' : ` ${item.text} `;
    })
    .join('');
}

/** What a line above or below would hold together needs brackets on one line. */
function bracketed(layout: Layout): string {
  const line = lineOf(layout);
  return layout.kind === 'row' || layout.kind === 'fraction' ? `(${line})` : line;
}
