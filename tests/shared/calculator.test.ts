import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  describeLimit,
  describeOutcome,
  type Evaluated,
  evaluate,
  evaluateInOrder,
  explainResult,
  fieldMessage,
  findCure,
  type InputOptions,
  type Inputs,
  type LimitOutcome,
  linkCalculator,
  type Outcome,
  readInputs,
  toRunJson,
  withLastGood,
} from '#calculator';
import { linkedOf, modelOf, type Sketch } from '../calculator-model.ts';
import { expectNear } from '../expect-near.ts';

type Texts = Readonly<Record<string, string | null>>;

/** A difference amplifier with signals over ranges, as a page has it. */
const AMPLIFIER: Sketch = {
  id: 'amp',
  title: 'Your numbers',
  givens: {
    V_d: ['voltage', '±2 V', { min: '-20 V', max: '20 V' }],
    V_cm: ['voltage', '±2 V', { min: '-20 V', max: '20 V' }],
    V_ref: ['voltage', '4.5 V', { min: '0 V', max: '30 V' }],
    V_s: ['voltage', '9 V', { min: '5 V', max: '30 V' }],
    R1: ['resistance', '15 kΩ', { min: '1 kΩ', max: '1 MΩ' }],
    R2: ['resistance', '18.7 kΩ', { min: '1 kΩ', max: '1 MΩ' }],
    R3: ['resistance', '15 kΩ', { min: '1 kΩ', max: '1 MΩ' }],
    R4: ['resistance', '18.7 kΩ', { min: '1 kΩ', max: '1 MΩ' }],
  },
  results: {
    V_1: 'V_cm - V_d / 2',
    V_2: 'V_cm + V_d / 2',
    V_plus: '(R4 * V_2 + R3 * V_ref) / (R3 + R4)',
    V_out: '(1 + R2 / R1) * V_plus - R2 / R1 * V_1',
    A_d: '((1 + R2 / R1) * R4 / (R3 + R4) + R2 / R1) / 2',
    A_cm: '(R1 * R4 - R2 * R3) / (R1 * (R3 + R4))',
    CMRR: ['db(A_d / A_cm)', { digits: 3 }],
    R_in: 'R1 + R3',
  },
  limits: {
    output: { of: 'V_out', from: '50 mV', to: 'V_s - 1.5 V', near: '100 mV' },
    'input range': { of: 'V_plus', from: '0 V', to: 'V_s - 1.5 V', near: '100 mV' },
    rejection: { of: 'CMRR', from: '50 dB', level: 'caution' },
  },
};

function run(sketch: Sketch, texts: Texts = {}, options: InputOptions = {}) {
  const linked = linkedOf(sketch);
  const inputs = readInputs(linked.model, texts, options);
  return { linked, inputs, evaluation: evaluate(linked, inputs) };
}

/** One formula over given values and ranges, without dimensions. */
function ratio(formula: string, ranges: Texts = {}, frequency?: string): Outcome {
  const givens: Record<string, readonly ['ratio' | 'frequency', string]> = {};
  for (const [name, text] of Object.entries(ranges)) givens[name] = ['ratio', text ?? ''];
  if (frequency) givens.f = ['frequency', frequency];
  const outcome = run({ givens, results: { out: formula } }).evaluation.outcomes.out;
  if (!outcome) throw new Error('out is missing');
  return outcome;
}

function middle(outcome: Outcome | undefined): number {
  if (outcome?.state !== 'known' || outcome.middle.kind !== 'finite') throw new Error('no finite value');
  return outcome.middle.si;
}

function ends(outcome: Outcome | undefined): readonly [number, number] {
  const over = outcome?.state === 'known' ? outcome.over : undefined;
  if (over?.lowest.kind !== 'finite' || over.highest.kind !== 'finite') throw new Error('no finite range');
  return [over.lowest.si, over.highest.si];
}

function words(sketch: Sketch, name: string, texts: Texts = {}): { text: string; words: string } {
  const { linked, evaluation } = run(sketch, texts);
  const [outcome, model] = [evaluation.outcomes[name], linked.results.get(name)?.model];
  if (!outcome || !model) throw new Error(`${name} is missing`);
  const described = describeOutcome(outcome, model);
  return { text: described.text.replaceAll('\u2009', ' '), words: described.words.replaceAll('\u2009', ' ') };
}

function limitIn(sketch: Sketch, name: string, texts: Texts = {}): LimitOutcome {
  const found = run(sketch, texts).evaluation.limits.find((limit) => limit.name === name);
  if (!found) throw new Error(`${name} is missing`);
  return found;
}

function codeOf(inputs: Inputs, name: string): string {
  const field = inputs.fields.get(name);
  return field?.state === 'refused' ? field.problem.code : (field?.state ?? 'missing');
}

