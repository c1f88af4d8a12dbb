import { describe, expect, test } from 'vitest';
import {
  type CheckedExpr,
  checkFormula,
  FORMULA_WORDING,
  type FormulaCode,
  formulaLayout,
  formulaText,
  formulaTokens,
  isName,
  linkScalar,
  nearestName,
  noValueWords,
  orderDefinitions,
  parseFormula,
  reservedAs,
  sampleAt,
  typeWords,
  unboundedReason,
  unboundedWords,
} from '#formula';
import { type Dimension, KINDS, NONE } from '#quantity';
import { LineIndex, span } from '#text';
import { parseCases, readCases } from '../cases/read-cases.ts';

interface Calculator {
  readonly types: ReadonlyMap<string, Dimension>;
  readonly values: ReadonlyMap<string, number>;
  readonly texts: ReadonlyMap<string, string>;
}

function compile(text: string, types: ReadonlyMap<string, Dimension>) {
  const names = [...types.keys()];
  const parsed = parseFormula(text, span(0, text.length), new Set(names));
  const { checked, diagnostics } = checkFormula(parsed.expr, { typeOf: (name) => types.get(name), names });
  return { checked, diagnostics: [...parsed.diagnostics, ...diagnostics] };
}

/** The names of a case file, `R1 = 10 kΩ` a line; the values are read as formulas themselves. */
function calculatorOf(preamble: readonly string[]): Calculator {
  const types = new Map<string, Dimension>();
  const values = new Map<string, number>();
  const texts = new Map<string, string>();
  for (const line of preamble) {
    const [name = '', text = ''] = line.split(' = ');
    const { checked } = compile(text, new Map());
    if (checked === null || checked.type === 'truth') throw new Error(`"${line}" is no name of a calculator`);
    types.set(name, checked.type);
    values.set(name, linkScalar(checked, () => 0)(new Float64Array()));
    texts.set(name, text.replace('-', '−'));
  }
  return { types, values, texts };
}

function outcomeOf(text: string, { types, values }: Calculator) {
  const { checked, diagnostics } = compile(text, types);
  if (checked === null) throw new Error(`${text} is refused: ${diagnostics.map(({ code }) => code).join()}`);
  expect(diagnostics).toEqual([]);
  const names = [...types.keys()];
  const frame = Float64Array.from(names, (name) => values.get(name) ?? Number.NaN);
  const raw = linkScalar(checked, (name) => names.indexOf(name))(frame);
  const at = { valueOf: (name: string) => values.get(name) ?? Number.NaN };
  return { checked, sample: sampleAt(checked, raw, at), reason: unboundedReason(checked, at) };
}

/** `1:3 "part"`, the place of a span in a text. */
function placed(text: string, { start, end }: { readonly start: number; readonly end: number }) {
  const { line, column } = new LineIndex(text).pointAt(start);
  return { at: `${line}:${column}`, part: `"${text.slice(start, end)}"` };
}

describe('values', () => {
  const { preamble, cases } = readCases('formula-values.txt');
  const calculator = calculatorOf(preamble);
  test.each(cases)('$title', ({ rows }) => {
    for (const { line, input, expected } of rows) {
      const { checked, sample } = outcomeOf(input, calculator);
      const [, number, words, within = '1e-12'] = /^(\S+) (.*?)(?: within (\S+))?$/.exec(expected[0] ?? '') ?? [];
      expect(sample.kind, `line ${line}`).toBe('finite');
      const si = sample.kind === 'finite' ? sample.si : Number.NaN;
      expect(Math.abs(si - Number(number)), `line ${line}: ${si}, expected ${number}`).toBeLessThanOrEqual(
        Number(within) * Math.abs(Number(number)),
      );
      expect(typeWords(checked.type), `line ${line}`).toBe(words);
    }
  });
});

