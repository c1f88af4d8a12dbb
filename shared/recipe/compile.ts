import { describeLimit } from '#calculator';
import { nearestName } from '#formula';
import { LineIndex } from '#text';
import type { Body } from './body.ts';
import { PLAIN_SOURCES } from './build-example.ts';
import { allElements, type BuiltCalculator, buildCalculators, type CalculatorMemory } from './build-page.ts';
import { checkCautions } from './checks/cautions.ts';
import { checkDimensions } from './checks/dimensions.ts';
import { checkExamples } from './checks/examples.ts';
import {
  type BodyNode,
  type Check,
  COMPILER_VERSION,
  type Compiled,
  type CompileFacts,
  type Proof,
  type RecipeDocument,
} from './document.ts';
import { drawingsOf } from './drawings.ts';
import { ELEMENTS, isElementName } from './elements.ts';
import { type FrontMatterRead, readFrontMatter } from './front-matter.ts';
import { checkHazards, greatestVoltage } from './hazards.ts';
import { checkSize, LIMITS } from './limits.ts';
import { checkRecipeLink } from './links.ts';
import { type PageRead, readPage, rereadPage } from './page.ts';
import { createMdxReader, type MdxReader } from './parse-mdx.ts';
import { collectProblems, type Problems } from './problems.ts';
import { describeDiagnostic } from './wording.ts';

/** Compiles a text; gives the same for the same text and facts, whatever it compiled before. */
export type Compiler = (text: string, facts: CompileFacts) => Compiled;

/** Compiles a recipe's text from nothing. Pure and synchronous; never throws, whatever the text. */
export function compileRecipe(text: string, facts: CompileFacts): Compiled {
  return createCompiler()(text, facts);
}

interface Memory {
  readonly text: string;
  readonly page: PageRead;
  readonly calculators: CalculatorMemory;
}

/**
 * Makes a compiler that remembers its last text, for a page that is being written: after a change inside one attribute
 * of a calculator only that calculator is built again. The answers are those of `compileRecipe`.
 */
export function createCompiler(): Compiler {
  let readMdx: MdxReader | null = null;
  let memory: Memory | null = null;
  return (text, facts) => {
    const problems = collectProblems();
    if (!checkSize(text, problems)) return shown(text, problems, { document: null, preview: null, checks: [] });
    readMdx ??= createMdxReader();
    const front = readFrontMatter(text, facts, problems);
    const page = (memory && rereadPage(memory.text, text, memory.page)) ?? readPage(text, readMdx);
    problems.add(page.diagnostics);
    const sources = Object.keys(front.front.sources);
    const known = memory?.calculators ?? new Map<string, never>();
    const built = buildCalculators(text, page.elements, sources, known, problems);
    memory = { text, page, calculators: built.memory };
    checkFormulaCount(page, problems);
    return finish(text, facts, front, page, built.calculators, problems);
  };
}

function checkFormulaCount({ elements }: PageRead, problems: Problems): void {
  let count = 0;
  for (const { name, attributes } of allElements(elements)) {
    for (const attribute of attributes) {
      const row = isElementName(name) ? ELEMENTS[name].attributes[attribute.name] : undefined;
      if (row?.reader !== 'formula' || ++count <= LIMITS.formulas) continue;
      problems.error('too-many-formulas', attribute.span, { most: LIMITS.formulas });
      return;
    }
  }
}

function finish(
  text: string,
  facts: CompileFacts,
  front: FrontMatterRead,
  { body, elements }: PageRead,
  calculators: readonly BuiltCalculator[],
  problems: Problems,
): Compiled {
  const voltage = greatestVoltage(calculators);
  const dead = body === null ? new Set<string>() : checkValues(body, calculators, problems);
  // Without the page nobody can tell whether a Caution is missing.
  if (body !== null) checkHazards(front, body.cautions, voltage, facts, problems);
  for (const link of body?.links ?? []) checkRecipeLink(link, facts, problems);
  warnOfLimits(calculators, problems);
  const checks = [
    ...checkDimensions(calculators),
    ...checkExamples(calculators, problems),
    ...(body === null ? [] : checkCautions(front, body.cautions, voltage, facts, problems)),
  ];
  if (body === null) return shown(text, problems, { document: null, preview: null, checks });
  const preview: RecipeDocument = {
    schema: 1,
    compiler: COMPILER_VERSION,
    front: front.front,
    body: dead.size === 0 ? body.nodes : withoutValues(body.nodes, dead),
    calculators: calculators.map((calculator) => calculator.model),
    drawings: drawingsOf(elements),
    headings: body.headings,
    uses: usesOf(body),
    checks,
    proof: proofOf(calculators, front),
  };
  const hasErrors = problems.list.some((diagnostic) => diagnostic.severity === 'error');
  return shown(text, problems, { document: hasErrors ? null : preview, preview, checks });
}

