import fc from 'fast-check';
import { all, create, type MathJsInstance, type Unit } from 'mathjs';
import { describe, expect, test } from 'vitest';
import {
  type CheckedExpr,
  checkFormula,
  FORMULA_WORDING,
  formulaLayout,
  linkBlock,
  linkScalar,
  parseFormula,
  sampleAt,
  unboundedReason,
} from '#formula';
import { NONE } from '#quantity';
import { assertNever, span } from '#text';

const NAMES = ['x1', 'x2', 'x3', 'x4'];
const slotOf = (name: string) => NAMES.indexOf(name);

function compile(text: string, names: readonly string[] = NAMES) {
  const { expr, diagnostics } = parseFormula(text, span(0, text.length), new Set(names));
  const checked = checkFormula(expr, { typeOf: (name) => (names.includes(name) ? NONE : undefined), names });
  return { checked: checked.checked, diagnostics: [...diagnostics, ...checked.diagnostics] };
}

function compiled(text: string, names: readonly string[] = NAMES): CheckedExpr {
  const { checked, diagnostics } = compile(text, names);
  if (checked === null || diagnostics.length > 0) throw new Error(`${text}: ${diagnostics.map((d) => d.code).join()}`);
  return checked;
}

/** One expression in our language and in that of mathjs. */
interface Pair {
  readonly ours: string;
  readonly theirs: string;
}

/** Functions that both have, and how mathjs writes those it has not. */
const ONE: Readonly<Record<string, (x: string) => string>> = {
  sqrt: (x) => `sqrt(${x})`,
  abs: (x) => `abs(${x})`,
  exp: (x) => `exp(${x})`,
  ln: (x) => `log(${x})`,
  log10: (x) => `log10(${x})`,
  sin: (x) => `sin(${x})`,
  cos: (x) => `cos(${x})`,
  tan: (x) => `tan(${x})`,
  asin: (x) => `asin(${x})`,
  acos: (x) => `acos(${x})`,
  atan: (x) => `atan(${x})`,
  floor: (x) => `floor(${x})`,
  ceil: (x) => `ceil(${x})`,
  round: (x) => `round(${x})`,
  sign: (x) => `sign(${x})`,
};
const TWO: Readonly<Record<string, (a: string, b: string) => string>> = {
  min: (a, b) => `min(${a}, ${b})`,
  max: (a, b) => `max(${a}, ${b})`,
  atan2: (a, b) => `atan2(${a}, ${b})`,
  hypot: (a, b) => `hypot(${a}, ${b})`,
  parallel: (a, b) => `(1 / (1 / (${a}) + 1 / (${b})))`,
};

const leaf = fc.oneof(
  fc.constantFrom(...NAMES),
  fc.integer({ min: 0, max: 20 }).map(String),
  fc.double({ min: 1e-3, max: 1e3, noNaN: true }).map((x) => String(Number(x.toPrecision(4)))),
  fc.constant('pi'),
);

