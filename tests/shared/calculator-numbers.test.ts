import { describe, expect, test } from 'vitest';
import { evaluate, readInputs, runExample } from '#calculator';
import { linkedOf, type Sketch } from '../calculator-model.ts';
import { expectNear } from '../expect-near.ts';
import reference from '../reference/amplifier-cases.json' with { type: 'json' };

/** Four resistors round one op amp: R1 from the inverting input, R2 feedback, R3 from the other input, R4 to the reference. */
const DIFFERENCE: Sketch = {
  givens: {
    R1: ['resistance', '10 kΩ'],
    R2: ['resistance', '10 kΩ'],
    R3: ['resistance', '10 kΩ'],
    R4: ['resistance', '10 kΩ'],
    v_minus: ['voltage', '0 V'],
    v_plus: ['voltage', '0 V'],
    v_ref: ['voltage', '0 V'],
  },
  results: {
    cmrr_db: 'db(gain_dm / gain_cm)',
    vout: 'v_node * (1 + R2 / R1) - v_minus * R2 / R1',
    v_node: '(v_plus * R4 + v_ref * R3) / (R3 + R4)',
    gain_cm: '(R1 * R4 - R2 * R3) / (R1 * (R3 + R4))',
    gain_dm: '((1 + R2 / R1) * R4 / (R3 + R4) + R2 / R1) / 2',
    gain_ref: 'R3 / (R3 + R4) * (1 + R2 / R1)',
  },
};

/** The same with the non-inverting input fed directly, its divider forgotten. */
const NO_DIVIDER: Sketch = {
  givens: {
    R1: ['resistance', '1 kΩ'],
    R2: ['resistance', '1 kΩ'],
    v_minus: ['voltage', '0 V'],
    v_plus: ['voltage', '0 V'],
  },
  results: {
    gain_plus: '1 + R2 / R1',
    gain_minus: '-R2 / R1',
    vout: 'gain_plus * v_plus + gain_minus * v_minus',
    intended_vout: 'R2 / R1 * (v_plus - v_minus)',
    error: 'vout - intended_vout',
  },
};

const INVERTING_AVERAGE: Sketch = {
  givens: {
    R1: ['resistance', '1 kΩ'],
    R2: ['resistance', '1 kΩ'],
    R3: ['resistance', '1 kΩ'],
    R4: ['resistance', '1 kΩ'],
    Rf: ['resistance', '1 kΩ'],
    v1: ['voltage', '0 V'],
    v2: ['voltage', '0 V'],
    v3: ['voltage', '0 V'],
    v4: ['voltage', '0 V'],
  },
  results: {
    vout: '-Rf * (v1 / R1 + v2 / R2 + v3 / R3 + v4 / R4)',
    noise_gain: '1 + Rf / parallel(R1, R2, R3, R4)',
  },
};

const SUM_OF_TWO: Sketch = {
  givens: {
    R1: ['resistance', '1 kΩ'],
    R2: ['resistance', '1 kΩ'],
    RA_to_gnd: ['resistance', '1 kΩ'],
    RB_feedback: ['resistance', '1 kΩ'],
    v1: ['voltage', '0 V'],
    v2: ['voltage', '0 V'],
  },
  results: {
    v_node: '(v1 / R1 + v2 / R2) * parallel(R1, R2)',
    vout: '(1 + RB_feedback / RA_to_gnd) * v_node',
    weights_1: '(1 + RB_feedback / RA_to_gnd) * R2 / (R1 + R2)',
  },
};

const RAIL_SPLITTER: Sketch = {
  givens: { R: ['resistance', '1 kΩ'], vs: ['voltage', '1 V'], i: ['current', '0 A'] },
  results: { r_th: 'parallel(R, R)', v_mid: 'vs / 2 - i * r_th' },
};

const REFERENCE_DIVIDER: Sketch = {
  givens: {
    Ra: ['resistance', '1 kΩ'],
    Rb: ['resistance', '1 kΩ'],
    RL: ['resistance', '1 kΩ'],
    vref: ['voltage', '1 V'],
  },
  results: {
    v_open: 'vref * Rb / (Ra + Rb)',
    r_th: 'parallel(Ra, Rb)',
    v_loaded: 'v_open * RL / (RL + r_th)',
    err_pct: '100 * (v_loaded / v_open - 1)',
  },
};