describe('readInputs', () => {
  const { model } = linkedOf(AMPLIFIER);

  test('takes the recipe’s value where nobody typed', () => {
    const inputs = readInputs(model, { R1: null });
    expect(inputs.fields.get('R1')).toMatchObject({ state: 'read', origin: 'recipe', low: 15e3, high: 15e3 });
    expect(inputs.fields.get('V_d')).toMatchObject({ low: -2, high: 2, understood: '−2 V to 2 V' });
  });

  test.each([
    ['R1', '4k7', 4700, 4700, '4.7 kΩ'],
    ['R1', '22', 22e3, 22e3, '22 kΩ'],
    ['V_ref', '3300 mV', 3.3, 3.3, '3300 mV'],
    ['V_d', '-1 to 1.5 V', -1, 1.5, '−1 V to 1.5 V'],
    ['V_d', '0', 0, 0, '0 V'],
  ])('%s typed as %s is understood and written back', (name, text, low, high, understood) => {
    const field = readInputs(model, { [name]: text }).fields.get(name);
    expect(field).toMatchObject({ state: 'read', origin: 'typed', low, high, understood });
    const again = readInputs(model, { [name]: understood }).fields.get(name);
    expect(again).toMatchObject({ low, high });
  });

  test('gives a bare number the unit last shown', () => {
    const lastShown = readInputs(model, { V_ref: '500 mV' });
    expect(readInputs(model, { V_ref: '800' }, { lastShown }).fields.get('V_ref')).toMatchObject({ low: 0.8 });
    expect(readInputs(model, { V_ref: '8' }).fields.get('V_ref')).toMatchObject({ low: 8 });
  });

  test('reads a decimal comma only for those who use it', () => {
    expect(codeOf(readInputs(model, { V_ref: '4,5 V' }), 'V_ref')).toBe('decimal-comma');
    const inputs = readInputs(model, { V_ref: '4,5 V' }, { decimalComma: true });
    expect(inputs.fields.get('V_ref')).toMatchObject({ low: 4.5, understood: '4.5 V' });
  });

  test('turns what is typed as RMS or peak-to-peak into the peak of a sine', () => {
    const sketch: Sketch = {
      givens: {
        V_a: ['voltage', '1 V', { reading: 'rms' }],
        V_b: ['voltage', '1 V', { reading: 'peak-to-peak' }],
      },
      results: { V: 'V_a + V_b' },
    };
    const { inputs } = run(sketch, { V_b: '3 V' });
    expectNear((inputs.fields.get('V_a') as { low: number }).low, Math.SQRT2, 1e-12);
    expect(inputs.fields.get('V_b')).toMatchObject({ low: 1.5, understood: '3 V' });
  });

  test.each(['2', 'two-wire', '4 ', '4.0'])('takes %s from a list', (text) => {
    const sketch: Sketch = {
      givens: { n: ['count', '2', { options: { '2': 'two-wire', '4': 'four-wire' } }] },
      results: { m: 'n' },
    };
    expect(codeOf(run(sketch, { n: text }).inputs, 'n')).toBe('read');
  });

  test('refuses what is not in a list', () => {
    const sketch: Sketch = {
      givens: { n: ['count', '2', { options: { '2': 'two-wire', '4': 'four-wire' } }] },
      results: { m: 'n' },
    };
    expect(codeOf(run(sketch, { n: '3' }).inputs, 'n')).toBe('not-an-option');
    expect(codeOf(run(sketch, { n: '' }).inputs, 'n')).toBe('not-an-option');
  });

  test.each([
    ['', 'value-missing'],
    ['   ', 'value-missing'],
    ['abc', 'not-a-number'],
    ['1e999', 'number-too-large'],
    ['0', 'outside-limits'],
    ['-15 kΩ', 'outside-limits'],
    ['2 MΩ', 'outside-limits'],
    ['15 V', 'unit-wrong'],
    ['20 kΩ to 10 kΩ', 'ends-crossed'],
    [`${'9'.repeat(5000)}`, 'number-too-long'],
    ['<script>', 'not-a-number'],
    ['__proto__', 'not-a-number'],
  ])('refuses %j in a field for a resistance with %s', (text, code) => {
    const inputs = readInputs(model, { R1: text });
    expect(codeOf(inputs, 'R1')).toBe(code);
    expect(inputs.refused).toEqual(['R1']);
  });

  test('words a refusal with the limits of entry in engineering prefixes', () => {
    const field = readInputs(model, { R1: '999 Ω' }).fields.get('R1');
    if (field?.state !== 'refused') throw new Error('R1 was read');
    expect(fieldMessage(field.problem).message.replaceAll('\u2009', ' ')).toBe(
      '999 Ω is outside 1.000 kΩ to 1.000 MΩ, but this input needs to lie between them.',
    );
  });

  test('refuses a fifth range', () => {
    const sketch: Sketch = {
      givens: {
        a: ['ratio', '0 to 1'],
        b: ['ratio', '0 to 1'],
        c: ['ratio', '0 to 1'],
        d: ['ratio', '0 to 1'],
        g: ['ratio', '0 to 1'],
      },
      results: { y: 'a + b + c + d + g' },
    };
    expect(run(sketch).inputs.refused).toEqual(['g']);
    expect(run(sketch, { a: '1' }).inputs.refused).toEqual([]);
  });

  test('ignores names that the calculator lacks, and names that every object has', () => {
    const two = ['ratio', '2'] as const;
    const sketch: Sketch = { givens: { constructor: two }, results: { toString: 'constructor + 1' } };
    const { evaluation } = run(sketch, { valueOf: '7', nobody: '1' });
    expect(middle(new Map(Object.entries(evaluation.outcomes)).get('toString'))).toBe(3);
    expect(run(sketch, { constructor: '5' }).inputs.fields.get('constructor')).toMatchObject({ low: 5 });
  });

  test('never throws, whatever is typed', () => {
    const linked = linkedOf(AMPLIFIER);
    const text = fc.oneof(fc.string(), fc.string({ unit: 'binary' }), fc.double().map(String));
    fc.assert(
      fc.property(text, text, (a, b) => {
        const evaluation = evaluate(linked, readInputs(linked.model, { R1: a, V_d: b }));
        expect(JSON.stringify(evaluation)).not.toMatch(/NaN|Infinity/);
      }),
      { numRuns: 300 },
    );
  });

  test('keeps the last good numbers of a refused field for those who ask', () => {
    const linked = linkedOf(AMPLIFIER);
    const lastShown = readInputs(linked.model, { R1: '10 kΩ' });
    const inputs = readInputs(linked.model, { R1: '10 x' }, { lastShown });
    expect(evaluate(linked, inputs).outcomes.V_out).toEqual({ state: 'waiting', for: ['R1'] });
    expect(evaluate(linked, inputs).outcomes).toMatchObject({ V_plus: { state: 'known' } });
    const standing = withLastGood(inputs);
    expect(standing.refused).toEqual([]);
    expect(evaluate(linked, standing)).toEqual(evaluate(linked, lastShown));
  });
});

