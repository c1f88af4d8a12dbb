import type { CalculatorModel, Choice, Given, LimitModel, PlotModel, ResultModel } from '#calculator';
import { type CheckedExpr, type Definition, type Expr, nearestName, orderDefinitions } from '#formula';
import type { QuantityKind } from '#quantity';
import type { Diagnostic, Span } from '#text';
import { type Attributes, readAttributes, readName, readWhole } from './attributes.ts';
import type { ElementBlock } from './blocks.ts';
import { reportInside } from './body.ts';
import { buildChoice, choiceFormulas, choiceType, chosenNames, type MadeName } from './build-choice.ts';
import { buildExample, type ExampleScope } from './build-example.ts';
import { buildGiven, type Earlier, entryOf, readUncertainty } from './build-given.ts';
import { buildLimit, buildResult } from './build-result.ts';
import { ELEMENTS, isElementName } from './elements.ts';
import { infoOfKind, kindOf, type NameInfo, Names, readsOf } from './names.ts';
import { collectProblems, type Problems } from './problems.ts';

export interface CalculatorBuild {
  readonly model: CalculatorModel;
  /** What each name stands for, for `from` and `<Value>`. */
  readonly names: ReadonlyMap<string, NameInfo>;
  readonly diagnostics: readonly Diagnostic[];
  /** Formulas of Results that were checked. */
  readonly formulas: number;
  /** Nothing is wrong with it and nothing of it is left to a later release, so that it may be evaluated. */
  readonly isComplete: boolean;
}

/** At most so many inputs may be ranges. Source: the recipe language, section 5. */
const MOST_RANGES = 4;

interface Member {
  readonly block: ElementBlock;
  readonly attributes: Attributes;
}

/** A Result or a Choose: what it makes, and the formulas it reads before it can be made. */
interface Draft extends Member {
  readonly made: readonly MadeName[];
  readonly exprs: readonly Expr[];
}

/**
 * Builds one calculator from its element. All that is wrong in it is told; what is faulty is left out of the model.
 * `sources` are the ids of the front matter.
 */
export function buildCalculator(
  source: string,
  block: ElementBlock,
  sources: readonly string[],
  earlier: Earlier,
): CalculatorBuild {
  const problems = collectProblems();
  const own = readAttributes(block, problems);
  const members = membersOf(block, problems);
  const of = (name: string) => members.filter((member) => member.block.name === name);
  const madeBy = new Map<Member, readonly MadeName[]>(members.map((member) => [member, namesMade(member, problems)]));
  const names = new Names(source, uniqueNames([...madeBy.values()].flat(), problems), problems);
  const givens = buildGivens(of('Given'), names, earlier);
  const drafts = [...of('Choose'), ...of('Result')].map((member): Draft => {
    const made = madeBy.get(member) ?? [];
    return { ...member, made, exprs: formulasOf(member, names) };
  });
  const { order, choices, results } = buildDefinitions(drafts, names);
  const kept = addUncertainty(of('Given'), givens, names);
  const limits = buildLimits(of('Limit'), names);
  const scope: ExampleScope = {
    names,
    givens: new Map(kept.map((given) => [given.name, given])),
    chosen: new Set(of('Choose').flatMap((member) => madeBy.get(member)?.map(({ name }) => name) ?? [])),
    results: new Map(results.map((result) => [result.name, result])),
    resultNames: new Set(of('Result').flatMap((member) => madeBy.get(member)?.map(({ name }) => name) ?? [])),
    limitNames: new Set(of('Limit').flatMap(({ attributes }) => attributes.get('name')?.text ?? [])),
    sources,
  };
  const examples = of('Example').flatMap((member) => buildExample(member.block, member.attributes, scope) ?? []);
  const plots = of('Plot').flatMap((member) => buildPlot(member, scope) ?? []);
  const id = own.get('id')?.text ?? '';
  const title = own.get('title')?.text ?? id;
  const built = new Set([...choices.flatMap((choice) => choice.names), ...results.map((result) => result.name)]);
  return {
    model: {
      id,
      title,
      span: block.span,
      givens: kept,
      choices,
      results,
      limits,
      examples,
      plots,
      order: order.filter((name) => built.has(name)),
    },
    names: new Map([...names.names].map((name) => [name, names.infoOf(name) ?? UNKNOWN])),
    diagnostics: problems.list,
    formulas: results.filter((result) => result.formula !== undefined).length,
    isComplete: problems.list.every((diagnostic) => diagnostic.severity !== 'error'),
  };
}