describe('outcomes that are no number', () => {
  const { preamble, cases } = readCases('formula-outcomes.txt');
  const calculator = calculatorOf(preamble);
  test.each(cases)('$title', ({ rows }) => {
    for (const { line, input, expected } of rows) {
      const { sample, reason } = outcomeOf(input, calculator);
      let shown: string;
      if (sample.kind === 'finite') shown = String(sample.si);
      else {
        const { at, part } = placed(input, sample.span);
        const words =
          sample.kind === 'no-value' ? noValueWords(sample.reason) : reason === null ? '' : unboundedWords(reason);
        const kind = sample.kind === 'no-value' ? 'no value' : `unbounded ${sample.sign === 1 ? '+' : '-'}`;
        shown = `${kind} at ${at} ${part}: ${words}`;
      }
      expect(shown, `line ${line}`).toBe(expected.join());
    }
  });
});

describe('mistakes', () => {
  const { preamble, cases } = readCases('formula-mistakes.txt');
  const { types } = calculatorOf(preamble);
  const seen = new Set<string>();
  test.each(cases)('$title', ({ rows }) => {
    for (const { line, input, expected } of rows) {
      const { checked, diagnostics } = compile(input, types);
      const shown = diagnostics.map(({ code, span: where, facts }) => {
        seen.add(code);
        const { message, hint } = FORMULA_WORDING[code] as (typeof FORMULA_WORDING)['unknown-name'];
        for (const sentence of [message(facts), hint?.(facts) ?? ''])
          expect(sentence).not.toMatch(/undefined|NaN|object/);
        const { at, part } = placed(input, where);
        return `${at} ${code} ${part}`;
      });
      expect(shown.length === 0 ? ['none'] : shown, `line ${line}`).toEqual(expected);
      if (shown.length === 0) expect(checked, `line ${line}`).not.toBeNull();
    }
  });

  test('every code has a case here, or a test below', () => {
    const below = ['formula-empty', 'formula-too-long', 'formula-too-deep', 'definition-cycle'];
    expect(new Set([...seen, ...below])).toEqual(new Set(Object.keys(FORMULA_WORDING)));
  });
});

describe('writing for people', () => {
  const { preamble, cases } = readCases('formula-shown.txt');
  const { types, texts } = calculatorOf(preamble);
  test.each(cases)('$title', ({ rows }) => {
    for (const { line, input, expected } of rows) {
      const { checked } = compile(input, types);
      if (checked === null) throw new Error(`line ${line} is refused`);
      expect(formulaText(checked), `line ${line}`).toBe(expected[0]);
      if (expected.length < 2) continue;
      const put = formulaText(checked, (name) => ({ text: texts.get(name) ?? '' }));
      expect(put, `line ${line}`).toBe(expected[1]);
    }
  });

  test('a layout has fractions, roots, powers and subscripts', () => {
    const { checked } = compile('sqrt(R_load_max^2 / 2 Ω)', types);
    if (checked === null) throw new Error('refused');
    expect(formulaLayout(checked)).toEqual({
      kind: 'root',
      of: {
        kind: 'fraction',
        above: {
          kind: 'power',
          base: { kind: 'name', name: 'R_load_max', base: 'R', subscript: 'load max' },
          exponent: { kind: 'number', text: '2' },
        },
        below: { kind: 'quantity', number: '2', unit: 'Ω' },
      },
    });
  });
});