describe('evaluate', () => {
  test('gives the middle of the ranges and, where a result stands on a range, its lowest and highest', () => {
    const { outcomes } = run(AMPLIFIER, { V_cm: '0 V' }).evaluation;
    expectNear(middle(outcomes.V_out), 4.5, 1e-12);
    // 4.5 V ± 2 V · 18.7/15: own arithmetic.
    const [lowest, highest] = ends(outcomes.V_out);
    expectNear(lowest, 2.0066666666666668, 1e-12);
    expectNear(highest, 6.993333333333333, 1e-12);
    expect(outcomes.R_in).toEqual({ state: 'known', middle: { kind: 'finite', si: 30e3 } });
  });

  test('waits for chosen values and for results that are only measured, which this release does not work out', () => {
    const model = modelOf({ givens: { a: ['ratio', '1'] }, results: { x: 'a', y: 'x + 1', z: 'a' } });
    const results = model.results.map(({ formula, ...rest }) =>
      rest.name === 'x'
        ? { ...rest, measure: { text: 'V(out)', drawing: 'd' } }
        : { ...rest, ...(formula ? { formula } : {}) },
    );
    const linked = linkCalculator({ ...model, results });
    const { outcomes } = evaluate(linked, readInputs(linked.model, {}));
    expect(outcomes).toMatchObject({ x: { for: ['x'] }, y: { state: 'waiting', for: ['x'] }, z: { state: 'known' } });
  });

  test('takes the middle of a frequency range in ratio, of others in value', () => {
    expectNear(middle(ratio('f / 1 Hz', {}, '10 Hz to 1 kHz')), 100, 1e-12);
    expect(middle(ratio('x', { x: '10 to 1000' }))).toBe(505);
  });

  test('waits for refused inputs, through every result between', () => {
    const { evaluation } = run(AMPLIFIER, { R4: 'abc', V_ref: '' });
    expect(evaluation.outcomes.V_out).toEqual({ state: 'waiting', for: ['V_ref', 'R4'] });
    expect(evaluation.outcomes.CMRR).toEqual({ state: 'waiting', for: ['R4'] });
    expect(evaluation.outcomes).toMatchObject({ R_in: { state: 'known' } });
    expect(evaluation.limits.map((limit) => limit.state)).toEqual(['waiting', 'waiting', 'waiting']);
    expect(evaluation.notValid).toEqual({});
  });

  test('says why a result is unbounded, down to the terms that cancel', () => {
    expect(words(AMPLIFIER, 'CMRR', { R2: '15k', R4: '15k' })).toEqual({
      text: 'unbounded',
      words: 'unbounded: R1·R4 and R2·R3 cancel',
    });
  });

  test.each([
    ['1 / x', '0', 'unbounded: x is zero'],
    ['x / x', '0', 'no value: zero divided by zero'],
    ['sqrt(x)', '-1', 'no value: root of a negative number'],
    ['ln(x)', '-1', 'no value: logarithm of a negative number'],
    ['ln(x)', '0', 'unbounded: x is zero'],
    ['x', '0', '0'],
  ])('%s at %s is %s', (formula, x, expected) => {
    expect(words({ givens: { x: ['ratio', x] }, results: { y: formula } }, 'y').words).toBe(expected);
  });

  test.each([
    ['1 / x', '-1 to 1', 'unbounded'],
    ['1 / (x - 0.37)', '0 to 1', 'unbounded'],
    ['1 / (x - 0.37)^2', '0 to 1', '2.520 … unbounded'],
    ['1 / abs(x - 0.37)', '0 to 1', '1.587 … unbounded'],
    ['1 / x', '0 to 1', '1.000 … unbounded'],
    ['ln(x)', '0 to 1', 'unbounded … 0'],
    ['sqrt(x)', '-1 to 4', '0.000 … 2.000, not everywhere'],
    ['sqrt(-1 - x^2)', '-1 to 1', 'no value'],
    ['min(1 / x, 5)', '0 to 1', '1.000 … 5.000'],
    ['x^2', '-1 to 3', '0.000 … 9.000'],
  ])('%s over %s is %s', (formula, x, expected) => {
    expect(words({ givens: { x: ['ratio', x] }, results: { y: formula } }, 'y').text).toBe(expected);
  });

  test('finds what lies on both sides of a pole that a point hits', () => {
    // The middle of 1 Hz … 1 MHz is 1 kHz, where it is unbounded upwards only; at 1 MHz it is −20·log10(10⁶ − 1) dB.
    const sketch: Sketch = {
      givens: { f: ['frequency', '1 Hz to 1 MHz'] },
      results: { L: 'db(1 / (1 - (f / 1 kHz)^2))' },
    };
    expect(words(sketch, 'L').text).toBe('−120.0 dB … unbounded');
  });

  test('keeps an end that is small because the result is, over many decades', () => {
    const [lowest, highest] = ends(ratio('1 / x', { x: '1e-9 to 1e9' }));
    expectNear(lowest, 1e-9, 1e-12);
    expectNear(highest, 1e9, 1e-12);
  });

  test('finds a level that rises without end between two points', () => {
    const sketch: Sketch = {
      givens: { R4: ['resistance', '9.9 kΩ to 10.13 kΩ'] },
      results: { L: 'db(1 / (R4 / 10 kΩ - 1))' },
    };
    expect(words(sketch, 'L').text).toBe('37.72 dB … unbounded');
  });

  test('does not take a steep but bounded peak for unbounded', () => {
    // A resonance of quality 100 between two points: 1/√((1−x²)² + (x/100)²), highest 100.0012… near x = 1.
    const [, highest] = ends(ratio('1 / sqrt((1 - x^2)^2 + (x / 100)^2)', { x: '0.31 to 2' }));
    expectNear(highest, 100 / Math.sqrt(1 - 1 / (4 * 100 ** 2)), 1e-9);
  });

  test('passes a zero and a jump without taking either for a pole', () => {
    expect(ends(ratio('x - 0.37', { x: '0 to 1' }))).toEqual([-0.37, 0.63]);
    expect(ends(ratio('if(x < 0.37, -1, 1)', { x: '0 to 1' }))).toEqual([-1, 1]);
  });
});