const { pair } = fc.letrec<{ pair: Pair; test: Pair }>((tie) => ({
  pair: fc.oneof(
    { depthSize: 'small', withCrossShrink: true },
    leaf.map((text) => ({ ours: text, theirs: text })),
    // Brackets only now and then, so that both have to agree on what binds tighter.
    fc
      .tuple(tie('pair'), fc.constantFrom('+', '-', '*', '/', '^', ' + ', ' * '), tie('pair'), fc.boolean())
      .map(([a, sign, b, brackets]) => {
        const write = (left: string, right: string) =>
          brackets ? `(${left}${sign}${right})` : `${left}${sign}${right}`;
        return { ours: write(a.ours, b.ours), theirs: write(a.theirs, b.theirs) };
      }),
    tie('pair').map(({ ours, theirs }) => ({ ours: `-${ours}`, theirs: `-${theirs}` })),
    fc.tuple(fc.constantFrom(...Object.keys(ONE)), tie('pair')).map(([name, { ours, theirs }]) => ({
      ours: `${name}(${ours})`,
      theirs: ONE[name]?.(theirs) ?? '',
    })),
    fc.tuple(fc.constantFrom(...Object.keys(TWO)), tie('pair'), tie('pair')).map(([name, a, b]) => ({
      ours: `${name}(${a.ours}, ${b.ours})`,
      theirs: TWO[name]?.(a.theirs, b.theirs) ?? '',
    })),
    tie('pair').map(({ ours, theirs }) => ({
      ours: `from_db(db(${ours}))`,
      theirs: `(10 ^ (20 * log10(abs(${theirs})) / 20))`,
    })),
    fc.tuple(tie('test'), tie('pair'), tie('pair')).map(([when, a, b]) => ({
      ours: `if(${when.ours}, ${a.ours}, ${b.ours})`,
      theirs: `((${when.theirs}) ? (${a.theirs}) : (${b.theirs}))`,
    })),
  ),
  test: fc.oneof(
    { depthSize: 'small' },
    fc.tuple(tie('pair'), fc.constantFrom('<', '<=', '>', '>=', '==', '!='), tie('pair')).map(([a, sign, b]) => ({
      ours: `${a.ours} ${sign} ${b.ours}`,
      theirs: `${a.theirs} ${sign} ${b.theirs}`,
    })),
    fc.tuple(tie('test'), fc.constantFrom('and', 'or'), tie('test')).map(([a, word, b]) => ({
      ours: `(${a.ours}) ${word} (${b.ours})`,
      theirs: `(${a.theirs}) ${word} (${b.theirs})`,
    })),
    // mathjs binds `not` tighter than a comparison.
    tie('test').map(({ ours, theirs }) => ({ ours: `not (${ours})`, theirs: `not (${theirs})` })),
  ),
}));

// mathjs rounds a number that is nearly whole as if it were; sixty-fourths are not nearly anything.
const frames = fc.array(
  fc.integer({ min: -3200, max: 3200 }).map((n) => n / 64),
  { minLength: 4, maxLength: 4 },
);

/** Largest size of any part: rounding errors of a difference are measured by what was subtracted. */
function largestPart(checked: CheckedExpr, frame: Float64Array): number {
  const own = Math.abs(linkScalar(checked, slotOf)(frame));
  return Math.max(Number.isFinite(own) ? own : 0, ...partsOf(checked).map((part) => largestPart(part, frame)));
}

/**
 * Whether a rounding error may decide: a difference that cancels, sides of a comparison or a number to be rounded that
 * stand within 1e-9 of the jump. Two libraries may then honestly differ.
 */
function isOnEdge(checked: CheckedExpr, frame: Float64Array): boolean {
  const own = linkScalar(checked, slotOf)(frame);
  const parts = partsOf(checked);
  const [a = 0, b = 0] = parts.map((part) => linkScalar(part, slotOf)(frame));
  if (Math.abs(own) < 1e-9 * largestPart(checked, frame) && checked.kind === 'arithmetic') return true;
  if (checked.kind === 'compare' && Math.abs(a - b) <= 1e-9 * Math.max(Math.abs(a), Math.abs(b))) return true;
  const isRounded = checked.kind === 'call' && ['floor', 'ceil', 'round', 'asin', 'acos'].includes(checked.name);
  if (isRounded && !Number.isInteger(2 * a) && Math.abs(2 * a - Math.round(2 * a)) < 1e-9) return true;
  return parts.some((part) => isOnEdge(part, frame));
}

function partsOf(expr: CheckedExpr): readonly CheckedExpr[] {
  if ('args' in expr) return expr.args;
  if ('of' in expr) return [expr.of];
  return 'left' in expr ? [expr.left, expr.right] : [];
}

// Source of the numbers: mathjs 15.2.0. `predictable` gives NaN instead of a complex number; our comparisons are
// exact, so its tolerances are as small as it takes them.
const math: MathJsInstance = create(all as NonNullable<typeof all>, {
  predictable: true,
  relTol: 1e-15,
  absTol: 1e-300,
});

