// biome-ignore-all lint/style/noNonNullAssertion: slots are computed while linking, and a read of a typed array has no way to miss.
import { assertNever } from '#text';
import { type Arithmetic, FUNCTIONS } from './functions.ts';
import { COMPARISONS, conjunction, disjunction, negation, power, powerBy } from './operators.ts';
import type { ArithmeticOperator, CheckedExpr } from './syntax.ts';

/** A formula ready to run on a frame of numbers (SI base units, levels in dB; truth is 1 or 0). May give NaN or an infinity: see `sampleAt`. */
export type LinkedFormula = (frame: Float64Array) => number;

interface Part {
  /** Reads no name, so its value is known while linking. */
  readonly constant: boolean;
  readonly run: LinkedFormula;
}

const NO_FRAME = new Float64Array(0);

/** Makes the closure for one value. `slotOf` gives the place of each name in the frame. The closure allocates nothing and cannot throw. */
export function linkScalar(checked: CheckedExpr, slotOf: (name: string) => number): LinkedFormula {
  return link(checked, slotOf).run;
}

function link(expr: CheckedExpr, slotOf: (name: string) => number): Part {
  switch (expr.kind) {
    case 'number':
      return constant(expr.value);
    case 'quantity':
    case 'constant':
      return constant(expr.si);
    case 'name': {
      const slot = slotOf(expr.name);
      return {
        constant: false,
        run: function evalName(frame) {
          return frame[slot]!;
        },
      };
    }
    case 'negate': {
      const of = link(expr.of, slotOf);
      return folded([of], function evalNegate(frame) {
        return -of.run(frame);
      });
    }
    case 'not':
      return one(link(expr.of, slotOf), negation);
    case 'arithmetic': {
      const left = link(expr.left, slotOf);
      const right = link(expr.right, slotOf);
      return folded([left, right], arithmetic(expr.operator, left, right));
    }
    case 'compare':
      return two(link(expr.left, slotOf), link(expr.right, slotOf), COMPARISONS[expr.operator]);
    case 'logic':
      return two(
        link(expr.left, slotOf),
        link(expr.right, slotOf),
        expr.operator === 'and' ? conjunction : disjunction,
      );
    case 'call':
      return call(
        expr.name,
        expr.args.map((arg) => link(arg, slotOf)),
      );
    default:
      return assertNever(expr);
  }
}

function constant(value: number): Part {
  return {
    constant: true,
    run: function evalConstant() {
      return value;
    },
  };
}

/** A part whose operands are all constant is computed now. */
function folded(operands: readonly Part[], run: LinkedFormula): Part {
  return operands.every((operand) => operand.constant) ? constant(run(NO_FRAME)) : { constant: false, run };
}

function arithmetic(operator: ArithmeticOperator, left: Part, right: Part): LinkedFormula {
  const a = left.run;
  const b = right.run;
  switch (operator) {
    case '+':
      return function evalAdd(frame) {
        return a(frame) + b(frame);
      };
    case '-':
      return function evalSubtract(frame) {
        return a(frame) - b(frame);
      };
    case '*':
      return function evalMultiply(frame) {
        return a(frame) * b(frame);
      };
    case '/':
      return function evalDivide(frame) {
        return a(frame) / b(frame);
      };
    case '^': {
      if (right.constant) return one(left, powerBy(b(NO_FRAME))).run;
      return function evalPower(frame) {
        return power(a(frame), b(frame));
      };
    }
    default:
      return assertNever(operator);
  }
}

function one(of: Part, real: (x: number) => number): Part {
  const x = of.run;
  return folded([of], function evalOne(frame) {
    return real(x(frame));
  });
}

function two(left: Part, right: Part, real: (a: number, b: number) => number): Part {
  const a = left.run;
  const b = right.run;
  return folded([left, right], function evalTwo(frame) {
    return real(a(frame), b(frame));
  });
}

function call(name: string, args: readonly Part[]): Part {
  const arithmetic: Arithmetic | undefined = FUNCTIONS.get(name)?.arithmetic;
  const [first, second, third] = args;
  if (!arithmetic || !first) throw new Error(`a checked formula calls ${name} with ${args.length} arguments`);
  switch (arithmetic.shape) {
    case 'one':
      return one(first, arithmetic.real);
    case 'two':
      return two(first, second!, arithmetic.real);
    case 'many': {
      const { each, join, finish } = arithmetic;
      const joined = args.map((arg) => (each ? one(arg, each) : arg)).reduce((a, b) => two(a, b, join));
      return finish ? one(joined, finish) : joined;
    }
    case 'choice':
      return chosen(first, second!, third!);
    default:
      return assertNever(arithmetic);
  }
}

/** Runs only the branch that the test names. */
function chosen(test: Part, yes: Part, no: Part): Part {
  return folded([test, yes, no], function evalIf(frame) {
    const answer = test.run(frame);
    return answer === 1 ? yes.run(frame) : answer === 0 ? no.run(frame) : Number.NaN;
  });
}
