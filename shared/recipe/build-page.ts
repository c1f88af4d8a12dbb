import {
  type CalculatorModel,
  type Evaluated,
  type ExampleRun,
  evaluate,
  linkCalculator,
  readInputs,
  runExample,
} from '#calculator';
import { namesRead } from '#formula';
import type { ElementBlock } from './blocks.ts';
import { buildCalculator, type CalculatorBuild } from './build-calculator.ts';
import type { Earlier } from './build-given.ts';
import { isElementName } from './elements.ts';
import { moved } from './moved.ts';
import type { NameInfo } from './names.ts';
import type { Problems } from './problems.ts';

/** A calculator with what it comes to at the recipe's own values; null where it is not complete. */
export interface BuiltCalculator extends CalculatorBuild {
  readonly block: ElementBlock;
  readonly evaluated: Evaluated | null;
  readonly examples: readonly ExampleRun[];
}

interface Kept {
  readonly start: number;
  readonly build: CalculatorBuild;
  readonly evaluated: Evaluated | null;
  readonly examples: readonly ExampleRun[];
}

/** Calculators as built last, by all that their building depends on. */
export type CalculatorMemory = ReadonlyMap<string, Kept>;

export interface PageBuild {
  readonly calculators: readonly BuiltCalculator[];
  readonly memory: CalculatorMemory;
}

/** Builds and evaluates the calculators from top to bottom; those whose text has not changed are taken from `memory`. */
export function buildCalculators(
  text: string,
  elements: readonly ElementBlock[],
  sources: readonly string[],
  memory: CalculatorMemory,
  problems: Problems,
): PageBuild {
  const blocks = elements.filter((element) => element.name === 'Calculator');
  const ids = blocks.map(idOf);
  const names = new Map<string, ReadonlyMap<string, NameInfo>>();
  const upstream: Record<string, Evaluated> = {};
  const kept = new Map<string, Kept>();
  const calculators: BuiltCalculator[] = [];
  let above = '';
  for (const [index, block] of blocks.entries()) {
    const slice = text.slice(block.span.start, block.span.end);
    const dependsOn = /\sfrom\s*=/.test(slice) ? above : '';
    const key = [slice, dependsOn, sources.join('\n'), ids.join('\n')].join('\0');
    const known = memory.get(key);
    const entry = known
      ? movedTo(known, block.span.start)
      : build(text, block, sources, { names, later: new Set(ids.slice(index)) }, upstream);
    kept.set(key, entry);
    above += `${slice}\0`;
    const id = ids[index] ?? '';
    checkId(block, id, names, problems);
    if (!names.has(id)) {
      names.set(id, entry.build.names);
      if (entry.evaluated) upstream[id] = entry.evaluated;
      calculators.push({ ...entry.build, block, evaluated: entry.evaluated, examples: entry.examples });
    }
    problems.add(entry.build.diagnostics);
  }
  return { calculators, memory: kept };
}

function idOf(block: ElementBlock): string {
  return block.attributes.find((attribute) => attribute.name === 'id')?.text ?? '';
}

function checkId(block: ElementBlock, id: string, names: ReadonlyMap<string, unknown>, problems: Problems): void {
  const place = block.attributes.find((attribute) => attribute.name === 'id')?.value;
  if (place === undefined || id.trim() === '') return;
  if (!/^[A-Za-z][A-Za-z0-9_-]{0,39}$/.test(id)) problems.error('id-form', place, { id });
  else if (names.has(id)) problems.error('duplicate-id', place, { id });
}

function movedTo(kept: Kept, start: number): Kept {
  const delta = start - kept.start;
  return delta === 0 ? kept : { ...kept, start, build: moved(kept.build, { start: -1, end: 0, delta }) };
}

function build(
  text: string,
  block: ElementBlock,
  sources: readonly string[],
  earlier: Earlier,
  upstream: Readonly<Record<string, Evaluated>>,
): Kept {
  const built = buildCalculator(text, block, sources, earlier);
  const { start } = block.span;
  if (!built.isComplete) {
    return { start, build: { ...built, model: pruned(built.model) }, evaluated: null, examples: [] };
  }
  const linked = linkCalculator(built.model);
  const inputs = readInputs(built.model, {}, { upstream });
  const evaluated: Evaluated = { linked, inputs, evaluation: evaluate(linked, inputs) };
  const examples = built.model.examples.map((example) => runExample(linked, example, upstream));
  return { start, build: built, evaluated, examples };
}

/** Leaves out of a faulty model what reads a name that could not be built, so that the page can still show the rest. */
function pruned(model: CalculatorModel): CalculatorModel {
  const available = new Set(model.givens.map((given) => given.name));
  const has = (formulas: readonly (Parameters<typeof namesRead>[0] | undefined)[]) =>
    formulas.every((formula) => formula === undefined || namesRead(formula).every((name) => available.has(name)));
  const results = new Set<string>();
  for (const name of model.order) {
    const choice = model.choices.find((candidate) => candidate.names.includes(name));
    for (const chosen of choice?.names ?? []) available.add(chosen);
    for (const twin of choice?.twins ?? []) available.add(twin.name);
    const result = model.results.find((candidate) => candidate.name === name);
    if (result === undefined || available.has(name) || !has([result.formula])) continue;
    results.add(name);
    available.add(name);
  }
  const choices = model.choices.filter(({ near, within, best }) => has([near, best, ...(within ?? [])]));
  return {
    ...model,
    givens: model.givens.map((given) =>
      has([given.tolerance, given.match, given.tempco, given.track]) ? given : bare(given),
    ),
    choices,
    results: model.results.filter((result) => results.has(result.name)),
    limits: model.limits.filter(({ of, from, to, near }) => has([of, from, to, near])),
    examples: [],
  };
}

function bare(given: CalculatorModel['givens'][number]): CalculatorModel['givens'][number] {
  const { tolerance: _tolerance, match: _match, tempco: _tempco, track: _track, ...rest } = given;
  return rest;
}

/** Every element of a page with all inside it. */
export function allElements(elements: readonly ElementBlock[]): readonly ElementBlock[] {
  return elements
    .filter((element) => isElementName(element.name))
    .flatMap((element) => [element, ...allElements(element.elements)]);
}
