import { type QuantityProblem, readValue, writeEntry, writeValue } from '#quantity';
import { fail, ok, problem, type Result, span } from '#text';
import type { FieldCode, FieldProblem, InputField, Inputs, ReadField, Upstream } from './inputs.ts';
import type { CalculatorModel, Given } from './model.ts';
import { readUpstream, type UpstreamValue } from './upstream.ts';

export interface InputOptions {
  /** Whether a comma is a decimal sign for this person. */
  readonly decimalComma?: boolean;
  readonly upstream?: Upstream;
  /** The inputs as last shown, e.g. before the field got the focus: the unit of a bare number and the last good numbers. */
  readonly lastShown?: Inputs;
}

/** More would make the search over all corners slow; the recipe language, section 5. */
const MOST_RANGES = 4;

/** What typing a decimal twice, or a middle and a deviation, may lose in a double; so much beyond a limit is still on it. */
const ROUNDING = 1e-12;

/**
 * Reads every field of a calculator. A field that nobody typed in (absent or null) takes the recipe's value or, with
 * `from`, the earlier calculator's; an emptied one is refused as missing. Names that the calculator lacks are ignored.
 * When it cannot: the field is refused with a problem, and what depends on it waits. Never throws on a text.
 */
export function readInputs(
  model: CalculatorModel,
  texts: Readonly<Record<string, string | null>>,
  options: InputOptions = {},
): Inputs {
  const fields = new Map<string, InputField>();
  const refused: string[] = [];
  let ranges = 0;
  for (const given of model.givens) {
    const typed = Object.hasOwn(texts, given.name) ? (texts[given.name] ?? null) : null;
    let field = typed === null ? untouched(given, options) : typedField(given, typed, options);
    if (field.state === 'read' && field.low < field.high && ++ranges > MOST_RANGES) {
      field = refuse(given, field, tooMany(field.text), options);
    }
    if (field.state === 'refused') refused.push(given.name);
    fields.set(given.name, field);
  }
  return { fields, refused };
}

/** Puts the last good numbers in place of refused fields, so that the last good results can be shown, marked as such. */
export function withLastGood(inputs: Inputs): Inputs {
  const fields = new Map<string, InputField>();
  for (const [name, field] of inputs.fields) {
    fields.set(name, field.state === 'refused' ? (field.lastGood ?? field) : field);
  }
  return { fields, refused: inputs.refused.filter((name) => fields.get(name)?.state === 'refused') };
}

/** Puts numbers in SI base units in place of one field, as examples and cures do. */
export function withValue(inputs: Inputs, given: Given, low: number, high: number): Inputs {
  const current = inputs.fields.get(given.name);
  const unit = current?.state === 'read' ? current.unit : given.value.unit;
  const field = read(given, { text: '', origin: 'typed' }, { low, high, unit });
  const fields = new Map(inputs.fields).set(given.name, { ...field, text: field.understood });
  return { fields, refused: inputs.refused.filter((name) => name !== given.name) };
}

/** Writes a value as it stands in the given's field; `readInputs` reads it back. */
export function fieldText(given: Given, value: { low: number; high: number }, unit: string): string {
  const option = value.low === value.high ? given.options?.find((choice) => choice.value === value.low) : undefined;
  if (option) return option.text;
  return writeEntry(value, { kind: given.quantity, unit, reading: given.reading, plain: true });
}

type Origin = Pick<ReadField, 'text' | 'origin'>;
type Numbers = Pick<ReadField, 'low' | 'high' | 'unit'>;

function read(given: Given, from: Origin, numbers: Numbers, notValid: readonly string[] = []): ReadField {
  const understood = fieldText(given, numbers, numbers.unit);
  return { state: 'read', name: given.name, ...from, ...numbers, understood, notValid };
}

function untouched(given: Given, options: InputOptions): InputField {
  const earlier = given.from ? readUpstream(given.from, options.upstream ?? {}) : null;
  if (earlier !== null) return earlierField(given, earlier, options);
  const { low, high, text, unit } = given.value;
  return read(given, { text, origin: 'recipe' }, { low, high, unit });
}

