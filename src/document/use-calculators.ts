import { useMemo, useState } from 'react';
import type { KeptInputs } from '#api';
import {
  type Evaluated,
  type Evaluation,
  evaluate,
  type Inputs,
  type LinkedCalculator,
  linkCalculator,
  type ReadField,
  readInputs,
  withLastGood,
} from '#calculator';
import type { RecipeDocument } from '#recipe';
import { addStep, type Change, EMPTY_HISTORY, type History, redone, undone } from './input-history.ts';

export interface CalculatorState {
  readonly id: string;
  readonly linked: LinkedCalculator;
  /** Every field as typed. */
  readonly inputs: Inputs;
  /** The same with the last good numbers in place of refused ones: what the results stand on. */
  readonly shown: Inputs;
  readonly evaluation: Evaluation;
  /** Whether a number in `shown`, or in a calculator above that it reads, is the last good one of a refused field. */
  readonly isLastGood: boolean;
  /** How many fields a person has typed over. */
  readonly typedOver: number;
}

export interface CalculatorsState {
  /** In the order of the page. */
  readonly list: readonly CalculatorState[];
  readonly byId: ReadonlyMap<string, CalculatorState>;
  readonly change: (calculator: string, name: string, text: string | null) => void;
  /** A field got the focus: what it shows now decides the unit of a bare number. */
  readonly begin: (calculator: string) => void;
  /** A field is left, or Enter: its text becomes what was understood of it. */
  readonly settle: (calculator: string, name: string) => void;
  /** Puts the recipe's values back into every field of a calculator, as one step that can be undone. */
  readonly putBack: (calculator: string) => void;
  readonly undo: (() => void) | null;
  readonly redo: (() => void) | null;
}

/** `kept` is the text to keep: what was understood, with its unit, so that it reads the same tomorrow; as typed while refused. */
export type OnText = (calculator: string, name: string, text: string | null, kept: string | null) => void;

interface Memory {
  /** Inputs as they stood when a field got the focus. */
  readonly shown: Readonly<Record<string, Inputs>>;
  /** The last readable state of fields that were typed in since. */
  readonly good: Readonly<Record<string, ReadonlyMap<string, ReadField>>>;
}

export interface CalculatorsOptions {
  readonly decimalComma?: boolean;
}

/**
 * The calculators of a page: linked once a document, read and evaluated from top to bottom in the render itself, so that
 * results never lag behind the fields. `texts` belongs to the caller, who keeps what `onText` tells.
 */
export function useCalculators(
  document: RecipeDocument,
  texts: KeptInputs,
  onText: OnText,
  { decimalComma = false }: CalculatorsOptions = {},
): CalculatorsState {
  const linked = useMemo(() => document.calculators.map(linkCalculator), [document]);
  const [memory, setMemory] = useState<Memory>({ shown: {}, good: {} });
  const [history, setHistory] = useState<History>(EMPTY_HISTORY);
  const list = useMemo(() => readPage(linked, texts, memory, decimalComma), [linked, texts, memory, decimalComma]);
  const byId = useMemo(() => new Map(list.map((state) => [state.id, state])), [list]);

  const put = (calculator: string, name: string, text: string | null) => {
    const state = byId.get(calculator);
    if (!state) return;
    const field = state.inputs.fields.get(name);
    if (field?.state === 'read') {
      setMemory((now) => ({ ...now, good: withGood(now.good, calculator, field) }));
    }
    onText(calculator, name, text, keptText(state, texts, memory, decimalComma, name, text));
  };
  const textOf = (calculator: string, name: string) => ownText(texts, calculator)[name] ?? null;
  const changeAll = (changes: readonly Change[], merges: boolean) => {
    const real = changes.filter((change) => change.before !== change.after);
    if (real.length === 0) return;
    setHistory((now) => addStep(now, real, merges));
    for (const change of real) put(change.calculator, change.name, change.after);
  };
  const change = (calculator: string, name: string, text: string | null, merges = true) =>
    changeAll([{ calculator, name, before: textOf(calculator, name), after: text }], merges);
  const begin = (calculator: string) => {
    const inputs = byId.get(calculator)?.inputs;
    if (inputs) setMemory((now) => ({ ...now, shown: { ...now.shown, [calculator]: inputs } }));
    setHistory((now) => ({ ...now, isOpen: false }));
  };
  const settle = (calculator: string, name: string) => {
    const field = byId.get(calculator)?.inputs.fields.get(name);
    if (field?.state === 'read' && field.origin === 'typed') change(calculator, name, field.understood);
    begin(calculator);
  };
  const putBack = (calculator: string) => {
    const typed = Object.entries(ownText(texts, calculator));
    changeAll(
      typed.map(([name, before]) => ({ calculator, name, before, after: null })),
      false,
    );
  };
  const travel = (to: { readonly history: History; readonly changes: readonly Change[] } | null) =>
    to === null
      ? null
      : () => {
          setHistory(to.history);
          for (const each of to.changes) put(each.calculator, each.name, each.after);
        };
  return { list, byId, change, begin, settle, putBack, undo: travel(undone(history)), redo: travel(redone(history)) };
}