describe('places', () => {
  const types = new Map<string, Dimension>([['n', NONE]]);
  const check = (source: string, formula: string) => {
    const start = source.indexOf(formula);
    const parsed = parseFormula(source, span(start, start + formula.length), new Set(types.keys()));
    const checked = checkFormula(parsed.expr, { typeOf: (name) => types.get(name), names: types.keys() });
    return [...parsed.diagnostics, ...checked.diagnostics].map((found) => placed(source, found.span));
  };

  test('a span counts from the start of the recipe, in UTF-16 units, over CRLF', () => {
    const source = 'Ω µ 🙂\r\n<Result formula="n + V_q">';
    expect(check(source, 'n + V_q')).toEqual([{ at: '2:22', part: '"V_q"' }]);
  });

  test('an entity is read as its character and keeps its length', () => {
    expect(check('a="n &lt; 2 and q &#62;&#x3D; 1"', 'n &lt; 2 and q &#62;&#x3D; 1')).toEqual([
      { at: '1:17', part: '"q"' },
    ]);
    expect(check('a="n &amp;&amp; n > 1"', 'n &amp;&amp; n > 1').at(0)).toEqual({ at: '1:6', part: '"&amp;&amp;"' });
    expect(check('a="2 * &#128578;"', '2 * &#128578;')).toEqual([{ at: '1:8', part: '"&#128578;"' }]);
  });

  test('an entity that the slice cuts off is no entity', () => {
    expect(check('n &lt; 1', 'n &l').at(0)).toEqual({ at: '1:3', part: '"&"' });
  });

  test('a formula may run over several lines', () => {
    expect(check('n +\n  n +\n  q', 'n +\n  n +\n  q')).toEqual([{ at: '3:3', part: '"q"' }]);
  });

  test('a span in brackets holds the brackets', () => {
    const { expr } = parseFormula('(n + 1) * 2', span(0, 11), new Set(['n']));
    expect(expr.kind === 'arithmetic' && expr.left.span).toEqual(span(0, 7));
  });
});

describe('formulaTokens', () => {
  test('every part has the kind that the editor colours', () => {
    const source = 'x="2 kΩ * sqrt(R1, pi) &lt;= not q$"';
    const tokens = formulaTokens(source, span(3, source.length - 1));
    expect(tokens.map(({ kind, span: { start, end } }) => `${kind} ${source.slice(start, end)}`)).toEqual([
      'number 2',
      'unit kΩ',
      'operator *',
      'function sqrt',
      'bracket (',
      'name R1',
      'comma ,',
      'constant pi',
      'bracket )',
      'operator &lt;=',
      'operator not',
      'name q',
      'unknown $',
    ]);
  });
});

describe('names', () => {
  test('constants, functions and operator words are taken; V, I and P are free', () => {
    expect(['pi', 'T_0', 'sqrt', 'if', 'and', 'not', 'V', 'I', 'P', 'R1', 'toString'].map(reservedAs)).toEqual([
      'constant',
      'constant',
      'function',
      'function',
      'operator',
      'operator',
      null,
      null,
      null,
      null,
      null,
    ]);
  });

  test('a name is a letter, then letters, digits and underscores', () => {
    expect(['R1', 'V_out', 'a', 'R1 ', '1R', '_a', 'Ω', '', 'a-b'].filter(isName)).toEqual(['R1', 'V_out', 'a']);
  });

  test('the nearest name differs in case or by one or two letters', () => {
    const names = ['R1', 'V_out', 'gain', 'bandwidth'];
    expect(nearestName('v_out', names)).toBe('V_out');
    expect(nearestName('gian', names)).toBe('gain');
    expect(nearestName('bandwith', names)).toBe('bandwidth');
    expect(nearestName('R3', names)).toBeNull();
    expect(nearestName('offset', names)).toBeNull();
  });
});

describe('orderDefinitions', () => {
  const define = (name: string, ...reads: string[]) => ({ name, reads, span: span(name.charCodeAt(0), 200) });

  test('definitions stand after what they read, else in the order of the text', () => {
    const { order, diagnostics } = orderDefinitions([
      define('a', 'c', 'V'),
      define('b'),
      define('c', 'b'),
      define('d'),
    ]);
    expect(order).toEqual(['b', 'c', 'a', 'd']);
    expect(diagnostics).toEqual([]);
  });

  test('a circle is told with its path, and what is outside stays', () => {
    const { order, diagnostics } = orderDefinitions([
      define('a', 'b'),
      define('b', 'c'),
      define('c', 'a'),
      define('d'),
    ]);
    expect(order).toEqual(['d']);
    expect(diagnostics).toMatchObject([{ code: 'definition-cycle', facts: { path: ['a', 'b', 'c', 'a'] } }]);
    expect(orderDefinitions([define('a', 'a')]).diagnostics).toMatchObject([{ facts: { path: ['a', 'a'] } }]);
  });

  test('a chain of 20,000 definitions is put in order', () => {
    const chain = Array.from({ length: 20_000 }, (_, i) => define(`x${i}`, `x${i + 1}`));
    expect(orderDefinitions(chain).order.at(-1)).toBe('x0');
  });
});