describe('the search over ranges', () => {
  /** Dense brute force, written apart from the search. */
  function brute(f: (x: number, y: number) => number, n: number): readonly [number, number] {
    let [low, high] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
    for (let i = 0; i <= n; i++) {
      for (let j = 0; j <= n; j++) {
        const value = f(-1 + (3 * i) / n, (2 * j) / n);
        low = Math.min(low, value);
        high = Math.max(high, value);
      }
    }
    return [low, high];
  }

  test.each<[string, (x: number, y: number) => number]>([
    ['x * y', (x, y) => x * y],
    ['x^2 + y^2', (x, y) => x ** 2 + y ** 2],
    ['(x - 0.3)^2 + (y - 1.1)^2 + x * y', (x, y) => (x - 0.3) ** 2 + (y - 1.1) ** 2 + x * y],
    ['sin(3 * x) * cos(2 * y)', (x, y) => Math.sin(3 * x) * Math.cos(2 * y)],
    ['x / (1 + y) - y / (2 + x)', (x, y) => x / (1 + y) - y / (2 + x)],
    ['abs(x - y)', (x, y) => Math.abs(x - y)],
    ['exp(-(x - 0.5)^2 - (y - 1)^2)', (x, y) => Math.exp(-((x - 0.5) ** 2) - (y - 1) ** 2)],
  ])('%s over two ranges reaches at least as far as 1.4 million points', (formula, f) => {
    const [lowest, highest] = ends(ratio(formula, { x: '-1 to 2', y: '0 to 2' }));
    const [low, high] = brute(f, 1200);
    expect(lowest).toBeLessThanOrEqual(low + 1e-9);
    expect(highest).toBeGreaterThanOrEqual(high - 1e-9);
    // And no further than the grid's own spacing allows: slopes here are below 8 a unit.
    expect(low - lowest).toBeLessThan(0.02);
    expect(highest - high).toBeLessThan(0.02);
  });

  test('refines an extreme to 1e-9 of the span', () => {
    const [lowest] = ends(ratio('(x - 0.123456789)^2', { x: '-1 to 1' }));
    expect(lowest).toBeLessThan(1e-17);
    // A cosine: cos at π.
    expectNear(ends(ratio('cos(x)', { x: '2 to 4' }))[0], -1, 1e-15);
  });

  test('steps a frequency evenly in ratio, so that a low resonance is not missed', () => {
    // Highest of x/(1 + x²) is ½ at x = f/30 Hz = 1; even steps in value over 1 MHz would be 29 kHz apart.
    const [, highest] = ends(ratio('(f / 30 Hz) / (1 + (f / 30 Hz)^2)', {}, '1 Hz to 1 MHz'));
    expectNear(highest, 0.5, 1e-12);
  });

  test('takes four ranges at every corner', () => {
    const outcome = ratio('a * b - c / d', { a: '-1 to 2', b: '-3 to 5', c: '1 to 4', d: '2 to 8' });
    // 2·(−3) − 4/2 and 2·5 − 1/8.
    expect(ends(outcome)).toEqual([-8, 9.875]);
  });
});

