import { unitsSpeltLike } from '#quantity';
import { type Diagnostic, type Facts, problem, type Span, spanFrom } from '#text';
import { literalFrom } from './literal.ts';
import { reservedAs } from './names.ts';
import type { Expr } from './syntax.ts';
import { type OperatorText, scan, type Token } from './tokens.ts';
import type { FormulaCode } from './wording.ts';

/** Beyond these a text is refused at its first glance. Common practice, no source. */
const MOST_CHARACTERS = 2000;
const DEEPEST = 100;
const MOST_DIAGNOSTICS = 20;

/** Binary operators from loosest to tightest; `not` stands between `and` and the comparisons. */
const LEVELS = [
  ['or'],
  ['and'],
  ['<', '<=', '>', '>=', '==', '!='],
  ['+', '-'],
  ['*', '/'],
] as const satisfies OperatorText[][];
const COMPARISON = 2;
const PRODUCT = 4;

/** Where the parser stands. One object for a whole formula; only the functions of this file move it. */
interface Reader {
  readonly tokens: readonly Token[];
  readonly names: ReadonlySet<string>;
  readonly diagnostics: Diagnostic<FormulaCode>[];
  at: number;
  depth: number;
  /** Set when the rest is not worth reading; nothing more is reported. */
  stopped: boolean;
}

/**
 * Reads one formula from a slice of the recipe text. `names` are the names of the calculator, whatever their type.
 * Never throws; a part that cannot be read is a hole. Cost: linear in the slice, which is refused beyond 2,000 characters.
 */
export function parseFormula(
  source: string,
  span: Span,
  names: ReadonlySet<string>,
): { readonly expr: Expr; readonly diagnostics: readonly Diagnostic<FormulaCode>[] } {
  const length = span.end - span.start;
  if (length > MOST_CHARACTERS) {
    const diagnostic = problem<FormulaCode>('formula-too-long', span, { length, most: MOST_CHARACTERS });
    return { expr: { kind: 'hole', span }, diagnostics: [diagnostic] };
  }
  const tokens = scan(source, span);
  if (tokens.length === 1) {
    return { expr: { kind: 'hole', span }, diagnostics: [problem<FormulaCode>('formula-empty', span)] };
  }
  const reader: Reader = { tokens, names, diagnostics: [], at: 0, depth: 0, stopped: false };
  let expr = parseLevel(reader, 0);
  const rest = peek(reader);
  if (rest.kind !== 'end') {
    reportUnexpected(reader, rest, 'an operator or the end of the formula');
    expr = { kind: 'hole', span };
  }
  return { expr, diagnostics: reader.diagnostics };
}

function tokenAt(reader: Reader, at: number): Token {
  const token = reader.tokens[Math.min(at, reader.tokens.length - 1)];
  if (token === undefined) throw new Error('a scan has no end');
  return token;
}

function peek(reader: Reader): Token {
  return tokenAt(reader, reader.at);
}

function take(reader: Reader): Token {
  return tokenAt(reader, reader.at++);
}

function report(reader: Reader, code: FormulaCode, span: Span, facts: Facts = {}): void {
  if (reader.stopped) return;
  reader.diagnostics.push(problem(code, span, facts));
  if (reader.diagnostics.length >= MOST_DIAGNOSTICS) stop(reader);
}

function stop(reader: Reader): void {
  reader.stopped = true;
  reader.at = reader.tokens.length - 1;
}

/** At the end of a formula there is nothing to underline, so the token before it is. */
function placeOf(reader: Reader, token: Token): Span {
  return token.kind === 'end' && reader.at > 0 ? tokenAt(reader, reader.at - 1).span : token.span;
}

function reportUnexpected(reader: Reader, token: Token, expected: string): void {
  if (token.kind === 'unknown') {
    report(reader, 'unexpected-character', token.span, { found: token.text, instead: token.instead });
  } else report(reader, 'unexpected-token', placeOf(reader, token), { found: token.text, expected });
}

/** Takes an operator and says how it is spelt here, if it was typed in another way. */
function takeOperator(reader: Reader): void {
  const token = take(reader);
  if (token.kind === 'operator' && !token.accepted) {
    report(reader, 'operator-spelling', token.span, { found: token.typed, instead: token.text });
  }
}

function nested(reader: Reader, parse: (reader: Reader) => Expr): Expr {
  if (reader.depth >= DEEPEST) {
    const { span } = peek(reader);
    report(reader, 'formula-too-deep', span, { most: DEEPEST });
    stop(reader);
    return { kind: 'hole', span };
  }
  reader.depth++;
  const expr = parse(reader);
  reader.depth--;
  return expr;
}

function parseLevel(reader: Reader, level: number): Expr {
  if (level === COMPARISON) return parseNot(reader);
  if (level === PRODUCT) return parseProduct(reader);
  return parseBinary(reader, level);
}

