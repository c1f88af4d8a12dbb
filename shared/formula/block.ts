import { assertNever } from '#text';
import { FUNCTIONS } from './functions.ts';
import {
  addBlock,
  copyBlock,
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

/** Numbers a block: a dozen registers of this length stay in the first-level cache. Common practice, no source. */
const BLOCK = 256;

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
  return { key, kernel: oneBlock(real), real };
}

function pair(key: string, real: (a: number, b: number) => number): Operation {
  return { key, kernel: twoBlock(real), real };
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

/** Where a value stands while the program runs: an array by its number, read from the block's start if it is a whole column. */
interface Place {
  readonly array: number;
  readonly isColumn: boolean;
}

interface Step {
  readonly kernel: Kernel;
  readonly out: Place;
  readonly operands: readonly [Place, Place, Place];
}

/** Gives every value a place and every computed one a step. Registers are used again after the last use of their value. */
function assemble(values: readonly Value[], results: readonly number[]): BlockProgram {
  const registers: Float64Array[] = [];
  const inputs = values.flatMap((value) => (value.kind === 'column' ? [value.slot] : []));
  const free: number[] = [];
  const lastUse = new Map<number, number>();
  for (const [at, value] of values.entries()) {
    if (value.kind === 'computed') for (const operand of value.operands) lastUse.set(operand, at);
  }
  const places: Place[] = [];
  const steps: Step[] = [];
  // Columns are numbered behind the registers, whose count is known only at the end: they get negative numbers until then.
  const columnOf = (index: number): Place => ({ array: -1 - index, isColumn: true });
  let inputCount = 0;
  for (const [at, value] of values.entries()) {
    if (value.kind === 'constant') {
      places.push({ array: registers.push(new Float64Array(BLOCK).fill(value.value)) - 1, isColumn: false });
    } else if (value.kind === 'column') {
      places.push(columnOf(inputCount++));
    } else {
      const operands = value.operands.map((operand) => places[operand] ?? columnOf(0));
      for (const operand of new Set(value.operands)) {
        const place = places[operand];
        const isRegister = values[operand]?.kind === 'computed' && place && !place.isColumn;
        if (isRegister && lastUse.get(operand) === at) free.push(place.array);
      }
      const result = results.indexOf(at);
      const register = result < 0 ? (free.pop() ?? registers.push(new Float64Array(BLOCK)) - 1) : 0;
      const out = result < 0 ? { array: register, isColumn: false } : columnOf(inputs.length + result);
      places.push(out);
      steps.push({ kernel: value.operation.kernel, out, operands: threeOf(operands) });
    }
  }
  for (const [index, result] of results.entries()) {
    const out = columnOf(inputs.length + index);
    const from = places[result] ?? out;
    if (from.array !== out.array) steps.push({ kernel: copyBlock, out, operands: threeOf([from]) });
  }
  const settle = ({ array, isColumn }: Place): Place => ({
    array: array < 0 ? registers.length - 1 - array : array,
    isColumn,
  });
  const settled = steps.map(({ kernel, out, operands: [a, b, c] }) => ({
    kernel,
    out: settle(out),
    operands: [settle(a), settle(b), settle(c)] as const,
  }));
  return programOf(settled, registers, inputs);
}

function threeOf(operands: readonly Place[]): readonly [Place, Place, Place] {
  const [a, b = a, c = a] = operands;
  if (!a || !b || !c) throw new Error('an operation without operands is a constant');
  return [a, b, c];
}

function programOf(steps: readonly Step[], registers: readonly Float64Array[], slots: readonly number[]): BlockProgram {
  return {
    run: function runProgram(inputs, outputs, count) {
      const columns = slots.map((slot) => columnAt(inputs, slot));
      const arrays = [...registers, ...columns, ...outputs];
      for (let start = 0; start < count; start += BLOCK) {
        const length = Math.min(BLOCK, count - start);
        for (const { kernel, out, operands } of steps) {
          const [a, b, c] = operands;
          kernel(
            length,
            columnAt(arrays, out.array),
            out.isColumn ? start : 0,
            columnAt(arrays, a.array),
            a.isColumn ? start : 0,
            columnAt(arrays, b.array),
            b.isColumn ? start : 0,
            columnAt(arrays, c.array),
            c.isColumn ? start : 0,
          );
        }
      }
    },
  };
}

function columnAt(columns: readonly Float64Array[], index: number): Float64Array {
  const column = columns[index];
  if (column === undefined) throw new Error(`the program has no column ${index}`);
  return column;
}