describe('against mathjs', () => {
  test('hundreds of generated formulas give the same numbers', () => {
    const met = { finite: 0, unbounded: 0, none: 0 };
    fc.assert(
      fc.property(pair, frames, ({ ours, theirs }, numbers) => {
        fc.pre(ours.length < 1500);
        const checked = compiled(ours);
        const frame = Float64Array.from(numbers);
        fc.pre(!isOnEdge(checked, frame));
        const mine = linkScalar(checked, slotOf)(frame);
        const scope = Object.fromEntries(NAMES.map((name, i) => [name, numbers[i] ?? 0]));
        const other: unknown = math.evaluate(theirs, scope);
        if (Number.isNaN(mine)) {
          // Where mathjs compares with NaN it says false and goes on; we say that there is no value.
          met.none++;
          return ours.includes('if(') || typeof other !== 'number' || Number.isNaN(other);
        }
        if (!Number.isFinite(mine)) met.unbounded++;
        else met.finite++;
        if (typeof other !== 'number') return false;
        if (mine === other) return true;
        return Math.abs(mine - other) <= 1e-9 * largestPart(checked, frame);
      }),
      { seed: 20_260_101, numRuns: 1500 },
    );
    expect(met.finite).toBeGreaterThan(700);
    expect(met.unbounded).toBeGreaterThan(5);
    expect(met.none).toBeGreaterThan(20);
  });

  test('products of generated quantities have the same value and the same dimension', () => {
    const prefix = fc.constantFrom('p', 'n', 'u', 'm', '', 'k', 'M', 'G');
    const unit = fc.constantFrom('V', 'A', 'ohm', 'S', 'F', 'H', 'Hz', 's', 'W', 'J', 'C', 'K', 'm');
    const quantity = fc
      .tuple(fc.double({ min: 0.001, max: 1000, noNaN: true }), prefix, unit)
      .map(([x, p, u]) => `${Number(x.toPrecision(5))} ${p}${u}`);
    const product = fc.array(fc.tuple(fc.constantFrom('*', '/'), quantity), { minLength: 1, maxLength: 5 });
    fc.assert(
      fc.property(quantity, product, (first, others) => {
        const ours = others.reduce((text, [sign, next]) => `${text} ${sign} ${next}`, first);
        const theirs = others.reduce((text, [sign, next]) => `${text} ${sign} (${next})`, `1 m/m * (${first})`);
        const checked = compiled(ours, []);
        const other = math.evaluate(theirs) as Unit | number;
        const si = linkScalar(checked, () => 0)(new Float64Array());
        const [value, dimensions] = typeof other === 'number' ? [other, []] : [siOf(other), dimensionsOf(other)];
        expect(Math.abs(si - value)).toBeLessThanOrEqual(1e-12 * Math.abs(value));
        const [mass = 0, length = 0, time = 0, current = 0, temperature = 0] = dimensions;
        expect(checked.type).toEqual([mass, length, time, current, temperature, 0].map((n) => n * 2 + 0));
      }),
      { seed: 3, numRuns: 400 },
    );
  });
});

/** The value of a mathjs unit in SI base units; its `value` is declared nowhere, its `toSI` gives the same in text. */
function siOf(unit: Unit): number {
  return (unit as unknown as { readonly value: number }).value;
}

/** Exponents of mass, length, time, current, temperature and on, as mathjs keeps them. */
function dimensionsOf(unit: Unit): readonly number[] {
  return (unit as unknown as { readonly dimensions: readonly number[] }).dimensions;
}

/** What a formula means, as plainly as it can be said: the third opinion beside the closure and the block program. */
function walk(expr: CheckedExpr, read: (name: string) => number): number {
  const inner = (of: CheckedExpr) => walk(of, read);
  switch (expr.kind) {
    case 'number':
      return expr.value;
    case 'quantity':
    case 'constant':
      return expr.si;
    case 'name':
      return read(expr.name);
    case 'negate':
      return -inner(expr.of);
    case 'not':
      return 1 - inner(expr.of);
    case 'arithmetic':
      return walkArithmetic(expr, inner);
    case 'compare': {
      const [a, b] = [inner(expr.left), inner(expr.right)];
      if (Number.isNaN(a) || Number.isNaN(b)) return Number.NaN;
      const answers = { '<': a < b, '<=': a <= b, '>': a > b, '>=': a >= b, '==': a === b, '!=': a !== b };
      return answers[expr.operator] ? 1 : 0;
    }
    case 'logic': {
      const sides = [inner(expr.left), inner(expr.right)];
      const decides = expr.operator === 'and' ? 0 : 1;
      if (sides.includes(decides)) return decides;
      return sides.some(Number.isNaN) ? Number.NaN : 1 - decides;
    }
    case 'call':
      return walkCall(expr.name, expr.args.map(inner));
    default:
      return assertNever(expr);
  }
}