function parseOperand(reader: Reader, level: number): Expr {
  return level === PRODUCT ? parseUnary(reader) : parseLevel(reader, level + 1);
}

function operatorOf(token: Token, level: number): OperatorText | null {
  const operators: readonly string[] = LEVELS[level] ?? [];
  return token.kind === 'operator' && operators.includes(token.text) ? token.text : null;
}

function parseBinary(reader: Reader, level: number): Expr {
  let left = parseOperand(reader, level);
  for (let operator = operatorOf(peek(reader), level); operator; operator = operatorOf(peek(reader), level)) {
    takeOperator(reader);
    left = join(operator, left, parseOperand(reader, level));
  }
  return left;
}

function join(operator: OperatorText, left: Expr, right: Expr): Expr {
  const span = spanFrom(left.span, right.span);
  switch (operator) {
    case 'and':
    case 'or':
      return { kind: 'logic', span, operator, left, right };
    case '+':
    case '-':
    case '*':
    case '/':
    case '^':
      return { kind: 'arithmetic', span, operator, left, right };
    case 'not':
      return { kind: 'hole', span };
    default:
      return { kind: 'compare', span, operator, left, right };
  }
}

function parseNot(reader: Reader): Expr {
  const token = peek(reader);
  if (token.kind !== 'operator' || token.text !== 'not') return parseComparison(reader);
  takeOperator(reader);
  const of = nested(reader, parseNot);
  return { kind: 'not', span: spanFrom(token.span, of.span), of };
}

/** `1 < x < 3` would compare the answer of the first with 3; nobody means that. */
function parseComparison(reader: Reader): Expr {
  const first = parseOperand(reader, COMPARISON);
  const operator = operatorOf(peek(reader), COMPARISON);
  if (operator === null) return first;
  takeOperator(reader);
  const second = parseOperand(reader, COMPARISON);
  const chained = peek(reader);
  if (operatorOf(chained, COMPARISON) === null) return join(operator, first, second);
  report(reader, 'chained-comparison', chained.span);
  while (operatorOf(peek(reader), COMPARISON) !== null) {
    take(reader);
    parseOperand(reader, COMPARISON);
  }
  return { kind: 'hole', span: first.span };
}

function startsOperand(token: Token): boolean {
  return token.kind === 'number' || token.kind === 'word' || token.kind === 'open';
}

function parseProduct(reader: Reader): Expr {
  let start = reader.at;
  let left = parseUnary(reader);
  for (;;) {
    const token = peek(reader);
    const operator = operatorOf(token, PRODUCT);
    if (operator !== null) {
      takeOperator(reader);
      start = reader.at;
      left = join(operator, left, parseUnary(reader));
    } else if (startsOperand(token)) {
      reportMissingSign(reader, start, left);
      start = reader.at;
      left = { kind: 'hole', span: spanFrom(left.span, parseUnary(reader).span) };
    } else if (token.kind === 'unknown') {
      reportUnexpected(reader, take(reader), 'an operator');
      if (startsOperand(peek(reader))) parseUnary(reader);
      left = { kind: 'hole', span: spanFrom(left.span, token.span) };
    } else return left;
  }
}

/** Two operands side by side. After a hole nothing is said: its own message stands there already. */
function reportMissingSign(reader: Reader, start: number, left: Expr): void {
  if (left.kind === 'hole') return;
  const next = peek(reader);
  const before = textBetween(reader, start, reader.at);
  const after = textOfOperand(reader, reader.at);
  report(reader, 'implied-multiplication', spanFrom(tokenAt(reader, start).span, next.span), {
    before,
    after,
    write: `${before} * ${after}`,
    units: tokenAt(reader, reader.at - 1).kind === 'number' ? unitsSpeltLike(next.text) : [],
  });
}

function textOfOperand(reader: Reader, at: number): string {
  const token = tokenAt(reader, at);
  const unit = tokenAt(reader, at + 1);
  if (token.kind === 'open') return '(…)';
  if (token.kind === 'number' && unit.kind === 'unit') return `${token.text} ${unit.text}`;
  return token.kind === 'word' && unit.kind === 'open' ? `${token.text}(…)` : token.text;
}

/** Writes some tokens again, as `2 kΩ` or `sqrt(…)`; what stands in brackets is left out. */
function textBetween(reader: Reader, start: number, end: number): string {
  let depth = 0;
  let text = '';
  for (let at = start; at < end; at++) {
    const token = tokenAt(reader, at);
    if (token.kind === 'close') depth--;
    if (depth === 0) text += token.kind === 'unit' ? ` ${token.text}` : token.text;
    if (token.kind === 'open') {
      if (depth === 0) text += '…';
      depth++;
    }
  }
  return text;
}