describe('limits', () => {
  const window = (value: string, more: Partial<NonNullable<Sketch['limits']>[string]> = {}): Sketch => ({
    givens: { V_in: ['voltage', value], V_s: ['voltage', '10 V'] },
    results: { V_o: 'V_in' },
    limits: { window: { of: 'V_o', from: '0 V', to: 'V_s', ...more } },
  });

  test.each([
    ['5 V', {}, 'within', 5],
    ['0.9 V', {}, 'close', 0.9],
    ['1 V', {}, 'within', 1],
    ['9.95 V', { near: '100 mV' }, 'close', 0.05],
    ['9.8 V', { near: '100 mV' }, 'within', 0.2],
    ['10 V', {}, 'close', 0],
    ['10.5 V', {}, 'exceeded', -0.5],
    ['-0.25 V', {}, 'exceeded', -0.25],
    ['2 V to 8 V', {}, 'within', 2],
    ['2 V to 9.5 V', {}, 'close', 0.5],
    ['-1 V to 12 V', {}, 'exceeded', -2],
  ] as const)('%s inside 0 V to 10 V %j is %s', (value, more, state, margin) => {
    const limit = limitIn(window(value, more), 'window');
    expect(limit.state).toBe(state);
    expect(limit.held).toBe(state !== 'exceeded');
    expect(limit.heldNominal).toBe(limit.held);
    expect(limit.margin).toBeCloseTo(margin, 12);
  });

  test('of one side has no “close” without near', () => {
    const sketch: Sketch = {
      givens: { V_in: ['voltage', '9.99 V'] },
      results: { V_o: 'V_in' },
      limits: { a: { of: 'V_o', to: '10 V' }, b: { of: 'V_o', to: '10 V', near: '0.1 V' } },
    };
    expect(run(sketch).evaluation.limits.map((limit) => limit.state)).toEqual(['within', 'close']);
  });

  test('compares value and bound at the same point, not the worst of each', () => {
    // V_o = V_s/2 lies 1 V inside V_s − 1 V at V_s = 4 V and further in at 10 V, though its highest, 5 V, passes 3 V.
    const sketch: Sketch = {
      givens: { V_s: ['voltage', '4 V to 10 V'] },
      results: { V_o: 'V_s / 2' },
      limits: { top: { of: 'V_o', to: 'V_s - 1 V' } },
    };
    expect(limitIn(sketch, 'top')).toMatchObject({ state: 'within', value: 2, to: 3, margin: 1 });
  });

  test('finds a margin that is least inside a range', () => {
    const sketch: Sketch = {
      givens: { x: ['ratio', '0 to 3'] },
      results: { y: 'x * (2 - x)' },
      limits: { top: { of: 'y', to: '0.9' } },
    };
    const limit = limitIn(sketch, 'top');
    expect(limit.state).toBe('exceeded');
    expect(limit.value).toBeCloseTo(1, 9);
  });

  test('has no value where its quantity has none at some point, and is then not held', () => {
    const sketch: Sketch = {
      givens: { x: ['ratio', '-1 to 4'] },
      results: { y: 'sqrt(x)' },
      limits: { top: { of: 'y', to: '9' } },
    };
    expect(limitIn(sketch, 'top')).toMatchObject({ state: 'no-value', held: false });
    expect(limitIn(sketch, 'top', { x: '-1' })).toMatchObject({ state: 'no-value', value: null, margin: null });
    expect(limitIn(sketch, 'top', { x: '0 to 4' })).toMatchObject({ state: 'within', held: true });
  });

  test('is met by an unbounded value on its side', () => {
    const equal = { R2: '15k', R4: '15k' };
    expect(limitIn(AMPLIFIER, 'rejection', equal)).toMatchObject({
      state: 'within',
      value: null,
      unbounded: 1,
      from: 50,
      margin: null,
    });
    const sketch: Sketch = {
      givens: { x: ['ratio', '0 to 1'] },
      results: { y: '1 / x' },
      limits: { top: { of: 'y', to: '9' } },
    };
    expect(limitIn(sketch, 'top')).toMatchObject({ state: 'exceeded', unbounded: 1, value: null, margin: null });
  });

  test('forgives the rounding of doubles at a bound', () => {
    const sketch: Sketch = {
      givens: { a: ['voltage', '0.1 V'], b: ['voltage', '0.2 V'] },
      results: { V_o: 'a + b' },
      limits: { top: { of: 'V_o', to: '0.3 V' } },
    };
    expect(limitIn(sketch, 'top')).toMatchObject({ state: 'within', margin: 0 });
  });

  test('that is a broken stop takes the mark of good from every result that shares an input, a caution from none', () => {
    const { notValid } = run(AMPLIFIER, { V_s: '7 V' }).evaluation;
    expect(limitIn(AMPLIFIER, 'output', { V_s: '7 V' }).state).toBe('exceeded');
    expect(notValid.V_out).toEqual(['output']);
    expect(notValid.R_in).toEqual(['output']);
    const rejection = run(AMPLIFIER, { R4: '19.2 kΩ', V_d: '±1 V', V_cm: '0 V' }).evaluation;
    expect(rejection.limits.find((limit) => limit.name === 'rejection')?.state).toBe('exceeded');
    expect(rejection.notValid).toEqual({});
  });

  test('leaves results on other inputs alone', () => {
    const sketch: Sketch = {
      givens: { a: ['ratio', '2'], b: ['ratio', '3'] },
      results: { x: 'a', y: 'b', z: 'x + y' },
      limits: { low: { of: 'x', from: '5' } },
    };
    expect(run(sketch).evaluation.notValid).toEqual({ x: ['low'], z: ['low'] });
  });

  test('that asks for nominal parts only is judged over the ranges all the same, and says so', () => {
    const sketch = window('2 V to 12 V', { over: 'nominal' });
    const { linked, evaluation } = run(sketch);
    const [limit, model] = [evaluation.limits[0], linked.limits[0]?.model];
    if (!limit || !model) throw new Error('no limit');
    expect(limit).toMatchObject({ state: 'exceeded', held: false, heldNominal: false });
    expect(describeLimit(limit, model).state).toBe('exceeded, nominal only');
  });

  test('is worded with value and margin at its worst point', () => {
    const { linked, evaluation } = run(window('10.5 V'));
    const [limit, model] = [evaluation.limits[0], linked.limits[0]?.model];
    if (!limit || !model) throw new Error('no limit');
    const described = describeLimit(limit, model);
    expect(described.words.replaceAll('\u2009', ' ')).toBe('exceeded: 10.50 V, over by 500.0 mV');
    expect(described.bounds.replaceAll('\u2009', ' ')).toBe('0.00 … 10.00 V');
    expect(
      describeLimit({ ...limit, state: 'waiting', value: null, margin: null, waitingFor: ['V_in'] }, model).words,
    ).toBe('waiting for V_in');
  });
});

