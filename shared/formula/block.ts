import { assertNever } from '#text';
import { FUNCTIONS } from './functions.ts';
import {
  addBlock,
  divideBlock,
  type Kernel,
  multiplyBlock,
  negateBlock,
  oneBlock,
  subtractBlock,
  threeBlock,
  twoBlock,
} from './kernels.ts';
import { COMPARISONS, choice, conjunction, disjunction, negation, power, powerBy } from './operators.ts';
import type { CheckedExpr } from './syntax.ts';

/** Several formulas as one straight-line program over columns of samples. */
export interface BlockProgram {
  /**
   * Shape: `inputs[slot]` and `outputs[i]` hold at least `count` numbers; outputs stand in the order of the definitions
   * and share no memory with the inputs. NaN and infinities may stand in the outputs.
   */
  run(inputs: readonly Float64Array[], outputs: readonly Float64Array[], count: number): void;
}

/** Numbers a block: some registers of this length fit into the nearest cache, and what a block costs beside its numbers stays small (measured: 256 to 2,048 are alike). */
const BLOCK = 512;

/** One thing that is computed, whatever its operands. `key` tells it from all others. */
interface Operation {
  readonly key: string;
  readonly kernel: Kernel;
  /** The same on single numbers, for constants. */
  readonly real: (a: number, b: number, c: number) => number;
  readonly commutes?: true;
}

/** A value of the program by its number: each different one is computed once. */
type Value =
  | { readonly kind: 'constant'; readonly value: number }
  | { readonly kind: 'column'; readonly slot: number }
  | { readonly kind: 'computed'; readonly operation: Operation; readonly operands: readonly number[] };

const ADD: Operation = { key: '+', kernel: addBlock, real: (a, b) => a + b, commutes: true };
const MULTIPLY: Operation = { key: '*', kernel: multiplyBlock, real: (a, b) => a * b, commutes: true };
const OPERATIONS = {
  '+': ADD,
  '-': { key: '-', kernel: subtractBlock, real: (a, b) => a - b },
  '*': MULTIPLY,
  '/': { key: '/', kernel: divideBlock, real: (a, b) => a / b },
  '^': { key: '^', kernel: twoBlock(power), real: power },
} as const satisfies Record<string, Operation>;
const NEGATE: Operation = { key: 'negate', kernel: negateBlock, real: (a) => -a };
const NOT: Operation = { key: 'not', kernel: oneBlock(negation), real: negation };
const AND: Operation = { key: 'and', kernel: twoBlock(conjunction), real: conjunction, commutes: true };
const OR: Operation = { key: 'or', kernel: twoBlock(disjunction), real: disjunction, commutes: true };
const IF: Operation = { key: 'if', kernel: threeBlock(choice), real: choice };

function single(key: string, real: (x: number) => number): Operation {
  return { key, kernel: oneBlock(real), real: (a) => real(a) };
}

function pair(key: string, real: (a: number, b: number) => number): Operation {
  // Exactly two: Math.min would look at a third.
  return { key, kernel: twoBlock(real), real: (a, b) => real(a, b) };
}

/** Numbers the values of formulas, folding constants and finding what is there already. */
class Values {
  readonly list: Value[] = [];
  readonly #numbers = new Map<string, number>();

  constant(value: number): number {
    // -0 and 0 are different values, and String() writes both as 0.
    return this.#numbered(`c${Object.is(value, -0) ? '-0' : value}`, { kind: 'constant', value });
  }

  column(slot: number): number {
    return this.#numbered(`s${slot}`, { kind: 'column', slot });
  }

  compute(operation: Operation, operands: readonly number[]): number {
    const known = operands.map((operand) => this.list[operand]).filter((value) => value?.kind === 'constant');
    if (known.length === operands.length) {
      const [a = 0, b = 0, c = 0] = known.map((value) => value.value);
      return this.constant(operation.real(a, b, c));
    }
    const key = (operation.commutes ? [...operands].sort((a, b) => a - b) : operands).join();
    return this.#numbered(`${operation.key}(${key})`, { kind: 'computed', operation, operands });
  }

  #numbered(key: string, value: Value): number {
    const known = this.#numbers.get(key);
    if (known !== undefined) return known;
    this.#numbers.set(key, this.list.length);
    return this.list.push(value) - 1;
  }
}

/**
 * Compiles definitions, each after all it reads, to one program. A name is first looked for among the definitions above,
 * then in the columns by `slotOf`. Gives bit for bit what `linkScalar` gives.
 */
export function linkBlock(
  definitions: readonly { readonly name: string; readonly formula: CheckedExpr }[],
  slotOf: (name: string) => number,
): BlockProgram {
  const values = new Values();
  const defined = new Map<string, number>();
  const read = (name: string) => defined.get(name) ?? values.column(slotOf(name));
  const results = definitions.map(({ name, formula }) => {
    const number = numberOf(formula, values, read);
    defined.set(name, number);
    return number;
  });
  return assemble(values.list, results);
}