function parseUnary(reader: Reader): Expr {
  const token = peek(reader);
  if (token.kind !== 'operator' || (token.text !== '-' && token.text !== '+')) return parsePower(reader);
  take(reader);
  const number = peek(reader);
  const unit = tokenAt(reader, reader.at + 1);
  if (number.kind === 'number' && unit.kind === 'unit' && unit.reading.offset !== 0) {
    // −5 °C is 268.15 K; as the negative of 5 °C it would be −278.15 K.
    return parseLiteral(reader, token);
  }
  const of = nested(reader, parseUnary);
  return token.text === '+' ? of : { kind: 'negate', span: spanFrom(token.span, of.span), of };
}

function parsePower(reader: Reader): Expr {
  const start = reader.at;
  const base = parsePrimary(reader);
  const token = peek(reader);
  if (token.kind !== 'operator' || token.text !== '^') return base;
  const hasUnit = tokenAt(reader, start).kind === 'number' && base.kind === 'quantity';
  if (hasUnit) {
    const [number = '', unit = ''] = [tokenAt(reader, start).text, tokenAt(reader, start + 1).text];
    report(reader, 'power-of-quantity', spanFrom(base.span, token.span), { number, unit });
  }
  takeOperator(reader);
  const power = join('^', base, nested(reader, parseUnary));
  return hasUnit ? { kind: 'hole', span: power.span } : power;
}

function parsePrimary(reader: Reader): Expr {
  const token = peek(reader);
  switch (token.kind) {
    case 'number':
      return parseLiteral(reader, null);
    case 'word':
      return parseWord(reader, token);
    case 'open':
      return nested(reader, parseBracket);
    case 'unknown':
      take(reader);
      reportUnexpected(reader, token, 'a value');
      // What follows belongs to the same mistake: `√(x)` is told once.
      if (startsOperand(peek(reader))) parsePrimary(reader);
      return { kind: 'hole', span: token.span };
    case 'unit':
    case 'operator':
    case 'close':
    case 'comma':
    case 'end': {
      const span = placeOf(reader, token);
      report(reader, 'missing-operand', span, { found: token.text });
      return { kind: 'hole', span };
    }
  }
}

/** `minus` is a sign that belongs to the literal. */
function parseLiteral(reader: Reader, minus: Token | null): Expr {
  const number = take(reader);
  const unit = peek(reader).kind === 'unit' ? take(reader) : null;
  return literalFrom({ minus, number, unit, next: peek(reader), names: reader.names }, (code, span, facts) => {
    if (code === 'shorthand-number') take(reader);
    report(reader, code, span, facts);
  });
}

function parseWord(reader: Reader, token: Token): Expr {
  take(reader);
  const reserved = reservedAs(token.text);
  const called = peek(reader).kind === 'open' && reserved !== 'constant' && !reader.names.has(token.text);
  if (called) return nested(reader, (inner) => parseCall(inner, token));
  if (reserved !== 'function') return { kind: 'name', span: token.span, name: token.text };
  report(reader, 'function-without-arguments', token.span, { name: token.text });
  return { kind: 'hole', span: token.span };
}

function parseBracket(reader: Reader): Expr {
  const open = take(reader);
  const inner = parseLevel(reader, 0);
  const close = closeBracket(reader, open, 'an operator or )');
  return close === null
    ? { kind: 'hole', span: spanFrom(open.span, inner.span) }
    : { ...inner, span: spanFrom(open.span, close) };
}

function parseCall(reader: Reader, name: Token): Expr {
  const open = take(reader);
  const args: Expr[] = [];
  while (peek(reader).kind !== 'close' && peek(reader).kind !== 'end') {
    args.push(parseLevel(reader, 0));
    if (peek(reader).kind !== 'comma') break;
    take(reader);
    if (peek(reader).kind === 'close') args.push(parsePrimary(reader));
  }
  const close = closeBracket(reader, open, 'an operator, a comma or )');
  const span = spanFrom(name.span, close ?? open.span);
  return close === null ? { kind: 'hole', span } : { kind: 'call', span, name: name.text, nameSpan: name.span, args };
}

/** Takes the bracket that ends what `open` began; else says what stands there and skips to it. Gives null if there is none. */
function closeBracket(reader: Reader, open: Token, expected: string): Span | null {
  const token = peek(reader);
  if (token.kind === 'close') return take(reader).span;
  if (token.kind === 'end') {
    report(reader, 'unclosed-bracket', open.span);
    return null;
  }
  reportUnexpected(reader, token, expected);
  let depth = 0;
  while (peek(reader).kind !== 'end') {
    const { kind } = take(reader);
    if (kind === 'open') depth++;
    if (kind === 'close' && depth-- === 0) return null;
  }
  return null;
}
