import { QUANTITY_WORDING, type QuantityCode } from '#quantity';
import type { Facts, Wording } from '#text';
import type { FieldCode, FieldProblem } from './inputs.ts';
import type { LimitOutcome } from './outcome.ts';

const FIELD_WORDING = {
  'outside-limits': {
    message: ({ typed, min, max }) => {
      if (min === '') return `${typed} is above ${max}, the most that this input takes.`;
      if (max === '') return `${typed} is below ${min}, the least that this input takes.`;
      return `${typed} is outside ${min} to ${max}, but this input needs to lie between them.`;
    },
  },
  'not-an-option': {
    message: ({ typed }) => `Unexpected “${typed}”, expected one of the list.`,
    hint: ({ options }) => `Write ${Array.isArray(options) ? options.join(', or ') : options}.`,
  },
  'too-many-ranges': {
    message: ({ most }) => `This is one range too many: results are searched over at most ${most} ranges at a time.`,
    hint: () => 'Write a single value here, or in another field.',
  },
} as const satisfies Record<FieldCode, Wording>;

/** One or two short sentences for a refused field, and what to write instead. */
export function fieldMessage(problem: FieldProblem): { readonly message: string; readonly hint?: string } {
  const wording = wordingOf(problem.code);
  const facts: Facts = problem.facts;
  const hint = wording.hint?.(facts);
  return { message: wording.message(facts), ...(hint === undefined ? {} : { hint }) };
}

function wordingOf(code: FieldCode | QuantityCode): Wording {
  // Each code of the table takes its own facts; the problem that carries the code carries them too.
  return isFieldCode(code) ? FIELD_WORDING[code] : (QUANTITY_WORDING[code] as Wording);
}

function isFieldCode(code: string): code is FieldCode {
  return Object.hasOwn(FIELD_WORDING, code);
}

/** How a limit's state is said on the page. */
export const LIMIT_STATE_WORDS = {
  within: 'within',
  close: 'close',
  'only-nominally': 'only nominally',
  exceeded: 'exceeded',
  'no-value': 'no value',
  waiting: 'waiting',
} as const satisfies Record<LimitOutcome['state'], string>;