const UNKNOWN: NameInfo = { type: null, kind: null };

function membersOf(block: ElementBlock, problems: Problems): readonly Member[] {
  for (const node of block.content) {
    if (node.kind === 'text' && node.value.trim() !== '') {
      problems.error('unexpected-text', node.span ?? block.nameSpan, { name: block.name });
    }
    if (node.kind === 'tag') reportWords(node, block, problems);
  }
  return block.elements.flatMap((child) => {
    if (!isElementName(child.name)) return [];
    const { inside, holds } = ELEMENTS[child.name];
    if (inside !== 'Calculator') {
      problems.error('misplaced-element', child.nameSpan, { name: child.name, inside });
      return [];
    }
    if (holds === 'nothing') reportInside(child, problems);
    return { block: child, attributes: readAttributes(child, problems) };
  });
}

/** A paragraph of elements on one line is fine; one with words is not. */
function reportWords(
  node: Extract<ElementBlock['content'][number], { kind: 'tag' }>,
  block: ElementBlock,
  problems: Problems,
): void {
  const isElements = node.children.every(
    (child) => child.kind === 'element' || (child.kind === 'text' && child.value.trim() === ''),
  );
  if (node.tagName !== 'p' || !isElements) {
    problems.error('unexpected-text', node.span ?? block.nameSpan, { name: block.name });
  }
}

function namesMade({ block, attributes }: Member, problems: Problems): readonly MadeName[] {
  if (block.name === 'Choose') return chosenNames(attributes, problems);
  const name = attributes.get('name');
  if (name === undefined || (block.name !== 'Given' && block.name !== 'Result')) return [];
  return readName(name.text, name.value, problems) === null ? [] : [{ name: name.text, span: name.value }];
}

function uniqueNames(made: readonly MadeName[], problems: Problems): ReadonlySet<string> {
  const names = new Set<string>();
  for (const { name, span } of [...made].sort((a, b) => a.span.start - b.span.start)) {
    if (names.has(name)) problems.error('duplicate-name', span, { name });
    names.add(name);
  }
  return names;
}

function buildGivens(members: readonly Member[], names: Names, earlier: Earlier): readonly Given[] {
  const givens: Given[] = [];
  let ranges = 0;
  for (const { block, attributes } of members) {
    const given = buildGiven(block, attributes, names, earlier);
    const name = attributes.get('name')?.text ?? '';
    const quantity = attributes.get('quantity')?.text as QuantityKind | undefined;
    names.define(name, quantity === undefined ? UNKNOWN : infoOfKind(quantity, given?.reading));
    if (given === null || !names.names.has(name) || givens.some((other) => other.name === name)) continue;
    givens.push(given);
    if (given.value.low < given.value.high && ++ranges > MOST_RANGES) {
      names.problems.error('ranges-too-many', attributes.get('value')?.value ?? block.nameSpan, { most: MOST_RANGES });
    }
  }
  return givens;
}

function formulasOf({ block, attributes }: Member, names: Names): readonly Expr[] {
  if (block.name === 'Choose') return choiceFormulas(attributes, names);
  const formula = attributes.get('formula');
  return formula === undefined ? [] : [names.parse(formula.value)];
}

interface Definitions {
  readonly order: readonly string[];
  readonly choices: readonly Choice[];
  readonly results: readonly ResultModel[];
}

