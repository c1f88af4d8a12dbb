import {
  type CalculatorModel,
  type Entry,
  type ExampleModel,
  type Expectation,
  type Given,
  type LimitModel,
  type LimitState,
  linkCalculator,
  type ResultModel,
} from '#calculator';
import { type CheckedExpr, checkFormula, namesRead, orderDefinitions, parseFormula } from '#formula';
import {
  coherentUnit,
  type Dimension,
  KINDS,
  kindOfDimension,
  type QuantityKind,
  type Reading,
  readValue,
} from '#quantity';
import { span } from '#text';

/** A calculator as compact as a test can read it: texts as an author writes them. */
export interface Sketch {
  readonly id?: string;
  readonly title?: string;
  readonly givens: Readonly<Record<string, readonly [QuantityKind, string, GivenSketch?]>>;
  readonly results: Readonly<Record<string, string | readonly [string, ResultSketch]>>;
  readonly limits?: Readonly<Record<string, LimitSketch>>;
  readonly examples?: readonly ExampleSketch[];
}

type GivenSketch = Partial<Pick<Given, 'reading' | 'from'>> & {
  readonly min?: string;
  readonly max?: string;
  readonly options?: Readonly<Record<string, string>>;
};
type ResultSketch = Partial<Pick<ResultModel, 'unit' | 'digits' | 'reading'>>;
type LimitSketch = Partial<Pick<LimitModel, 'level' | 'over' | 'says'>> & {
  readonly of: string;
  readonly from?: string;
  readonly to?: string;
  readonly near?: string;
};

export interface ExampleSketch {
  readonly sets: Readonly<Record<string, string>>;
  /** Of a result: what is expected and, if it is not 0.1 %, within what. */
  readonly numbers?: Readonly<Record<string, string | readonly [string, string]>>;
  readonly limits?: Readonly<Record<string, LimitState>>;
  readonly at?: string;
}

const NOWHERE = span(0, 0);

/** Reads and checks a sketch as the compiler does a recipe; throws where the test itself is mistaken. */
export function modelOf(sketch: Sketch): CalculatorModel {
  const types = new Map<string, Dimension>();
  for (const [name, [kind]] of Object.entries(sketch.givens)) types.set(name, KINDS[kind].dimension);
  const texts = new Map(
    Object.entries(sketch.results).map(([name, text]) => [name, typeof text === 'string' ? text : text[0]]),
  );
  const names = new Set([...types.keys(), ...texts.keys()]);
  const parsed = [...texts].map(([name, text]) => {
    const { expr } = parseFormula(text, span(0, text.length), names);
    return { name, reads: namesRead(expr), span: NOWHERE };
  });
  const { order } = orderDefinitions(parsed);
  const formulas = new Map<string, CheckedExpr>();
  for (const name of order) {
    const formula = checked(texts.get(name) ?? '', names, types);
    if (formula.type === 'truth') throw new Error(`${name} is a comparison`);
    formulas.set(name, formula);
    types.set(name, formula.type);
  }
  const givens = Object.entries(sketch.givens).map(([name, given]) => givenOf(name, given));
  return {
    id: sketch.id ?? 'calc',
    title: sketch.title ?? 'Numbers',
    span: NOWHERE,
    givens,
    choices: [],
    results: Object.entries(sketch.results).map(([name, text]) => resultOf(name, text, formulas)),
    limits: Object.entries(sketch.limits ?? {}).map(([name, limit]) => limitOf(name, limit, names, types)),
    examples: (sketch.examples ?? []).map((example) => exampleOf(example, givens, types)),
    plots: [],
    order,
  };
}

export function linkedOf(sketch: Sketch) {
  return linkCalculator(modelOf(sketch));
}

function checked(text: string, names: ReadonlySet<string>, types: ReadonlyMap<string, Dimension>): CheckedExpr {
  const { expr, diagnostics } = parseFormula(text, span(0, text.length), names);
  const answer = checkFormula(expr, { typeOf: (name) => types.get(name), names });
  const codes = [...diagnostics, ...answer.diagnostics].map((diagnostic) => diagnostic.code);
  if (answer.checked === null) throw new Error(`${text}: ${codes.join()}`);
  return answer.checked;
}