function numberOf(expr: CheckedExpr, values: Values, read: (name: string) => number): number {
  const inner = (of: CheckedExpr) => numberOf(of, values, read);
  switch (expr.kind) {
    case 'number':
      return values.constant(expr.value);
    case 'quantity':
    case 'constant':
      return values.constant(expr.si);
    case 'name':
      return read(expr.name);
    case 'negate':
      return values.compute(NEGATE, [inner(expr.of)]);
    case 'not':
      return values.compute(NOT, [inner(expr.of)]);
    case 'arithmetic': {
      const left = inner(expr.left);
      const right = inner(expr.right);
      const exponent = expr.operator === '^' ? values.list[right] : undefined;
      if (exponent?.kind !== 'constant') return values.compute(OPERATIONS[expr.operator], [left, right]);
      if (exponent.value === 2) return values.compute(MULTIPLY, [left, left]);
      return values.compute(single(`^${exponent.value}`, powerBy(exponent.value)), [left]);
    }
    case 'compare':
      return values.compute(pair(expr.operator, COMPARISONS[expr.operator]), [inner(expr.left), inner(expr.right)]);
    case 'logic':
      return values.compute(expr.operator === 'and' ? AND : OR, [inner(expr.left), inner(expr.right)]);
    case 'call':
      return numberOfCall(expr.name, expr.args.map(inner), values);
    default:
      return assertNever(expr);
  }
}

function numberOfCall(name: string, args: readonly number[], values: Values): number {
  const arithmetic = FUNCTIONS.get(name)?.arithmetic;
  if (!arithmetic) throw new Error(`a checked formula calls ${name}`);
  switch (arithmetic.shape) {
    case 'one':
      return values.compute(single(name, arithmetic.real), args);
    case 'two':
      return values.compute(pair(name, arithmetic.real), args);
    case 'choice':
      return values.compute(IF, args);
    case 'many': {
      const { each, join, finish } = arithmetic;
      const parts = each ? args.map((arg) => values.compute(single(`${name} each`, each), [arg])) : args;
      const joined = parts.reduce((a, b) => values.compute(pair(`${name} join`, join), [a, b]));
      return finish ? values.compute(single(`${name} finish`, finish), [joined]) : joined;
    }
    default:
      return assertNever(arithmetic);
  }
}

/** Arrays by number while the program runs: a program's registers first, then the columns it reads, then those it fills. */
interface Step {
  readonly kernel: Kernel;
  readonly out: number;
  readonly operands: readonly [number, number, number];
}

/** A register is longer than the last block of a column. */
const COPY: Kernel = (count, out, a) => out.set(a.subarray(0, count));

/** Gives every value an array and every computed one a step. Registers are used again after the last use of their value. */
function assemble(values: readonly Value[], results: readonly number[]): BlockProgram {
  const lastUse = new Map<number, number>();
  for (const [at, value] of values.entries()) {
    if (value.kind === 'computed') for (const operand of value.operands) lastUse.set(operand, at);
  }
  const registers: Float64Array[] = [];
  const slots: number[] = [];
  const free: number[] = [];
  // How many registers there are is known only at the end: until then columns have negative numbers.
  const places: number[] = [];
  const filled = (result: number) => -1 - (slotCount + result);
  const slotCount = values.filter((value) => value.kind === 'column').length;
  const steps: Step[] = [];
  for (const [at, value] of values.entries()) {
    if (value.kind === 'column') {
      places.push(-slots.push(value.slot));
      continue;
    }
    if (value.kind === 'constant') {
      places.push(registers.push(new Float64Array(BLOCK).fill(value.value)) - 1);
      continue;
    }
    const operands = threeOf(value.operands.map((operand) => places[operand]));
    for (const operand of new Set(value.operands)) {
      const place = places[operand] ?? -1;
      const ends = values[operand]?.kind === 'computed' && lastUse.get(operand) === at;
      if (ends && place >= 0) free.push(place);
    }
    const result = results.indexOf(at);
    const out = result >= 0 ? filled(result) : (free.pop() ?? registers.push(new Float64Array(BLOCK)) - 1);
    places.push(out);
    steps.push({ kernel: value.operation.kernel, out, operands });
  }
  for (const [index, result] of results.entries()) {
    const from = places[result];
    if (from !== filled(index)) steps.push({ kernel: COPY, out: filled(index), operands: threeOf([from]) });
  }
  const settle = (place: number) => (place < 0 ? registers.length - 1 - place : place);
  const settled = steps.map(({ kernel, out, operands: [a, b, c] }): Step => {
    return { kernel, out: settle(out), operands: [settle(a), settle(b), settle(c)] };
  });
  return programOf(settled, registers, slots);
}

function threeOf(operands: readonly (number | undefined)[]): readonly [number, number, number] {
  const [a, b = a, c = a] = operands;
  if (a === undefined || b === undefined || c === undefined) throw new Error('a step has no operands');
  return [a, b, c];
}

function programOf(steps: readonly Step[], registers: readonly Float64Array[], slots: readonly number[]): BlockProgram {
  return {
    run: function runProgram(inputs, outputs, count) {
      const columns = [...slots.map((slot) => arrayAt(inputs, slot)), ...outputs];
      for (let start = 0; start < count; start += BLOCK) {
        const end = Math.min(start + BLOCK, count);
        const arrays = [...registers, ...columns.map((column) => column.subarray(start, end))];
        for (const { kernel, out, operands } of steps) {
          const [a, b, c] = operands;
          kernel(end - start, arrayAt(arrays, out), arrayAt(arrays, a), arrayAt(arrays, b), arrayAt(arrays, c));
        }
      }
    },
  };
}

function arrayAt(arrays: readonly Float64Array[], index: number): Float64Array {
  const array = arrays[index];
  if (array === undefined) throw new Error(`the program has no array ${index}`);
  return array;
}