/** Checks each definition after all that it reads, so that every name has its dimension when it is met. */
function buildDefinitions(drafts: readonly Draft[], names: Names): Definitions {
  const byName = new Map<string, Draft>();
  for (const draft of drafts) for (const { name } of draft.made) if (!byName.has(name)) byName.set(name, draft);
  const definitions = [...byName].map(([name, draft]): Definition => {
    const span = draft.attributes.get('formula')?.value ?? draft.block.nameSpan;
    return { name, reads: readsOf(draft.exprs), span };
  });
  const { order, diagnostics } = orderDefinitions(definitions);
  names.problems.add(diagnostics);
  const choices = new Map<Draft, Choice | null>();
  const results = new Map<Draft, ResultModel | null>();
  const circular = [...byName.keys()].filter((name) => !order.includes(name));
  for (const name of circular) names.define(name, UNKNOWN);
  for (const name of [...order, ...circular]) {
    const draft = byName.get(name);
    if (draft === undefined || choices.has(draft) || results.has(draft)) continue;
    if (draft.block.name === 'Choose') choices.set(draft, defineChoice(draft, names));
    else results.set(draft, defineResult(draft, name, names));
  }
  // In the order of the text, as the page shows them.
  return {
    order,
    choices: drafts.flatMap((draft) => choices.get(draft) ?? []),
    results: drafts.flatMap((draft) => results.get(draft) ?? []),
  };
}

function defineChoice(draft: Draft, names: Names): Choice | null {
  const checked = draft.exprs.map((expr) => names.check(expr));
  const place: Span = draft.attributes.get('within')?.value ?? draft.block.nameSpan;
  const type = choiceType(checked, place, names.problems);
  for (const { name } of draft.made) names.define(name, { type, kind: null });
  return buildChoice(draft.block, draft.attributes, checked, type, names);
}

function defineResult(draft: Draft, name: string, names: Names): ResultModel | null {
  const [expr] = draft.exprs;
  const formula: CheckedExpr | null = expr === undefined ? null : names.check(expr);
  const result = buildResult(draft.block, draft.attributes, formula, names);
  const kind = result?.quantity ?? (formula === null ? null : kindOf(formula, names));
  names.define(name, { type: formula?.type ?? null, kind, reading: result?.reading });
  return result;
}

/** Tolerances are formulas too and may name Givens that stand further down. */
function addUncertainty(members: readonly Member[], givens: readonly Given[], names: Names): readonly Given[] {
  return givens.map((given) => {
    const member = members.find(({ block }) => block.span === given.span);
    const type = names.typeOf(given.name);
    if (member === undefined || type === undefined || type === null || type === 'truth') return given;
    return { ...given, ...readUncertainty(member.attributes, given.quantity, type, names) };
  });
}

function buildLimits(members: readonly Member[], names: Names): readonly LimitModel[] {
  const seen = new Set<string>();
  return members.flatMap(({ block, attributes }) => {
    const limit = buildLimit(block, attributes, names);
    const name = attributes.get('name');
    if (name !== undefined && seen.has(name.text)) {
      names.problems.error('duplicate-limit', name.value, { name: name.text });
      return [];
    }
    if (name !== undefined) seen.add(name.text);
    return limit ?? [];
  });
}

function buildPlot({ block, attributes }: Member, { names, givens, resultNames }: ExampleScope): PlotModel | null {
  const { problems } = names;
  const against = attributes.get('against');
  const of = (attributes.get('of')?.text ?? '').split(',').map((name) => name.trim());
  const unknown = of.find((name) => name !== '' && !resultNames.has(name));
  if (unknown !== undefined) {
    const known = [...resultNames];
    const place = attributes.get('of')?.value ?? block.nameSpan;
    problems.error('result-unknown', place, { name: unknown, near: nearestName(unknown, known) ?? '', known });
  }
  const points = attributes.get('points');
  const count = points === undefined ? null : readWhole(points, 2, 2000, problems);
  if (against === undefined) return null;
  const given = givens.get(against.text);
  if (given === undefined) {
    const known = [...givens.keys()];
    problems.error('input-unknown', against.value, {
      name: against.text,
      near: nearestName(against.text, known) ?? '',
      known,
    });
    return null;
  }
  const end = (key: 'from' | 'to') => {
    const attribute = attributes.get(key);
    return attribute && entryOf(attribute.value, given.quantity, given.reading, names, false);
  };
  const [from, to] = [end('from'), end('to')];
  if (!from || !to) return null;
  const scale = attributes.get('scale')?.text as PlotModel['scale'] | undefined;
  return {
    of,
    against: against.text,
    from: from.low,
    to: to.low,
    scale: scale ?? 'linear',
    ...(count === null ? {} : { points: count }),
    span: block.span,
  };
}