/** Every `<Value>` must name something. Gives the `of` of those that do not, or whose name could not be built. */
function checkValues(body: Body, calculators: readonly BuiltCalculator[], problems: Problems): ReadonlySet<string> {
  const dead = new Set<string>();
  const byId = new Map(calculators.map((calculator) => [calculator.model.id, calculator]));
  for (const { of, span } of body.values) {
    const [, id = '', name = ''] = /^([^.]+)\.([^.]+)$/.exec(of) ?? [];
    const calculator = byId.get(id);
    if (name === '') problems.error('reference-form', span, { found: of });
    else if (calculator === undefined) problems.error('calculator-unknown', span, { id, known: [...byId.keys()] });
    else if (!calculator.names.has(name)) {
      const known = [...calculator.names.keys()];
      const near = nearestName(name, known);
      problems.error('calculator-name-unknown', span, { id, name, known: near === null ? known : [near] });
    } else if (hasMember(calculator, name)) continue;
    dead.add(of);
  }
  return dead;
}

function hasMember({ model }: BuiltCalculator, name: string): boolean {
  return (
    [...model.givens, ...model.results].some((member) => member.name === name) ||
    model.choices.some(({ names, twins }) => names.includes(name) || twins.some((twin) => twin.name === name))
  );
}

function withoutValues(nodes: readonly BodyNode[], dead: ReadonlySet<string>): readonly BodyNode[] {
  return nodes.flatMap((node): BodyNode[] => {
    if (node.type === 'text') return [node];
    if (node.tagName === 'recipe-value' && dead.has(String(node.properties.of))) return [];
    return [{ ...node, children: withoutValues(node.children, dead) }];
  });
}

function warnOfLimits(calculators: readonly BuiltCalculator[], problems: Problems): void {
  for (const { model, evaluated } of calculators) {
    for (const outcome of evaluated?.evaluation.limits ?? []) {
      const limit = model.limits.find((candidate) => candidate.name === outcome.name);
      if (limit === undefined || outcome.held || outcome.state === 'waiting') continue;
      const place = { start: limit.span.start + 1, end: limit.span.start + 1 + 'Limit'.length };
      problems.warning('limit-at-defaults', place, { name: limit.name, words: describeLimit(outcome, limit).words });
    }
  }
}

function usesOf({ links }: Body): RecipeDocument['uses'] {
  const uses = new Map(
    links.map(({ slug, version }) => [
      `${slug} ${version ?? ''}`,
      version === undefined ? { slug } : { slug, version },
    ]),
  );
  return [...uses.values()];
}

function proofOf(calculators: readonly BuiltCalculator[], { front }: FrontMatterRead): Proof {
  const runs = calculators.flatMap(({ model, examples }) =>
    model.examples.map((example, index) => ({ source: example.source, passed: examples[index]?.passed === true })),
  );
  const plain: readonly string[] = PLAIN_SOURCES;
  const isOutside = (source: string) => Object.hasOwn(front.sources, source) && !plain.includes(source);
  return {
    formulas: calculators.reduce((sum, calculator) => sum + calculator.formulas, 0),
    provenAgainstDrawing: 0,
    examples: runs.length,
    examplesPassed: runs.filter((run) => run.passed).length,
    examplesFromOutside: runs.filter((run) => run.passed && isOutside(run.source)).length,
  };
}

interface Outcome {
  readonly document: RecipeDocument | null;
  readonly preview: RecipeDocument | null;
  readonly checks: readonly Check[];
}

/** Diagnostics stand in the order of the text. */
function shown(text: string, { list }: Problems, outcome: Outcome): Compiled {
  const lines = new LineIndex(text);
  const sorted = [...list].sort((a, b) => a.span.start - b.span.start || a.span.end - b.span.end);
  return { ...outcome, diagnostics: sorted.map((diagnostic) => describeDiagnostic(diagnostic, lines)) };
}
