import { isName, reservedAs } from '#formula';
import { KINDS, type QuantityKind, readValue, writeEntry } from '#quantity';

/** A line that was understood. `value` is written so that a recipe reads it. */
export interface PastedGiven {
  readonly kind: 'given';
  readonly line: number;
  readonly name: string;
  readonly label: string;
  readonly quantity: QuantityKind;
  /** The quantities that the typed value could be of; the first is the guess. */
  readonly mayBe: readonly QuantityKind[];
  readonly typed: string;
  readonly value: string;
}

/** A line that was not, and why. */
export interface PastedProblem {
  readonly kind: 'problem';
  readonly line: number;
  readonly text: string;
  readonly why: string;
}

export type PastedLine = PastedGiven | PastedProblem;

const LINE = /^([^=:\t;]+?)\s*[=:\t;]\s*(.+?)\s*(?:(?:\/\/|#|;)\s*(.*))?$/;

/** First letters of names and what they usually stand for in circuits. Source: IEC 60027 letter symbols, from memory; common practice. */
const BY_LETTER: Readonly<Record<string, QuantityKind>> = {
  R: 'resistance',
  C: 'capacitance',
  L: 'inductance',
  V: 'voltage',
  U: 'voltage',
  E: 'voltage',
  I: 'current',
  f: 'frequency',
  F: 'frequency',
  t: 'time',
  T: 'temperature',
  P: 'power',
  G: 'ratio',
  A: 'ratio',
  n: 'count',
  N: 'count',
};

/** Quantities in the order in which a bare unit is taken: `°C` and `K` belong to several, for example. */
const KIND_NAMES = Object.keys(KINDS).filter((name): name is QuantityKind => name in KINDS);

/** Reads lines such as `R1 = 10k`, `V_in: ±2 V`, `C1<tab>4n7 # filter`. Blank lines are passed over. Never throws. */
export function readPastedList(text: string): readonly PastedLine[] {
  const seen = new Set<string>();
  return text.split(/\r?\n/).flatMap((whole, index): readonly PastedLine[] => {
    if (whole.trim() === '') return [];
    const read = readLine(whole.trim(), index + 1);
    if (read.kind === 'given' && seen.has(read.name)) {
      return [{ kind: 'problem', line: read.line, text: whole, why: `The name ${read.name} stands above already.` }];
    }
    if (read.kind === 'given') seen.add(read.name);
    return [read];
  });
}

function readLine(text: string, line: number): PastedLine {
  const problem = (why: string): PastedProblem => ({ kind: 'problem', line, text, why });
  const [, name = '', asTyped = '', remark = ''] = LINE.exec(text) ?? [];
  // In lists `1 k` is as common as `1k`; the recipe takes the second.
  const typed = asTyped.replace(/(\d)\s+([kMGmµunpR])$/, '$1$2');
  if (name === '') return problem('Expected a name, then = and a value: R1 = 10k.');
  if (!isName(name)) return problem(`“${name}” is no name, but a Given needs a letter, then letters, digits and _.`);
  if (reservedAs(name) !== null || name === 'if') return problem(`“${name}” has a meaning in formulas already.`);
  const mayBe = kindsOf(name, typed);
  const quantity = mayBe[0];
  if (quantity === undefined) return problem(`The value “${typed}” is not read as any quantity.`);
  const value = valueFor(typed, quantity);
  if (value === null) return problem(`The value “${typed}” is not read as any quantity.`);
  return { kind: 'given', line, name, label: remark || name, quantity, mayBe, typed, value };
}

/** What a value can be: by its unit where it has one, else by the first letter of its name. */
export function kindsOf(name: string, typed: string): readonly QuantityKind[] {
  const byLetter = BY_LETTER[name.charAt(0)];
  const fits = KIND_NAMES.filter((kind) => readValue(typed, { kind, unit: 'required' }).ok);
  const isBare = /^[-+−±]?[\d.]+(?:e[-+]?\d+)?$/i.test(typed);
  const all = isBare ? KIND_NAMES.filter((kind) => valueFor(typed, kind) !== null) : fits;
  // A bare number is what its name says, or a ratio; a name is also asked where a marking code or a unit leaves a choice.
  const first = byLetter !== undefined && all.includes(byLetter) ? byLetter : isBare ? 'ratio' : all[0];
  if (first === undefined) return [];
  return [first, ...all.filter((kind) => kind !== first)];
}

/** The value as a recipe takes it: as typed where that can be read, else with the unit that a bare number lacks; null where neither is. */
export function valueFor(typed: string, kind: QuantityKind): string | null {
  if (readValue(typed, { kind, unit: 'required' }).ok) return typed;
  const read = readValue(typed, { kind, unit: KINDS[kind].unit });
  return read.ok ? writeEntry(read.value, { kind, unit: read.value.unit, plain: true }) : null;
}

/** The value in the words of results, to show what was understood: `10.00 kΩ`. */
export function understood(given: Pick<PastedGiven, 'value' | 'quantity'>): string {
  const read = readValue(given.value, { kind: given.quantity, unit: 'required' });
  return read.ok ? writeEntry(read.value, { kind: given.quantity }) : given.value;
}

/** The same line taken as another quantity. */
export function asQuantity(given: PastedGiven, quantity: QuantityKind): PastedGiven {
  return { ...given, quantity, value: valueFor(given.typed, quantity) ?? given.value };
}

/** A recipe that holds these inputs and waits for its results. */
export function recipeOfGivens(givens: readonly PastedGiven[], title: string, slug: string): string {
  const lines = givens.map(
    ({ name, label, quantity, value }) =>
      `  <Given name="${name}" label="${attributeText(label)}" quantity="${quantity}" value="${value}" />`,
  );
  return `---
title: ${title}
slug: ${slug}
summary: Say in one line what this gives.
hazards: [none]
---

## What it is for

Say when somebody needs this, and when they do not.

<Calculator id="main" title="Your numbers">
${lines.join('\n')}
  <Result name="result" label="What is worked out" formula="${givens[0]?.name ?? '1'}" />
</Calculator>
`;
}

function attributeText(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('"', '&quot;').replaceAll('<', '&lt;');
}