describe('describeOutcome', () => {
  test('shows a swinging voltage as its reading says', () => {
    const sketch: Sketch = {
      givens: { V_in: ['voltage', '1 V', { reading: 'rms' }] },
      results: { a: ['V_in', { reading: 'rms' }], b: ['V_in', { reading: 'peak-to-peak', unit: 'mV' }], c: 'V_in' },
    };
    expect(words(sketch, 'a').text).toBe('1.000 V');
    expect(words(sketch, 'b').text).toBe('2828 mV');
    expect(words(sketch, 'c').text).toBe('1.414 V');
  });

  test('writes a dimension that has no name in its coherent unit', () => {
    const sketch: Sketch = {
      givens: { V_in: ['voltage', '2 V'], R: ['resistance', '3 Ω'] },
      results: { x: 'V_in * R' },
    };
    expect(words(sketch, 'x').text).toBe('6.000 V·Ω');
  });

  test('names what a result waits for', () => {
    expect(words(AMPLIFIER, 'V_plus', { R3: 'x', R4: '', V_ref: '?' }).words).toBe('waiting for V_ref, R3 and R4');
  });
});

describe('evaluateInOrder', () => {
  const divider: Sketch = {
    id: 'divider',
    title: 'Divider',
    givens: { V_s: ['voltage', '10 V'], R1: ['resistance', '10 kΩ'], R2: ['resistance', '10 kΩ'] },
    results: { V_mid: 'V_s * R2 / (R1 + R2)', k: 'V_s / (V_s - 10 V)' },
    limits: { ceiling: { of: 'V_mid', to: '6 V' } },
  };
  const follower: Sketch = {
    id: 'follower',
    title: 'Follower',
    givens: {
      V_in: ['voltage', '1 V', { from: { calculator: 'divider', name: 'V_mid' }, max: '20 V' }],
      R: ['resistance', '1 kΩ', { from: { calculator: 'divider', name: 'R2' } }],
      k: ['ratio', '1', { from: { calculator: 'divider', name: 'k' } }],
    },
    results: { I: 'V_in / R', n: 'k' },
  };
  const page = [linkedOf(divider), linkedOf(follower)];
  const follow = (texts: Readonly<Record<string, Texts>>) => {
    return evaluateInOrder(page, texts).get('follower') as Evaluated;
  };

  test('hands results and inputs of an earlier calculator down, until the reader types over them', () => {
    expectNear(middle(follow({}).evaluation.outcomes.I), 5e-4, 1e-12);
    expect(follow({}).inputs.fields.get('V_in')).toMatchObject({ origin: 'earlier', text: '5 V' });
    expectNear(middle(follow({ follower: { V_in: '2 V' } }).evaluation.outcomes.I), 2e-4, 1e-12);
  });

  test('hands a range down as a range', () => {
    const { evaluation } = follow({ divider: { V_s: '8 V to 10 V' } });
    expect(ends(evaluation.outcomes.I)).toEqual([4e-4, 5e-4]);
  });

  test('waits where the earlier calculator waits or has no number', () => {
    const { inputs, evaluation } = follow({ divider: { R2: 'x' } });
    expect(evaluation.outcomes.I).toEqual({ state: 'waiting', for: ['V_in', 'R'] });
    expect(inputs.fields.get('V_in')).toMatchObject({ state: 'waiting' });
    expect(follow({}).evaluation.outcomes.n).toEqual({ state: 'waiting', for: ['k'] });
  });

  test('takes the mark of good from what stands on a broken limit further up', () => {
    const { evaluation } = follow({ divider: { V_s: '14 V' } });
    expect(evaluation.notValid).toMatchObject({ I: ['Divider: ceiling'] });
    expect(
      follow({ divider: { V_s: '14 V' }, follower: { V_in: '1 V', R: '1k' } }).evaluation.notValid.I,
    ).toBeUndefined();
  });

  test('refuses a value from above that is outside the limits of entry', () => {
    expect(follow({ divider: { V_s: '50 V' } }).inputs.refused).toEqual(['V_in']);
  });
});

