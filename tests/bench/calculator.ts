import { evaluate, findCure, readInputs } from '#calculator';
import { linkedOf, type Sketch } from '../calculator-model.ts';
import type { Row } from './run.ts';

/** A page with ten results on two ranges, four of them through others, and three limits. */
const PAGE: Sketch = {
  givens: {
    V_d: ['voltage', '±2 V', { min: '-20 V', max: '20 V' }],
    V_cm: ['voltage', '±2 V', { min: '-20 V', max: '20 V' }],
    V_ref: ['voltage', '4.5 V', { min: '0 V', max: '30 V' }],
    V_s: ['voltage', '8 V', { min: '5 V', max: '30 V' }],
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
    I_1: '(V_1 - V_plus) / R1',
    I_2: '(V_2 - V_plus) / R3',
    I_load: '(V_plus - V_out) / R2',
    P_1: 'I_1 * (V_1 - V_plus)',
    P_2: 'I_2 * (V_2 - V_plus)',
    P_all: 'P_1 + P_2 + I_load * (V_plus - V_out)',
  },
  limits: {
    output: { of: 'V_out', from: '50 mV', to: 'V_s - 1.5 V', near: '100 mV' },
    'input range': { of: 'V_plus', from: '0 V', to: 'V_s - 1.5 V', near: '100 mV' },
    heat: { of: 'P_all', to: '10 mW', level: 'caution' },
  },
};

/** Median milliseconds of a call; the first fifth is left to the compiler of the engine. */
function medianTime(rounds: number, call: (round: number) => void): number {
  const times: number[] = [];
  for (let round = 0; round < rounds; round++) {
    const start = performance.now();
    call(round);
    if (round >= rounds / 5) times.push(performance.now() - start);
  }
  return times.sort((a, b) => a - b)[times.length >> 1] ?? Number.NaN;
}

/** Measures what a keystroke costs on a page of ten results and two ranges, and the search for a cure. */
export async function measure(): Promise<readonly Row[]> {
  const linked = linkedOf(PAGE);
  const keystroke = medianTime(300, (round) => {
    evaluate(linked, readInputs(linked.model, { R1: `${15 + round / 1000} kΩ` }));
  });
  const inputs = readInputs(linked.model, {});
  const cure = medianTime(20, () => {
    if (findCure(linked, inputs, 'output') === null) throw new Error('the broken limit has a cure');
  });
  return [
    {
      name: 'a keystroke: 10 results and 3 limits over 2 ranges',
      value: keystroke,
      unit: 'ms',
      goal: '≤ 4 ms',
      met: keystroke <= 4,
    },
    {
      name: 'the nearest cure of a broken limit, over 8 inputs',
      value: cure,
      unit: 'ms',
      goal: '≤ 50 ms',
      met: cure <= 50,
    },
  ];
}