function walkArithmetic(
  expr: Extract<CheckedExpr, { readonly kind: 'arithmetic' }>,
  inner: (of: CheckedExpr) => number,
): number {
  const [a, b] = [inner(expr.left), inner(expr.right)];
  if (expr.operator === '+') return a + b;
  if (expr.operator === '-') return a - b;
  if (expr.operator === '*') return a * b;
  if (expr.operator === '/') return a / b;
  if (Number.isNaN(a)) return a;
  const whole = Math.floor(Math.abs(b));
  const isConstant = !JSON.stringify(expr.right).includes('"name":"x');
  if (!isConstant || Math.abs(b) > 16 || !Number.isInteger(b * 2)) return a ** b;
  let product = 1;
  for (let i = 0; i < whole; i++) product *= a;
  if (whole !== Math.abs(b)) product *= Math.sqrt(a);
  return b < 0 ? 1 / product : product;
}

function walkCall(name: string, args: readonly number[]): number {
  const [a = Number.NaN, b = Number.NaN, c = Number.NaN] = args;
  if (name === 'if') return a === 1 ? b : a === 0 ? c : Number.NaN;
  if (name === 'ln') return Math.log(a);
  if (name === 'db') return 20 * Math.log10(Math.abs(a));
  if (name === 'from_db') return 10 ** (a / 20);
  if (name === 'round') return a < 0 ? -Math.round(-a) : Math.round(a);
  if (name === 'parallel') return 1 / args.map((x) => 1 / x).reduce((sum, x) => sum + x);
  if (name === 'hypot') {
    return args.map(Math.abs).reduce((x, y) => {
      const big = Math.max(x, y);
      return big === 0 || big === Infinity ? big : big * Math.sqrt(1 + (Math.min(x, y) / big) ** 2);
    });
  }
  const real = Math[name as 'min' | 'sin'] as (...numbers: readonly number[]) => number;
  return real(...args);
}

describe('closures, block programs and a plain walk', () => {
  const awkward = [0, -0, 1, -1, 0.5, 2, 1e-300, 1e300, -1e300, Infinity, -Infinity, Number.NaN];
  const sample = fc.oneof(fc.double({ min: -50, max: 50, noNaN: true }), fc.constantFrom(...awkward));

  test('generated formulas give the same number, bit for bit, at ordinary and awkward values', () => {
    fc.assert(
      fc.property(fc.array(pair, { minLength: 1, maxLength: 3 }), fc.array(sample, { minLength: 8 }), (pairs, pool) => {
        fc.pre(pairs.every(({ ours }) => ours.length < 600));
        // The last formula reads the ones before by name, and repeats the first: shared parts are computed once.
        const defined = pairs.map((_, i) => `y${i}`);
        const texts = [...pairs.map(({ ours }) => ours), `(${pairs[0]?.ours}) + ${defined.join(' * ')}`];
        const definitions = texts.map((text, i) => ({
          name: `y${i}`,
          formula: compiled(text, [...NAMES, ...defined]),
        }));
        const count = 300;
        const inputs = NAMES.map((_, k) =>
          Float64Array.from({ length: count }, (_, i) => pool[(i * (k + 1) + k) % pool.length] ?? 0),
        );
        const outputs = definitions.map(() => new Float64Array(count));
        linkBlock(definitions, slotOf).run(inputs, outputs, count);
        const names = [...NAMES, ...definitions.map(({ name }) => name)];
        const closures = definitions.map(({ formula }) => linkScalar(formula, (name) => names.indexOf(name)));
        const frame = new Float64Array(names.length);
        for (let i = 0; i < count; i++) {
          for (const [k, column] of inputs.entries()) frame[k] = column[i] ?? 0;
          for (const [d, { formula }] of definitions.entries()) {
            const scalar = closures[d]?.(frame) ?? 0;
            const plain = walk(formula, (name) => frame[names.indexOf(name)] ?? 0);
            const block = outputs[d]?.[i] ?? 0;
            frame[NAMES.length + d] = scalar;
            if (!Object.is(scalar, block) || !Object.is(scalar, plain)) {
              throw new Error(`${texts[d]} at ${frame.join()}: closure ${scalar}, block ${block}, walk ${plain}`);
            }
          }
        }
      }),
      { seed: 7, numRuns: 300 },
    );
  });

  test('a Sample holds a finite number or none, with a place inside the formula', () => {
    fc.assert(
      fc.property(pair, fc.array(sample, { minLength: 4, maxLength: 4 }), ({ ours }, numbers) => {
        fc.pre(ours.length < 600);
        const checked = compiled(ours);
        const values = { valueOf: (name: string) => numbers[slotOf(name)] ?? 0 };
        const raw = linkScalar(checked, slotOf)(Float64Array.from(numbers));
        const found = sampleAt(checked, raw, values);
        if (found.kind === 'finite') return Object.is(found.si, raw) && unboundedReason(checked, values) === null;
        const isInside = found.span.start >= 0 && found.span.end <= ours.length && found.span.start < found.span.end;
        const isTold = found.kind === 'no-value' || unboundedReason(checked, values) !== null;
        return isInside && isTold && (found.kind === 'no-value') === Number.isNaN(raw);
      }),
      { seed: 11, numRuns: 500 },
    );
  });

  test('a block program that only copies or gives constants fills its columns', () => {
    const definitions = ['x1', '2 * 3', 'x1', 'y2 + 0 * x2'].map((text, i) => ({
      name: `y${i}`,
      formula: compiled(text, [...NAMES, 'y2']),
    }));
    const outputs = definitions.map(() => new Float64Array(600));
    const column = Float64Array.from({ length: 600 }, (_, i) => i);
    linkBlock(definitions, slotOf).run([column, column, column, column], outputs, 600);
    expect(outputs.map((output) => [output[0], output[255], output[256], output[599]])).toEqual([
      [0, 255, 256, 599],
      [6, 6, 6, 6],
      [0, 255, 256, 599],
      [0, 255, 256, 599],
    ]);
  });
});