describe('findCure', () => {
  /** Types the cure in and gives the state of the limit then. */
  function cured(sketch: Sketch, limit: string, texts: Texts = {}) {
    const { linked, inputs } = run(sketch, texts);
    const cure = findCure(linked, inputs, limit);
    if (!cure) return null;
    return { ...cure, after: limitIn(sketch, limit, { ...texts, [cure.name]: cure.to }).state };
  }

  test.each<[string, Texts]>([
    ['output', { V_s: '7 V' }],
    ['output', { V_d: '±4 V' }],
    ['output', { V_ref: '1 V', V_cm: '0 V' }],
    ['output', { R2: '100k', R4: '100k' }],
    ['input range', { V_cm: '±9 V' }],
    ['input range', { V_cm: '-8 V', V_d: '0 V' }],
    ['rejection', { R4: '20 kΩ' }],
  ])('mends %s at %j, as typed by a reader', (limit, texts) => {
    expect(limitIn(AMPLIFIER, limit, texts).state).not.toBe('within');
    const cure = cured(AMPLIFIER, limit, texts);
    expect(cure?.after).toBe('within');
    expect(cure?.state).toBe('within');
  });

  test('changes the input that needs the least, to a tidy value', () => {
    // The supply needs 6.993 V + 1.5 V + 0.1 V = 8.593 V, 7 % more; the reference would need 13 % less.
    expect(cured(AMPLIFIER, 'output', { V_s: '8 V', V_cm: '0 V' })).toMatchObject({
      name: 'V_s',
      to: '8.6 V',
      was: '8 V',
      breaks: [],
      after: 'within',
    });
  });

  test('draws in the end of a range that offends and leaves the other', () => {
    const sketch: Sketch = {
      givens: { V_in: ['voltage', '-1 V to 12 V'] },
      results: { V_o: 'V_in' },
      limits: { top: { of: 'V_o', to: '10 V' } },
    };
    expect(cured(sketch, 'top')).toMatchObject({ name: 'V_in', to: '−1 V to 10 V', was: '−1 V to 12 V' });
  });

  test('draws both ends in where both offend', () => {
    const sketch: Sketch = {
      givens: { V_in: ['voltage', '±12 V'] },
      results: { V_o: 'V_in' },
      limits: { window: { of: 'V_o', from: '-10 V', to: '10 V', near: '0 V' } },
    };
    expect(cured(sketch, 'window')).toMatchObject({ to: '−10 V to 10 V', after: 'within' });
  });

  test('stays inside the limits of entry', () => {
    const sketch: Sketch = {
      givens: { V_s: ['voltage', '8 V', { max: '8.5 V' }] },
      results: { V_o: 'V_s / 2' },
      limits: { least: { of: 'V_o', from: '5 V' } },
    };
    expect(cured(sketch, 'least')).toBeNull();
  });

  test('takes another entry of a list', () => {
    const sketch: Sketch = {
      givens: { n: ['count', '2', { options: { '2': 'two', '4': 'four', '8': 'eight' } }] },
      results: { m: '3 * n' },
      limits: { least: { of: 'm', from: '10' } },
    };
    expect(cured(sketch, 'least')).toMatchObject({ name: 'n', to: '4', after: 'within' });
  });

  test('leads away from zero', () => {
    const sketch: Sketch = {
      givens: { V_in: ['voltage', '0 V', { min: '-5 V', max: '5 V' }] },
      results: { V_o: 'V_in' },
      limits: { least: { of: 'V_o', from: '2 V' } },
    };
    expect(cured(sketch, 'least')).toMatchObject({ to: '2 V', after: 'within' });
  });

  test('prefers a change that breaks no other limit, and tells of one that does', () => {
    const sketch: Sketch = {
      givens: { a: ['ratio', '5'], b: ['ratio', '100'] },
      results: { x: 'a * b' },
      limits: { least: { of: 'x', from: '550' }, small: { of: 'a', to: '5.01' } },
    };
    expect(cured(sketch, 'least')).toMatchObject({ name: 'b', to: '110', breaks: [] });
    const alone: Sketch = {
      givens: { a: ['ratio', '5'] },
      results: { x: 'a * 100' },
      limits: { least: { of: 'x', from: '550' }, small: { of: 'a', to: '5.01' } },
    };
    expect(cured(alone, 'least')).toMatchObject({ name: 'a', to: '5.5', breaks: ['small'] });
  });

  test('has nothing to say of a limit that is within, waits or is not there', () => {
    const { linked, inputs } = run(AMPLIFIER, { V_d: '±1 V', V_cm: '0 V' });
    expect(findCure(linked, inputs, 'output')).toBeNull();
    expect(findCure(linked, inputs, 'nobody')).toBeNull();
    expect(findCure(linked, readInputs(linked.model, { R1: 'x' }), 'output')).toBeNull();
  });
});