function earlierField(given: Given, earlier: UpstreamValue, options: InputOptions): InputField {
  if (earlier.state === 'missing') {
    return { state: 'waiting', name: given.name, text: '', origin: 'earlier', because: earlier.because };
  }
  const field = read(given, { text: '', origin: 'earlier' }, { ...earlier, unit: given.value.unit }, earlier.notValid);
  const shown: ReadField = { ...field, text: field.understood };
  const outside = outsideLimits(given, shown);
  return outside ? refuse(given, shown, outside, options) : shown;
}

function typedField(given: Given, text: string, options: InputOptions): InputField {
  const from: Origin = { text, origin: 'typed' };
  const numbers = given.options ? readOption(given, text) : readTyped(given, text, options);
  if (!numbers.ok) return refuse(given, { name: given.name, ...from }, numbers.error, options);
  const field = read(given, from, numbers.value);
  const outside = outsideLimits(given, field);
  return outside ? refuse(given, field, outside, options) : field;
}

function readTyped(given: Given, text: string, options: InputOptions): Result<Numbers, QuantityProblem> {
  const shown = lastGoodOf(given, options);
  return readValue(text, {
    kind: given.quantity,
    unit: shown?.unit ?? given.value.unit,
    reading: given.reading,
    decimalComma: options.decimalComma ?? false,
    mayBeRange: given.quantity !== 'count',
  });
}

/** A list is answered by an entry's value as the recipe writes it, by its words, or by the same number written otherwise. */
function readOption(given: Given, text: string): Result<Numbers, FieldProblem> {
  const choices = given.options ?? [];
  const typed = text.trim();
  const { unit } = given.value;
  const number = readValue(typed, { kind: given.quantity, unit, reading: given.reading, mayBeRange: false });
  const chosen = choices.find(
    (choice) => choice.text === typed || choice.label === typed || (number.ok && choice.value === number.value.low),
  );
  if (chosen) return ok({ low: chosen.value, high: chosen.value, unit });
  const names = choices.map((choice) => choice.text);
  return fail(problem<FieldCode>('not-an-option', wholeOf(text), { typed: shortened(typed), options: names }));
}

function outsideLimits(given: Given, field: ReadField): FieldProblem | null {
  const { low, high, unit, text } = field;
  const { min, max } = given;
  const below = min !== undefined && low < min - ROUNDING * Math.abs(min);
  const above = max !== undefined && high > max + ROUNDING * Math.abs(max);
  if (!below && !above) return null;
  // "1.000 kΩ to 1.000 MΩ" whatever prefix was typed; only % and dBu, which are no prefixes, stay as they were.
  const asTyped = given.quantity === 'ratio' || unit.startsWith('dB') ? { unit } : {};
  const write = (si: number | undefined) =>
    si === undefined ? '' : writeValue(si, { kind: given.quantity, reading: given.reading, ...asTyped }).text;
  return problem<FieldCode>('outside-limits', wholeOf(text), {
    typed: shortened(text.trim()),
    min: write(min),
    max: write(max),
  });
}

function tooMany(text: string): FieldProblem {
  return problem<FieldCode>('too-many-ranges', wholeOf(text), { most: MOST_RANGES });
}

function refuse(
  given: Given,
  from: Origin & { readonly name: string },
  why: FieldProblem,
  options: InputOptions,
): InputField {
  const lastGood = lastGoodOf(given, options);
  const { name, text, origin } = from;
  return { state: 'refused', name, text, origin, problem: why, ...(lastGood ? { lastGood } : {}) };
}

function lastGoodOf(given: Given, { lastShown }: InputOptions): ReadField | undefined {
  const field = lastShown?.fields.get(given.name);
  if (field?.state === 'refused') return field.lastGood;
  return field?.state === 'read' ? field : undefined;
}

function wholeOf(text: string) {
  return span(0, text.length);
}

/** Cuts what a message quotes. */
function shortened(text: string): string {
  return text.length <= 24 ? text : `${text.slice(0, 23)}…`;
}