describe('any text', () => {
  const word = fc.constantFrom(
    ...[
      '(',
      ')',
      ',',
      '+',
      '-',
      '*',
      '/',
      '^',
      '<',
      '==',
      '=',
      '&lt;',
      '&amp;',
      '&#',
      '&x;',
      'and',
      'or',
      'not',
      'if(',
    ],
    ...[
      'x1',
      'y',
      'sqrt',
      'max(',
      'pi',
      '2',
      '2.5',
      '1e',
      '.',
      ' ',
      '  ',
      'V',
      'kΩ',
      '°C',
      'V/µs',
      '−',
      '²',
      '🙂',
      '\n',
      '_',
    ],
  );
  const soup = fc.oneof(
    fc.array(word, { maxLength: 60 }).map((words) => words.join('')),
    fc.string({ maxLength: 200 }),
  );

  test('is read without throwing; what is wrong is told, and stands inside the text', () => {
    fc.assert(
      fc.property(soup, fc.nat({ max: 20 }), (text, before) => {
        const source = `${'µ'.repeat(before)}${text}"`;
        const slice = span(before, before + text.length);
        const parsed = parseFormula(source, slice, new Set(NAMES));
        const { checked, diagnostics } = checkFormula(parsed.expr, {
          typeOf: (name) => (NAMES.includes(name) ? NONE : undefined),
          names: NAMES,
        });
        for (const { code, span: where, facts } of [...parsed.diagnostics, ...diagnostics]) {
          expect(where.start).toBeGreaterThanOrEqual(slice.start);
          expect(where.end).toBeLessThanOrEqual(slice.end);
          expect(where.end).toBeGreaterThanOrEqual(where.start);
          expect((FORMULA_WORDING[code] as { message(f: typeof facts): string }).message(facts)).not.toContain(
            'undefined',
          );
        }
        if (checked === null) expect(parsed.diagnostics.length + diagnostics.length).toBeGreaterThan(0);
        else {
          linkScalar(checked, slotOf)(new Float64Array(NAMES.length));
          formulaLayout(checked);
        }
      }),
      { seed: 5, numRuns: 3000 },
    );
  });
});
