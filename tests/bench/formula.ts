import { all, create } from 'mathjs';
import { checkFormula, linkBlock, parseFormula } from '#formula';
import { KINDS } from '#quantity';
import { span } from '#text';
import type { Row } from './run.ts';

const SAMPLES = 10_000;
const NAMES = ['R1', 'R2', 'R3', 'R4'];

/** Common-mode rejection of a four-resistor difference amplifier: half the sum of its two gains over their difference. */
const RATIO = '(R4 * R1 + 2 * R2 * R4 + R2 * R3) / (2 * (R1 * R4 - R2 * R3))';

/**
 * Times of the fastest pass in milliseconds: the one that other work on the machine disturbed least. The contenders take
 * turns, so that all meet the same machine.
 */
function fastestTimes(passes: readonly (() => void)[], rounds: number): number[] {
  const fastest = passes.map(() => Number.POSITIVE_INFINITY);
  for (let round = 0; round < rounds; round++) {
    for (const [i, pass] of passes.entries()) {
      const start = performance.now();
      pass();
      fastest[i] = Math.min(fastest[i] ?? 0, performance.now() - start);
    }
  }
  return fastest;
}

/** Resistances within 1 % of 10 kΩ, spread by the golden ratio, so that every run measures the same numbers. */
function resistances(): Float64Array[] {
  return NAMES.map((_, k) =>
    Float64Array.from({ length: SAMPLES }, (_, i) => 1e4 * (0.99 + 0.02 * ((i * (k + 1) * 0.618) % 1))),
  );
}

function byHand(columns: readonly Float64Array[], out: Float64Array): () => void {
  const [r1s, r2s, r3s, r4s] = columns;
  if (!r1s || !r2s || !r3s || !r4s) throw new Error('four columns are needed');
  return () => {
    for (let i = 0; i < SAMPLES; i++) {
      const r1 = r1s[i] as number;
      const r2 = r2s[i] as number;
      const r3 = r3s[i] as number;
      const r4 = r4s[i] as number;
      out[i] = 20 * Math.log10(Math.abs((r4 * r1 + 2 * r2 * r4 + r2 * r3) / (2 * (r1 * r4 - r2 * r3))));
    }
  };
}

function byProgram(columns: readonly Float64Array[], out: Float64Array): () => void {
  const text = `db(${RATIO})`;
  const { expr } = parseFormula(text, span(0, text.length), new Set(NAMES));
  const { checked } = checkFormula(expr, { typeOf: () => KINDS.resistance.dimension, names: NAMES });
  if (checked === null) throw new Error('the formula is refused');
  const program = linkBlock([{ name: 'cmrr', formula: checked }], (name) => NAMES.indexOf(name));
  return () => program.run(columns, [out], SAMPLES);
}

function byMathjs(columns: readonly Float64Array[], out: Float64Array): () => void {
  const code = create(all as NonNullable<typeof all>).compile(`20 * log10(abs(${RATIO}))`);
  const scope = new Map<string, number>();
  return () => {
    for (let i = 0; i < SAMPLES; i++) {
      for (const [k, name] of NAMES.entries()) scope.set(name, columns[k]?.[i] ?? 0);
      out[i] = code.evaluate(scope) as number;
    }
  };
}

/** The CMRR formula in dB over 10,000 samples: our block program against plain JavaScript and against mathjs. */
export async function measure(): Promise<readonly Row[]> {
  const columns = resistances();
  const outputs = [0, 1, 2].map(() => new Float64Array(SAMPLES)) as [Float64Array, Float64Array, Float64Array];
  const [hand, program, mathjs] = outputs;
  const fast = [byHand(columns, hand), byProgram(columns, program)];
  const [handTime = 0, programTime = 0] = fastestTimes(fast, 400);
  const [mathjsTime = 0] = fastestTimes([byMathjs(columns, mathjs)], 20);
  for (const [i, expected] of hand.entries()) {
    const off = Math.max(Math.abs((program[i] ?? 0) - expected), Math.abs((mathjs[i] ?? 0) - expected));
    if (!(off <= 1e-9 * Math.abs(expected)) && Number.isFinite(expected))
      throw new Error(`sample ${i} differs by ${off}`);
  }
  const slower = programTime / handTime;
  const faster = mathjsTime / programTime;
  return [
    {
      name: 'CMRR in dB over 10,000 samples, against the same by hand',
      value: Number(slower.toFixed(2)),
      unit: '× the time',
      goal: '≤ 2.2',
      met: slower <= 2.2,
    },
    {
      name: 'CMRR in dB over 10,000 samples, against mathjs',
      value: Number(faster.toFixed(1)),
      unit: '× faster',
      goal: '≥ 5',
      met: faster >= 5,
    },
  ];
}