function readPage(
  calculators: readonly LinkedCalculator[],
  texts: KeptInputs,
  memory: Memory,
  decimalComma: boolean,
): readonly CalculatorState[] {
  const upstream: Record<string, Evaluated> = {};
  const lastGood = new Set<string>();
  return calculators.map((linked) => {
    const { id, givens } = linked.model;
    const lastShown = Object.hasOwn(memory.shown, id) ? memory.shown[id] : undefined;
    const read = readInputs(linked.model, ownText(texts, id), {
      decimalComma,
      upstream,
      ...(lastShown ? { lastShown } : {}),
    });
    const inputs = rememberGood(read, Object.hasOwn(memory.good, id) ? memory.good[id] : undefined);
    const shown = withLastGood(inputs);
    const evaluation = evaluate(linked, shown);
    upstream[id] = { linked, inputs: shown, evaluation };
    const fields = [...inputs.fields.values()];
    const readsLastGood = givens.some((given) => {
      return inputs.fields.get(given.name)?.origin === 'earlier' && given.from && lastGood.has(given.from.calculator);
    });
    const isLastGood =
      readsLastGood || fields.some((field) => field.state === 'refused' && field.lastGood !== undefined);
    if (isLastGood) lastGood.add(id);
    const typedOver = fields.filter((field) => field.origin === 'typed').length;
    return { id, linked, inputs, shown, evaluation, isLastGood, typedOver };
  });
}

/** A refused field falls back to its last readable state, not to the one from before it got the focus. */
function rememberGood(inputs: Inputs, good: ReadonlyMap<string, ReadField> | undefined): Inputs {
  if (!good || inputs.refused.length === 0) return inputs;
  const fields = new Map(inputs.fields);
  for (const name of inputs.refused) {
    const field = fields.get(name);
    const lastGood = good.get(name);
    if (field?.state === 'refused' && lastGood) fields.set(name, { ...field, lastGood });
  }
  return { fields, refused: inputs.refused };
}

function withGood(good: Memory['good'], calculator: string, field: ReadField): Memory['good'] {
  const before = Object.hasOwn(good, calculator) ? good[calculator] : undefined;
  return { ...good, [calculator]: new Map(before).set(field.name, field) };
}

function keptText(
  state: CalculatorState,
  texts: KeptInputs,
  memory: Memory,
  decimalComma: boolean,
  name: string,
  text: string | null,
): string | null {
  if (text === null) return null;
  const lastShown = Object.hasOwn(memory.shown, state.id) ? memory.shown[state.id] : undefined;
  const inputs = readInputs(
    state.linked.model,
    { ...ownText(texts, state.id), [name]: text },
    { decimalComma, ...(lastShown ? { lastShown } : {}) },
  );
  const field = inputs.fields.get(name);
  return field?.state === 'read' ? field.understood : text;
}

function ownText(texts: KeptInputs, calculator: string): Readonly<Record<string, string>> {
  return Object.hasOwn(texts, calculator) ? (texts[calculator] ?? {}) : {};
}