function entryOf(text: string, kind: QuantityKind | Dimension, reading?: Reading): Entry {
  const read = readValue(text, { kind, unit: 'required', reading });
  if (!read.ok) throw new Error(`${text}: ${read.error.code}`);
  return { low: read.value.low, high: read.value.high, text, unit: read.value.unit };
}

function givenOf(name: string, [quantity, text, more = {}]: Sketch['givens'][string]): Given {
  const { min, max, options, reading, from } = more;
  const numberOf = (value: string) => entryOf(value, quantity, reading).low;
  return {
    name,
    label: name,
    quantity,
    value: entryOf(text, quantity, reading),
    ...(min === undefined ? {} : { min: numberOf(min) }),
    ...(max === undefined ? {} : { max: numberOf(max) }),
    ...(options
      ? { options: Object.entries(options).map(([value, label]) => ({ value: numberOf(value), text: value, label })) }
      : {}),
    ...(reading ? { reading } : {}),
    ...(from ? { from } : {}),
    span: NOWHERE,
  };
}

function resultOf(name: string, sketch: Sketch['results'][string], formulas: Map<string, CheckedExpr>): ResultModel {
  const formula = formulas.get(name);
  const more: ResultSketch = typeof sketch === 'string' ? {} : sketch[1];
  if (!formula || formula.type === 'truth') throw new Error(`${name} stands on a circle`);
  const { type } = formula;
  const quantity = kindOfDimension(type, more.unit);
  return { name, label: name, formula, quantity, dimensionUnit: coherentUnit(type), ...more, span: NOWHERE };
}

function limitOf(
  name: string,
  { of, from, to, near, level = 'stop', over = 'everything', says = `${name} does not hold.` }: LimitSketch,
  names: ReadonlySet<string>,
  types: ReadonlyMap<string, Dimension>,
): LimitModel {
  const formula = checked(of, names, types);
  if (formula.type === 'truth') throw new Error(`${of} is a comparison`);
  return {
    name,
    of: formula,
    ...(from === undefined ? {} : { from: checked(from, names, types) }),
    ...(to === undefined ? {} : { to: checked(to, names, types) }),
    ...(near === undefined ? {} : { near: checked(near, names, types) }),
    says,
    level,
    over,
    quantity: kindOfDimension(formula.type),
    dimensionUnit: coherentUnit(formula.type),
    span: NOWHERE,
  };
}

function exampleOf(
  sketch: ExampleSketch,
  givens: readonly Given[],
  types: ReadonlyMap<string, Dimension>,
): ExampleModel {
  const sets = Object.entries(sketch.sets).map(([target, text]) => {
    const [name = '', part] = target.split('.');
    const given = givens.find((one) => one.name === name);
    const kind = part ? 'ratio' : (given?.quantity ?? 'ratio');
    return {
      name,
      part: part ? ('tolerance' as const) : ('value' as const),
      to: entryOf(text, kind, given?.reading),
      span: NOWHERE,
    };
  });
  const numbers = Object.entries(sketch.numbers ?? {}).map(([name, expected]): Expectation => {
    const [text, within] = typeof expected === 'string' ? [expected, '0.1 %'] : expected;
    const dimension = types.get(name) ?? KINDS.ratio.dimension;
    const isRelative = within.endsWith('%');
    return {
      kind: 'number',
      name,
      to: entryOf(text, dimension),
      within: entryOf(within, isRelative ? 'ratio' : dimension).low,
      withinIs: isRelative ? 'relative' : 'absolute',
      ...(sketch.at ? { at: sketch.at } : {}),
      span: NOWHERE,
    };
  });
  const limits = Object.entries(sketch.limits ?? {}).map(
    ([limit, state]): Expectation => ({ kind: 'limit', limit, state, span: NOWHERE }),
  );
  return { title: 'example', source: 'own arithmetic', sets, expects: [...numbers, ...limits], span: NOWHERE };
}