const INVERTING_SHIFT: Sketch = {
  givens: {
    R1: ['resistance', '1 kΩ'],
    R2: ['resistance', '1 kΩ'],
    Ra_to_Vs: ['resistance', '1 kΩ'],
    Rb_to_gnd: ['resistance', '1 kΩ'],
    vs: ['voltage', '1 V'],
    vin: ['voltage', '0 V'],
  },
  results: {
    v_plus_node: 'vs * Rb_to_gnd / (Ra_to_Vs + Rb_to_gnd)',
    vout: 'v_plus_node * (1 + R2 / R1) - vin * R2 / R1',
  },
};

type Case = (typeof reference.cases)[number];

const cases: Readonly<Record<string, Case>> = Object.fromEntries(reference.cases.map((one) => [one.id, one]));

/** Evaluates a sketch with the numbers of a case typed in, and anything else named. */
function outcomesOf(sketch: Sketch, id: string, typed: Readonly<Record<string, string>> = {}) {
  const linked = linkedOf(sketch);
  const given = Object.entries(cases[id]?.inputs ?? {}).map(([name, value]) => {
    const unit = sketch.givens[name]?.[0] === 'resistance' ? 'Ω' : sketch.givens[name]?.[0] === 'current' ? 'A' : 'V';
    return [name, `${value} ${unit}`];
  });
  return evaluate(linked, readInputs(linked.model, { ...Object.fromEntries(given), ...typed })).outcomes;
}

function middle(outcomes: ReturnType<typeof outcomesOf>, name: string): number {
  const outcome = outcomes[name];
  if (outcome?.state !== 'known' || outcome.middle.kind !== 'finite') throw new Error(`${name} has no value`);
  return outcome.middle.si;
}

function ends(outcomes: ReturnType<typeof outcomesOf>, name: string): readonly [number, number] {
  const outcome = outcomes[name];
  const over = outcome?.state === 'known' ? outcome.over : undefined;
  if (over?.lowest.kind !== 'finite' || over.highest.kind !== 'finite') throw new Error(`${name} has no range`);
  return [over.lowest.si, over.highest.si];
}

describe('evaluate against tests/reference/amplifier-cases.json, whose sources stand beside each case', () => {
  test.each([
    ['b3', NO_DIVIDER, ['vout', 'gain_plus', 'gain_minus', 'intended_vout', 'error']],
    ['c3', DIFFERENCE, ['vout', 'gain_dm', 'gain_ref']],
    ['c4', DIFFERENCE, ['vout', 'gain_dm', 'gain_cm', 'gain_ref', 'cmrr_db']],
    ['d11', DIFFERENCE, ['gain_dm', 'gain_cm', 'gain_ref', 'cmrr_db']],
    ['n3', INVERTING_AVERAGE, ['vout', 'noise_gain']],
    ['n8', SUM_OF_TWO, ['vout', 'v_node', 'weights_1']],
    ['o1', RAIL_SPLITTER, ['v_mid', 'r_th']],
    ['p1', REFERENCE_DIVIDER, ['v_open', 'r_th', 'v_loaded', 'err_pct']],
    ['h2', INVERTING_SHIFT, ['v_plus_node']],
  ] as const)('%s gives the numbers of its source', (id, sketch, names) => {
    const outcomes = outcomesOf(sketch, id);
    const expected: Readonly<Record<string, number | undefined>> = cases[id]?.expected ?? {};
    for (const name of names) expectNear(middle(outcomes, name), expected[name] ?? Number.NaN, reference.relative);
  });

  test('h2 moves ±2 V to what its source gives at −2 V and at 2 V', () => {
    const [lowest, highest] = ends(outcomesOf(INVERTING_SHIFT, 'h2', { vin: '±2 V' }), 'vout');
    const { vout_at_p2, vout_at_m2 } = cases.h2?.expected ?? {};
    expectNear(lowest, vout_at_p2 ?? Number.NaN, reference.relative);
    expectNear(highest, vout_at_m2 ?? Number.NaN, reference.relative);
  });

  test('h4 and h13, the non-inverting shifts, span what their sources give', () => {
    const h4 = { v_plus: '±5 V', v_minus: '0 V', v_ref: '2.5 V' };
    const swapped = { R1: '10 kΩ', R2: '30 kΩ', R3: '10 kΩ', R4: '30 kΩ', v_plus: '±0.8 V', v_ref: '2.5 V' };
    const outcomes = outcomesOf(DIFFERENCE, 'h4', h4);
    const others = outcomesOf(DIFFERENCE, 'h13', swapped);
    for (const [id, [low, high]] of [
      ['h4', ends(outcomes, 'vout')],
      ['h13', ends(others, 'vout')],
    ] as const) {
      expectNear(low, cases[id]?.expected.vout_lo ?? Number.NaN, reference.relative);
      expectNear(high, cases[id]?.expected.vout_hi ?? Number.NaN, reference.relative);
    }
    const [atLow, atHigh] = ends(outcomes, 'v_node');
    expectNear(atLow, cases.h4?.expected.v_plus_at_m5 ?? Number.NaN, reference.relative);
    expectNear(atHigh, cases.h4?.expected.v_plus_at_p5 ?? Number.NaN, reference.relative);
  });

  test('c9: a reference from a bare divider makes R4 its Thevenin resistance larger', () => {
    const outcomes = outcomesOf(DIFFERENCE, '', {
      R1: '10k',
      R2: '10k',
      R3: '10k',
      R4: '15k',
      v_minus: '1 V',
      v_plus: '1 V',
      v_ref: '2.5 V',
    });
    const { vout, gain_cm } = cases.c9?.expected ?? {};
    expectNear(middle(outcomes, 'vout'), vout ?? Number.NaN, reference.relative);
    expectNear(middle(outcomes, 'gain_cm'), gain_cm ?? Number.NaN, reference.relative);
  });
});

