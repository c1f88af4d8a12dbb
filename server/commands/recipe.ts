import { readFileSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { type Evaluated, evaluateInOrder, fieldMessage, linkCalculator, toRunJson } from '#calculator';
import { readValue } from '#quantity';
import { type Compiled, type CompileFacts, type Compiler, createCompiler, type RecipeDocument } from '#recipe';
import type { ShownDiagnostic } from '#text';

const USAGE = `Usage:
  npm run --silent recipe -- check FILE… [--json]
  npm run --silent recipe -- run FILE [--set "calc.name=value"]… [--json] [--samples N] [--seed N]
`;

/** Ends the command: the message goes to standard error. Never leaves this file. */
class Stop extends Error {
  readonly code: 1 | 2;

  constructor(code: 1 | 2, message: string) {
    super(message);
    this.code = code;
  }
}

interface Options {
  readonly json: boolean;
  readonly set: readonly string[];
}

/** Gives the exit code: 0, 1 for a recipe with errors, 2 for bad arguments and files that cannot be read. */
function recipeCommand(args: readonly string[]): number {
  try {
    const [command, files, options] = readArguments(args);
    if (command === 'check') return check(files, options);
    if (command === 'run') return run(files, options);
    const what = command === 'netlist' ? 'netlist is not available yet in this release.' : `There is no “${command}”.`;
    throw new Stop(2, `${what}\n${USAGE}`);
  } catch (stop) {
    if (!(stop instanceof Stop)) throw stop;
    process.stderr.write(`${stop.message.trimEnd()}\n`);
    return stop.code;
  }
}

function readArguments(args: readonly string[]): readonly [string, readonly string[], Options] {
  try {
    const { values, positionals } = parseArgs({
      args: [...args],
      allowPositionals: true,
      options: {
        json: { type: 'boolean', default: false },
        set: { type: 'string', multiple: true, default: [] },
        samples: { type: 'string', default: '10000' },
        seed: { type: 'string', default: '1' },
        drawing: { type: 'string' },
        frequency: { type: 'string' },
      },
    });
    for (const name of ['samples', 'seed'] as const) {
      if (!/^\d{1,9}$/.test(values[name]))
        throw new Stop(2, `--${name} is “${values[name]}”, but needs a whole number.`);
    }
    const [command = '', ...files] = positionals;
    if (command !== 'netlist' && files.length === 0) throw new Stop(2, USAGE);
    return [command, files, { json: values.json, set: values.set }];
  } catch (error) {
    // Node's own reader of arguments throws on an option that it does not know.
    if (error instanceof Stop || !(error instanceof Error)) throw error;
    throw new Stop(2, `${error.message}\n${USAGE}`);
  }
}

function readText(file: string): string {
  try {
    return new TextDecoder('utf-8', { fatal: true, ignoreBOM: true }).decode(readFileSync(file));
  } catch (error) {
    const reason = error instanceof TypeError ? 'it is not UTF-8' : error instanceof Error ? error.message : '';
    throw new Stop(2, `${file} cannot be read: ${reason}`);
  }
}

interface Page {
  readonly file: string;
  readonly compiled: Compiled;
}

/** Files that are given together may link each other; everything else cannot be looked up here. */
function compileAll(files: readonly string[]): readonly Page[] {
  const texts = files.map((file) => ({ file, text: readText(file), compile: createCompiler() satisfies Compiler }));
  const slugs = texts.flatMap(({ text, compile }) => compile(text, {}).preview?.front.slug ?? []);
  const recipes = Object.fromEntries(slugs.filter((slug) => slug !== '').map((slug) => [slug, []]));
  const facts: CompileFacts = { recipes, recipesElsewhere: true };
  return texts.map(({ file, text, compile }) => ({ file, compiled: compile(text, facts) }));
}

function hasErrors({ diagnostics }: Compiled): boolean {
  return diagnostics.some((diagnostic) => diagnostic.severity === 'error');
}

function check(files: readonly string[], { json }: Options): number {
  const pages = compileAll(files);
  const isGood = ({ compiled }: Page) => !hasErrors(compiled) && compiled.checks.every(({ passed }) => passed);
  if (json) {
    const answer = pages.map((page) => {
      const { diagnostics, checks } = page.compiled;
      return { file: page.file, ok: isGood(page), diagnostics, checks };
    });
    process.stdout.write(`${JSON.stringify(answer, null, 2)}\n`);
  } else for (const page of pages) process.stdout.write(reportOf(page, isGood(page)));
  return pages.every(isGood) ? 0 : 1;
}

function reportOf({ file, compiled }: Page, isGood: boolean): string {
  const checks = compiled.checks.map(
    ({ kind, title, passed, detail }) => `  ${passed ? 'passed' : 'failed'}  ${kind}: ${title} (${detail})`,
  );
  const state = isGood ? 'no errors' : 'has errors';
  return `${[...linesOf(file, compiled.diagnostics), `${file}: ${state}`, ...checks].join('\n')}\n`;
}

function linesOf(file: string, diagnostics: readonly ShownDiagnostic[]): readonly string[] {
  return diagnostics.map(({ start, severity, code, message, hint }) => {
    const advice = hint === undefined ? '' : ` ${hint}`;
    return `${file}:${start.line}:${start.column} ${severity} ${code}: ${message}${advice}`;
  });
}

function run(files: readonly string[], { json, set }: Options): number {
  const [page, ...others] = compileAll(files);
  if (page === undefined || others.length > 0) throw new Stop(2, `run takes one file.\n${USAGE}`);
  const { file, compiled } = page;
  const { document, diagnostics } = compiled;
  if (document === null) {
    process.stderr.write(`${linesOf(file, diagnostics).join('\n')}\n`);
    if (json) process.stdout.write(`${JSON.stringify({ file, ok: false, diagnostics }, null, 2)}\n`);
    return 1;
  }
  const evaluated = evaluateInOrder(document.calculators.map(linkCalculator), readSettings(document, set));
  refuseProblems(evaluated);
  const calculators = Object.fromEntries(
    [...evaluated].map(([id, { linked, inputs, evaluation }]) => [id, toRunJson(linked.model, inputs, evaluation)]),
  );
  const answer = { slug: document.front.slug, calculators };
  process.stdout.write(json ? `${JSON.stringify(answer, null, 2)}\n` : tableOf(document, answer.calculators));
  return 0;
}

type Texts = Record<string, Record<string, string>>;

function readSettings(document: RecipeDocument, settings: readonly string[]): Texts {
  const texts: Texts = Object.fromEntries(document.calculators.map(({ id }) => [id, {}]));
  for (const setting of settings) {
    const [, id = '', name = '', part, value = ''] = /^([^.=]+)\.([^.=]+)(?:\.([^=]*))?=(.*)$/s.exec(setting) ?? [];
    if (name === '') throw new Stop(2, `--set "${setting}" needs the form calc.name=value.`);
    const calculator = document.calculators.find((candidate) => candidate.id === id);
    if (calculator === undefined) throw new Stop(2, `There is no calculator “${id}” in ${document.front.slug}.`);
    if (!calculator.givens.some((given) => given.name === name)) {
      const isResult = calculator.results.some((result) => result.name === name);
      const why = isResult ? 'is a Result and cannot be set' : 'is no input';
      throw new Stop(2, `${name} ${why} of the calculator “${id}”.`);
    }
    if (part === undefined) texts[id] = { ...texts[id], [name]: value };
    else readTolerance(setting, part, value);
  }
  return texts;
}

/** Tolerances are read, but this release works nothing out of them. */
function readTolerance(setting: string, part: string, value: string): void {
  if (part !== 'tolerance') throw new Stop(2, `--set "${setting}": only a value or its tolerance can be set.`);
  const read = readValue(value, { kind: 'ratio', unit: 'required', mayBeRange: false });
  if (!read.ok) throw new Stop(2, `--set "${setting}": ${fieldMessage(read.error).message}`);
  process.stderr.write(`--set "${setting}": tolerances have no effect yet in this release.\n`);
}

/** A value that its field does not take ends the command. */
function refuseProblems(evaluated: ReadonlyMap<string, Evaluated>): void {
  for (const [id, { inputs }] of evaluated) {
    for (const field of inputs.fields.values()) {
      if (field.state !== 'refused') continue;
      const { message, hint } = fieldMessage(field.problem);
      throw new Stop(2, `${id}.${field.name}: ${message}${hint === undefined ? '' : ` ${hint}`}`);
    }
  }
}

function tableOf(document: RecipeDocument, answers: Readonly<Record<string, ReturnType<typeof toRunJson>>>): string {
  const lines = document.calculators.flatMap(({ id, title, givens, results }) => {
    const answer = answers[id];
    if (answer === undefined) return [];
    return [
      `${title} (${id})`,
      ...givens.map(({ name, label }) => `  ${label} ${name} = ${answer.inputs[name]?.text ?? ''}`),
      ...results.map(({ name, label }) => {
        const result = answer.results[name];
        return `  ${label} ${name} = ${result?.problem?.message ?? result?.text ?? ''}`;
      }),
      ...answer.limits.map(({ name, state }) => `  limit ${name}: ${state.replace('-', ' ')}`),
    ];
  });
  return `${lines.join('\n')}\n`;
}

process.exitCode = recipeCommand(process.argv.slice(2));