describe('causes in other formulas', () => {
  test('a name without a value tells where its value was lost', () => {
    const checked: CheckedExpr = { kind: 'name', span: span(0, 1), type: NONE, name: 'a' };
    const lost = { kind: 'no-value', reason: 'zero-over-zero', span: span(90, 95) } as const;
    const grown = { kind: 'unbounded', sign: -1, span: span(90, 95) } as const;
    expect(sampleAt(checked, Number.NaN, { valueOf: () => Number.NaN, sampleOf: () => lost })).toEqual(lost);
    expect(sampleAt(checked, -Infinity, { valueOf: () => -Infinity, sampleOf: () => grown })).toEqual(grown);
    expect(sampleAt(checked, Number.NaN, { valueOf: () => Number.NaN })).toMatchObject({ reason: 'not-a-number' });
    expect(unboundedReason(checked, { valueOf: () => Infinity })).toMatchObject({ kind: 'name', name: 'a' });
  });

  test('a name whose own formula is faulty is passed over in silence', () => {
    const { expr } = parseFormula('a + 1 V', span(0, 7), new Set(['a']));
    expect(checkFormula(expr, { typeOf: () => null, names: ['a'] })).toEqual({ checked: null, diagnostics: [] });
  });
});

describe('hostile texts', () => {
  const hostile: readonly (readonly [string, string, FormulaCode | null])[] = [
    ['100,000 brackets', '('.repeat(100_000), 'formula-too-long'],
    ['2,000 brackets', '('.repeat(2000), 'formula-too-deep'],
    ['2,000 closing brackets', ')'.repeat(2000), 'missing-operand'],
    ['2,000 minus signs', '-'.repeat(2000), 'formula-too-deep'],
    ['500 nots', 'not '.repeat(500), 'formula-too-deep'],
    ['a tower of powers', `${'2^'.repeat(999)}2`, 'formula-too-deep'],
    ['nested calls', 'sqrt('.repeat(400), 'formula-too-deep'],
    ['1,000 commas in a call', `max(${','.repeat(1000)}`, 'missing-operand'],
    ['1,000 terms', `1${'+1'.repeat(999)}`, null],
    ['1,000 factors', `2${'*2'.repeat(999)}`, null],
    ['a long number', '9'.repeat(2000), 'number-too-large'],
    ['lone surrogates', '\ud800 + \udc00', 'unexpected-character'],
    ['control characters', '\u0000\u0007', 'unexpected-character'],
    ['entities of nothing', '&#0; + &#1114112; + &#x0;', 'unexpected-character'],
    ['only blanks', ' \n\t\u00a0', 'formula-empty'],
  ];
  test.each(hostile)('%s: no throw, at most 20 messages', (_, text, code) => {
    const { checked, diagnostics } = compile(text, new Map());
    expect(diagnostics.length).toBeLessThanOrEqual(20);
    expect(diagnostics[0]?.code ?? null).toBe(code);
    if (checked) linkScalar(checked, () => 0)(new Float64Array());
    else expect(diagnostics.length).toBeGreaterThan(0);
    formulaTokens(text, span(0, text.length));
  });

  test('a depth of 90 is read', () => {
    const { checked } = compile(`${'('.repeat(90)}1${')'.repeat(90)}`, new Map());
    expect(checked).toMatchObject({ kind: 'number', value: 1 });
  });
});

describe('case files', () => {
  test('a file without cases, a case without lines and a line without an arrow are errors', () => {
    expect(() => parseCases('x', '# nothing\n')).toThrow('no cases');
    expect(() => parseCases('x', '--- one\n--- two\n1 → 1')).toThrow('"one" has no lines');
    expect(() => parseCases('x', '--- one\n1 + 1')).toThrow('x:2 has no arrow');
  });

  test('every kind of quantity can be read in a formula by its own unit', () => {
    for (const { unit, dimension } of Object.values(KINDS)) {
      const { checked } = compile(`1 ${unit}`, new Map());
      expect(checked?.type, unit).toEqual(dimension);
    }
  });
});
