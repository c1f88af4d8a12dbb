import { readUnit, sameDimension, toSi } from '#quantity';
import { type Facts, type Span, spanFrom } from '#text';
import type { Expr } from './syntax.ts';
import type { Token } from './tokens.ts';
import type { FormulaCode } from './wording.ts';

export interface LiteralParts {
  /** A sign that belongs to the number, as in −5 °C. */
  readonly minus: Token | null;
  readonly number: Token;
  readonly unit: Token | null;
  readonly next: Token;
  readonly names: ReadonlySet<string>;
}

type Report = (code: FormulaCode, span: Span, facts: Facts) => void;

/** IEC 60062 letter codes, which attributes read and formulas do not: 4k7, 10k. */
const SHORTHAND = /^([RpnuµmkMGT])(\d*)$/;

/** Makes a number or quantity of its tokens, or a hole after telling what is wrong. */
export function literalFrom(parts: LiteralParts, report: Report): Expr {
  const { minus, number, unit, next, names } = parts;
  const span = spanFrom(minus?.span ?? number.span, unit?.span ?? number.span);
  const hole = (code: FormulaCode, at: Span, facts: Facts): Expr => {
    report(code, at, facts);
    return { kind: 'hole', span };
  };
  if (number.kind === 'number' && !number.wellFormed) {
    return hole('malformed-number', number.span, { found: number.text });
  }
  const decimal = number.text.replace('−', '-');
  const value = Number(decimal);
  if (!Number.isFinite(value)) return hole('number-too-large', number.span, { found: number.text });
  if (unit?.kind !== 'unit') {
    const shorthand = shorthandFacts(number, next, names);
    if (shorthand) return hole('shorthand-number', spanFrom(number.span, next.span), shorthand);
    return { kind: 'number', span, value };
  }
  const clash = unit.reading.words.find((word) => names.has(word));
  if (clash !== undefined) return hole('unit-or-name', span, clashFacts(value, number.text, unit, clash, names));
  if (unit.gap > 1) return hole('unit-apart', span, { number: number.text, unit: unit.text });
  const si = toSi(minus ? `-${decimal}` : decimal, unit.reading);
  if (!Number.isFinite(si)) return hole('number-too-large', span, { found: `${number.text} ${unit.text}` });
  const text = `${minus ? '−' : ''}${number.text} ${unit.text}`;
  return { kind: 'quantity', span, si, dimension: unit.reading.dimension, text };
}

function shorthandFacts(number: Token, next: Token, names: ReadonlySet<string>): Facts | null {
  if (next.kind !== 'word' || next.span.start !== number.span.end || names.has(next.text)) return null;
  const match = SHORTHAND.exec(next.text);
  if (!match) return null;
  const [, letter = '', digits = ''] = match;
  const prefix = letter === 'R' ? '' : letter;
  const write = digits === '' ? number.text : `${number.text}.${digits}`;
  return { found: `${number.text}${next.text}`, write: `${write} ${prefix}Ω` };
}

/** Both ways of writing what may be a unit or a name: as a product, and with another prefix that is no name. */
function clashFacts(
  value: number,
  numberText: string,
  unit: Token & { readonly kind: 'unit' },
  clash: string,
  names: ReadonlySet<string>,
): Facts {
  const asName = unit.text.startsWith(clash)
    ? `${numberText} * ${unit.text.replaceAll('/', ' / ')}`
    : `${numberText} ${unit.text.replaceAll('/', ' / ')}`;
  return { name: clash, unit: unit.text, asName, asUnit: otherPrefix(value, unit, names) ?? '' };
}

function otherPrefix(
  value: number,
  unit: Token & { readonly kind: 'unit' },
  names: ReadonlySet<string>,
): string | null {
  for (const text of [`m${unit.text}`, unit.text.slice(1), `k${unit.text}`]) {
    const other = readUnit(text);
    if (!other || !sameDimension(other.dimension, unit.reading.dimension)) continue;
    if (other.offset !== 0 || unit.reading.offset !== 0) continue;
    if (text.split(/[/·]/).some((word) => names.has(word))) continue;
    return `${Number(((value * unit.reading.factor) / other.factor).toPrecision(12))} ${text}`;
  }
  return null;
}
