import { noValueWords, unboundedWords } from '#formula';
import { type WriteOptions, writeRange, writeValue } from '#quantity';
import { assertNever } from '#text';
import type { LimitModel, ResultModel } from './model.ts';
import type { LimitOutcome, Outcome, Sample } from './outcome.ts';
import { LIMIT_STATE_WORDS } from './wording.ts';

export interface Described {
  /** Short, for the number's place: `2.007 … 6.993 V`, `unbounded`, `no value`, `waiting`. */
  readonly text: string;
  /** In full, also for reading aloud: `unbounded: R1·R4 and R2·R3 cancel`, `waiting for V_ref`, `no value: zero divided by zero`. */
  readonly words: string;
}

/** Writes an outcome with the result's unit, digits and reading. */
export function describeOutcome(outcome: Outcome, result: ResultModel): Described {
  switch (outcome.state) {
    case 'waiting':
      return { text: 'waiting', words: `waiting for ${listed(outcome.for)}` };
    case 'known':
      return describeKnown(outcome, resultWriting(result));
    default:
      return assertNever(outcome);
  }
}

/** How the numbers of a result are written. */
export function resultWriting({ quantity, unit, dimensionUnit, digits, reading }: ResultModel): WriteOptions {
  return { kind: quantity, unit: unit ?? (quantity === null ? dimensionUnit : undefined), digits, reading };
}

/** Writes a single sample: a number with its unit, or why there is none. */
export function describeSample(sample: Sample, options: WriteOptions): Described {
  switch (sample.kind) {
    case 'finite': {
      const { text } = writeValue(sample.si, options);
      return { text, words: text };
    }
    case 'unbounded':
      return { text: 'unbounded', words: 'unbounded' };
    case 'no-value':
      return { text: 'no value', words: `no value: ${noValueWords(sample.reason)}` };
    default:
      return assertNever(sample);
  }
}

function describeKnown(outcome: Extract<Outcome, { state: 'known' }>, options: WriteOptions): Described {
  const { middle, over, because } = outcome;
  const reason = because ? `: ${unboundedWords(because)}` : '';
  if (!over) {
    const { text, words } = describeSample(middle, options);
    return { text, words: words + (middle.kind === 'unbounded' ? reason : '') };
  }
  const { lowest, highest } = over;
  if (lowest.kind === 'no-value' || highest.kind === 'no-value') return describeSample(middle, options);
  const somewhere = over.everywhere ? '' : ', not everywhere';
  if (lowest.kind === 'finite' && highest.kind === 'finite') {
    const range = writeRange(lowest.si, highest.si, options);
    return { text: range.text + somewhere, words: range.text.replace(' … ', ' to ') + somewhere };
  }
  const ends = [describeSample(lowest, options).text, describeSample(highest, options).text];
  const isOne = lowest.kind === highest.kind;
  return {
    text: (isOne ? 'unbounded' : ends.join(' … ')) + somewhere,
    words: (isOne ? 'unbounded' : ends.join(' to ')) + somewhere + reason,
  };
}

export interface DescribedLimit {
  /** `within`, `close`, `only nominally`, `exceeded`, `no value`, `waiting`; with `, nominal only` where the limit asks for no more. */
  readonly state: string;
  /** The value at the worst point; '' where there is none. */
  readonly value: string;
  /** The bounds there: `0.05 … 7.5 V`, `at least 50 dB`, `at most 7.5 V`; '' where there are none. */
  readonly bounds: string;
  /** `over by 0.217 V`, `under by 3.2 dB`, `0.4 V to spare`; '' where there is no finite margin. */
  readonly margin: string;
  /** All of it in one part of a sentence: `exceeded: 7.717 V, over by 0.217 V`. */
  readonly words: string;
}

/** Words how a limit stands at its worst point. */
export function describeLimit(outcome: LimitOutcome, limit: LimitModel): DescribedLimit {
  const options: WriteOptions = {
    kind: limit.quantity,
    unit: limit.quantity === null ? limit.dimensionUnit : undefined,
  };
  const state = LIMIT_STATE_WORDS[outcome.state] + (limit.over === 'nominal' ? ', nominal only' : '');
  const value = outcome.value !== null ? writeValue(outcome.value, options).text : outcome.unbounded ? 'unbounded' : '';
  const margin = marginWords(outcome, options);
  const details = [value, margin].filter((part) => part !== '').join(', ');
  const waiting = outcome.state === 'waiting' ? ` for ${listed(outcome.waitingFor)}` : '';
  return {
    state,
    value,
    bounds: boundsWords(outcome, options),
    margin,
    words: `${state}${waiting}${details === '' ? '' : `: ${details}`}`,
  };
}

function boundsWords({ from, to }: LimitOutcome, options: WriteOptions): string {
  if (from !== null && to !== null) return writeRange(from, to, options).text;
  if (from !== null) return `at least ${writeValue(from, options).text}`;
  return to === null ? '' : `at most ${writeValue(to, options).text}`;
}

function marginWords({ margin, value, to }: LimitOutcome, options: WriteOptions): string {
  if (margin === null) return '';
  // A margin is a difference: of temperatures it is in kelvins.
  const kind = options.kind === 'temperature' ? 'temperature-difference' : options.kind;
  const size = writeValue(Math.abs(margin), { ...options, kind }).text;
  if (margin >= 0) return `${size} to spare`;
  return to !== null && value !== null && value > to ? `over by ${size}` : `under by ${size}`;
}

function listed(names: readonly string[]): string {
  return names.length < 2 ? names.join('') : `${names.slice(0, -1).join(', ')} and ${names.at(-1)}`;
}
