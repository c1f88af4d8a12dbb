import { readUnitAt, type UnitRead } from '#quantity';
import { type Span, span } from '#text';
import { isName, reservedAs } from './names.ts';

export type OperatorText = '+' | '-' | '*' | '/' | '^' | '<' | '<=' | '>' | '>=' | '==' | '!=' | 'and' | 'or' | 'not';

/** What the parser reads. `text` is what the author sees: entities stand as their characters. */
export type Token =
  | { readonly kind: 'number'; readonly span: Span; readonly text: string; readonly wellFormed: boolean }
  /** Stands only straight after a number; `gap` counts the blanks between. */
  | {
      readonly kind: 'unit';
      readonly span: Span;
      readonly text: string;
      readonly reading: UnitRead;
      readonly gap: number;
    }
  | { readonly kind: 'word'; readonly span: Span; readonly text: string }
  /** `typed` differs from `text` where another spelling was used; `accepted` tells whether that spelling is allowed. */
  | {
      readonly kind: 'operator';
      readonly span: Span;
      readonly text: OperatorText;
      readonly typed: string;
      readonly accepted: boolean;
    }
  | { readonly kind: 'open' | 'close' | 'comma' | 'end'; readonly span: Span; readonly text: string }
  /** `instead` is what to write, where that is known. */
  | { readonly kind: 'unknown'; readonly span: Span; readonly text: string; readonly instead: string };

/** How the editor colours a part of a formula. */
export interface FormulaToken {
  readonly kind: 'number' | 'unit' | 'name' | 'function' | 'constant' | 'operator' | 'bracket' | 'comma' | 'unknown';
  readonly span: Span;
}

/** The five entities of XML; others are told to be written as the character itself. */
const ENTITIES: ReadonlyMap<string, string> = new Map([
  ['lt', '<'],
  ['gt', '>'],
  ['amp', '&'],
  ['quot', '"'],
  ['apos', "'"],
]);

/** Longest first. The signs of printed mathematics are read as well as those of the keyboard. */
const SPELLINGS: readonly (readonly [typed: string, text: OperatorText, accepted: boolean])[] = [
  ['<=', '<=', true],
  ['>=', '>=', true],
  ['==', '==', true],
  ['!=', '!=', true],
  ['=<', '<=', false],
  ['=>', '>=', false],
  ['<>', '!=', false],
  ['&&', 'and', false],
  ['||', 'or', false],
  ['**', '^', false],
  ['+', '+', true],
  ['-', '-', true],
  ['−', '-', true],
  ['*', '*', true],
  ['×', '*', true],
  ['·', '*', true],
  ['⋅', '*', true],
  ['/', '/', true],
  ['÷', '/', true],
  ['^', '^', true],
  ['<', '<', true],
  ['≤', '<=', true],
  ['>', '>', true],
  ['≥', '>=', true],
  ['≠', '!=', true],
  ['=', '==', false],
  ['!', 'not', false],
  ['&', 'and', false],
  ['∧', 'and', false],
  ['∨', 'or', false],
  ['¬', 'not', false],
];

/** What to write for signs that are not read. */
const INSTEAD: ReadonlyMap<string, string> = new Map([
  ['²', '^2'],
  ['³', '^3'],
  ['√', 'sqrt(…)'],
  ['π', 'pi'],
  ['|', 'abs(…)'],
  ['∥', 'parallel(…, …)'],
  ['[', '('],
  [']', ')'],
  ['{', '('],
  ['}', ')'],
  [';', ','],
  ['%', '0.01'],
]);

/** A slice with its entities read; unit i of `text` was typed from `starts[i]` to `ends[i]`. */
interface Decoded {
  readonly text: string;
  readonly starts: readonly number[];
  readonly ends: readonly number[];
}