describe('runExample', () => {
  /** The worked example of the recipe language's own page: 4.5 V ± 2 V · 1.24667; own arithmetic stands in the recipe. */
  const gain: Sketch = {
    ...DIFFERENCE,
    givens: {
      R1: ['resistance', '15 kΩ'],
      R2: ['resistance', '18.7 kΩ'],
      R3: ['resistance', '15 kΩ'],
      R4: ['resistance', '18.7 kΩ'],
      V_d: ['voltage', '±2 V'],
      V_cm: ['voltage', '±2 V'],
      v_ref: ['voltage', '4.5 V'],
    },
    results: { ...DIFFERENCE.results, v_minus: 'V_cm - V_d / 2', v_plus: 'V_cm + V_d / 2' },
    limits: { 'input range': { of: 'v_node', from: '0 V', to: '7.5 V', near: '100 mV' } },
    examples: [
      {
        sets: { V_cm: '0 V' },
        numbers: { vout: '2.00667 V to 6.99333 V' },
        limits: { 'input range': 'within' },
      },
      // Analog Devices, MT-068: one of four equal resistors 1 % off leaves 46 dB (reference case d26: 46.0855 dB).
      { sets: { R1: '10k', R2: '10k', R3: '10k', R4: '10.1 kΩ' }, numbers: { cmrr_db: ['46 dB', '0.2 dB'] } },
      { sets: { V_cm: '0 V' }, numbers: { vout: '2.02 V to 6.99333 V' } },
      { sets: { V_cm: '0 V' }, numbers: { vout: '4.5 V' } },
      { sets: { v_ref: '1 V' }, limits: { 'input range': 'within' } },
      { sets: { 'R1.tolerance': '1 %' }, numbers: { cmrr_db: ['34 dB', '0.2 dB'] }, at: 'worst low' },
      { sets: {} },
      { sets: { R1: '10k', R2: '10k', R3: '10k', R4: '10.1 kΩ' }, numbers: { cmrr_db: ['46.09 dB', '0.01 dB'] } },
    ],
  };
  const linked = linkedOf(gain);
  const runs = linked.model.examples.map((example) => runExample(linked, example));

  test('passes where numbers lie within their allowance and limits stand as expected', () => {
    expect(runs[0]?.passed).toBe(true);
    expect(runs[0]?.rows.map((row) => [row.what, row.expected, row.passed])).toEqual([
      ['vout', '2.00667 V to 6.99333 V', true],
      ['input range', 'within', true],
    ]);
    expect(runs[1]?.passed).toBe(true);
    expect(runs[1]?.rows[0]?.got).toBe('46.0855\u2009dB');
    expect(runs[1]?.rows[0]?.within).toBe('±0.2\u2009dB');
    expect(runs[7]?.rows[0]?.within).toBe('±0.01\u2009dB');
  });

  test('fails where one end of a range, or a single number for a range, is off', () => {
    expect(runs[2]?.passed).toBe(false);
    expect(runs[2]?.rows[0]?.got).toBe('2.00667 … 6.99333\u2009V');
    expect(runs[3]?.passed).toBe(false);
  });

  test('fails with the state that a limit really has', () => {
    expect(runs[4]?.passed).toBe(false);
    expect(runs[4]?.rows[0]?.got).toMatch(/^exceeded: /);
  });

  test('says of a worst case that it is not available yet, and never passes it', () => {
    expect(runs[5]?.rows[0]).toMatchObject({ passed: false, code: 'not-available-yet' });
    expect(runs[5]?.passed).toBe(false);
  });

  test('does not pass an example that expects nothing', () => {
    expect(runs[6]).toEqual({ passed: false, rows: [] });
  });
});