describe('explainResult', () => {
  test('shows the formula, the same with numbers and units, and where each comes from', () => {
    const { linked, inputs, evaluation } = run(AMPLIFIER, { R3: '4k7' });
    const explained = explainResult(linked, inputs, evaluation, 'V_plus');
    expect(explained?.formulaText).toBe('(R4·V_2 + R3·V_ref) / (R3 + R4)');
    expect(explained?.withNumbersText.replaceAll('\u2009', ' ')).toBe(
      '(18.70 kΩ·0 V + 4.700 kΩ·4.500 V) / (4.700 kΩ + 18.70 kΩ)',
    );
    expect(explained?.atMiddle).toBe(true);
    expect(explained?.sources.map(({ name, from, text }) => [name, from, text.replaceAll('\u2009', ' ')])).toEqual([
      ['R4', 'recipe', '18.70 kΩ'],
      ['V_2', 'worked-out', '−3.000 to 3.000 V'],
      ['R3', 'typed', '4.700 kΩ'],
      ['V_ref', 'recipe', '4.500 V'],
    ]);
  });

  test('keeps the name of an input that was refused', () => {
    const { linked, inputs, evaluation } = run(AMPLIFIER, { R3: 'x' });
    const explained = explainResult(linked, inputs, evaluation, 'R_in');
    expect(explained?.withNumbersText.replaceAll('\u2009', ' ')).toBe('15.00 kΩ + R3');
    expect(explained?.outcome.words).toBe('waiting for R3');
    expect(explainResult(linked, inputs, evaluation, 'R3')).toBeNull();
  });
});

describe('toRunJson', () => {
  test('writes names, numbers and nulls as section 9 of the recipe language has them', () => {
    const { linked, inputs, evaluation } = run(AMPLIFIER, { R2: '15k', R4: '15k', V_cm: '0 V', R3: '15 kΩ' });
    const json = toRunJson(linked.model, inputs, evaluation);
    expect(json.inputs.R1).toEqual({ si: 15e3, text: '15 kΩ' });
    expect(json.inputs.V_d).toEqual({ si: 0, low: -2, high: 2, text: '−2 V to 2 V' });
    expect(json.results.V_out).toEqual({ si: 4.5, low: 2.5, high: 6.5, unit: 'V', text: '2.500 … 6.500\u2009V' });
    expect(json.results.CMRR).toEqual({
      si: null,
      unit: 'dB',
      text: 'unbounded',
      problem: { code: 'unbounded', sign: 1, message: 'unbounded: R1·R4 and R2·R3 cancel' },
    });
    expect(json.limits[0]).toEqual({
      name: 'output',
      level: 'stop',
      state: 'within',
      held: true,
      held_nominal: true,
      value: 6.5,
      from: 0.05,
      to: 7.5,
      margin: 1,
    });
    expect(json.limits[2]).toMatchObject({ state: 'within', value: null, from: 50, to: null, margin: null });
    expect(JSON.parse(JSON.stringify(json))).toEqual(json);
  });

  test('writes a level beyond 200 dB in words and waiting as no value', () => {
    const sketch: Sketch = { givens: { x: ['ratio', '1e-12'] }, results: { L: 'db(1 / x)' } };
    const good = run(sketch);
    expect(toRunJson(good.linked.model, good.inputs, good.evaluation).results.L).toMatchObject({
      si: 240,
      text: 'above 200\u2009dB',
    });
    const bad = run(sketch, { x: 'x' });
    const json = toRunJson(bad.linked.model, bad.inputs, bad.evaluation);
    expect(json.inputs.x).toEqual({ si: null, text: 'x' });
    expect(json.results.L).toMatchObject({ si: null, problem: { code: 'no-value', message: 'waiting for x' } });
  });
});