function decode(source: string, slice: Span): Decoded {
  const entity = /&(?:#(\d{1,7})|#[xX]([0-9a-fA-F]{1,6})|([A-Za-z]{2,5}));/y;
  const starts: number[] = [];
  const ends: number[] = [];
  let text = '';
  let at = slice.start;
  while (at < slice.end) {
    entity.lastIndex = at;
    const match = source[at] === '&' ? entity.exec(source) : null;
    const character = match && entity.lastIndex <= slice.end ? entityCharacter(match) : undefined;
    const end = character === undefined ? at + 1 : entity.lastIndex;
    for (const unit of (character ?? source.charAt(at)).split('')) {
      text += unit;
      starts.push(at);
      ends.push(end);
    }
    at = end;
  }
  return { text, starts, ends };
}

function entityCharacter(match: RegExpExecArray): string | undefined {
  const [, decimal, hexadecimal, name] = match;
  if (name !== undefined) return ENTITIES.get(name);
  const code = decimal === undefined ? Number.parseInt(hexadecimal ?? '', 16) : Number.parseInt(decimal, 10);
  return code > 0 && code <= 0x10ffff ? String.fromCodePoint(code) : undefined;
}

const BLANK = /\s/;
const NUMBER = /(?:\d+(?:\.\d+)?|\.\d+)(?:[eE][+\-−]?\d+)?/y;
const NUMBER_TAIL = /[\d._]*/y;
const WORD = /[\p{L}_][\p{L}\p{M}\p{Nd}_]*/uy;
const UNKNOWN_ENTITY = /&#?[A-Za-z0-9]+;/y;

/** Cuts a slice into the parser's tokens; the last is always `end`. Never throws. Cost: linear in the slice. */
export function scan(source: string, slice: Span): readonly Token[] {
  const decoded = decode(source, slice);
  const { text } = decoded;
  const tokens: Token[] = [];
  let at = 0;
  while (at < text.length) {
    if (BLANK.test(text.charAt(at))) {
      at++;
      continue;
    }
    const token = tokenAt(decoded, at);
    tokens.push(token.token);
    at = token.end;
    const unit = token.token.kind === 'number' ? unitAt(decoded, at) : null;
    if (unit) {
      tokens.push(unit.token);
      at = unit.end;
    }
  }
  tokens.push({ kind: 'end', span: span(slice.end, slice.end), text: '' });
  return tokens;
}

function spanOf(decoded: Decoded, start: number, end: number): Span {
  return span(decoded.starts[start] ?? 0, decoded.ends[end - 1] ?? 0);
}

function matchAt(pattern: RegExp, text: string, at: number): string {
  pattern.lastIndex = at;
  return pattern.exec(text)?.[0] ?? '';
}

function tokenAt(decoded: Decoded, at: number): { readonly token: Token; readonly end: number } {
  const { text } = decoded;
  const here = (length: number) => ({ span: spanOf(decoded, at, at + length), text: text.slice(at, at + length) });
  const number = matchAt(NUMBER, text, at);
  if (number !== '') {
    const tail = matchAt(NUMBER_TAIL, text, at + number.length);
    const length = number.length + tail.length;
    return { token: { kind: 'number', ...here(length), wellFormed: tail === '' }, end: at + length };
  }
  const word = matchAt(WORD, text, at);
  if (word !== '') return { token: wordToken(word, here(word.length).span), end: at + word.length };
  const character = text.charAt(at);
  const plain = character === '(' ? 'open' : character === ')' ? 'close' : character === ',' ? 'comma' : null;
  if (plain) return { token: { kind: plain, ...here(1) }, end: at + 1 };
  const entity = matchAt(UNKNOWN_ENTITY, text, at);
  if (entity !== '')
    return { token: { kind: 'unknown', ...here(entity.length), instead: '' }, end: at + entity.length };
  const spelling = SPELLINGS.find(([typed]) => text.startsWith(typed, at));
  if (spelling) {
    const [typed, operator, accepted] = spelling;
    return {
      token: { kind: 'operator', span: here(typed.length).span, text: operator, typed, accepted },
      end: at + typed.length,
    };
  }
  const whole = String.fromCodePoint(text.codePointAt(at) ?? 0);
  return {
    token: { kind: 'unknown', ...here(whole.length), instead: INSTEAD.get(whole) ?? '' },
    end: at + whole.length,
  };
}

function wordToken(word: string, at: Span): Token {
  if (word === 'and' || word === 'or' || word === 'not') {
    return { kind: 'operator', span: at, text: word, typed: word, accepted: true };
  }
  if (isName(word)) return { kind: 'word', span: at, text: word };
  return { kind: 'unknown', span: at, text: word, instead: INSTEAD.get(word) ?? '' };
}

/** Reads the unit after a number that ends at `at`. */
function unitAt(decoded: Decoded, at: number): { readonly token: Token; readonly end: number } | null {
  const { text } = decoded;
  let start = at;
  while (BLANK.test(text.charAt(start))) start++;
  const reading = readUnitAt(text, start);
  if (reading === null) return null;
  const { end } = reading;
  return {
    token: { kind: 'unit', span: spanOf(decoded, start, end), text: text.slice(start, end), reading, gap: start - at },
    end,
  };
}

const COLOURS = {
  number: 'number',
  unit: 'unit',
  operator: 'operator',
  open: 'bracket',
  close: 'bracket',
  comma: 'comma',
  unknown: 'unknown',
} as const satisfies Record<Exclude<Token['kind'], 'word' | 'end'>, FormulaToken['kind']>;

/** Cuts a slice of the recipe text into tokens; blanks are left out, spans count from the start of the recipe. Never throws. */
export function formulaTokens(source: string, slice: Span): FormulaToken[] {
  return scan(source, slice).flatMap((token): FormulaToken[] => {
    if (token.kind === 'end') return [];
    if (token.kind !== 'word') return [{ kind: COLOURS[token.kind], span: token.span }];
    const reserved = reservedAs(token.text);
    return [{ kind: reserved === null || reserved === 'operator' ? 'name' : reserved, span: token.span }];
  });
}
