import type { KeptInputs } from '#api';

/** One field on its way to the server: its text (null: back to the recipe's) and what the typing person last saw. */
export interface KeptField {
  readonly text: string | null;
  readonly base: string | null;
}

/** Changes that are not acknowledged, by calculator and field. */
export type KeptFields = Readonly<Record<string, Readonly<Record<string, KeptField>>>>;

export function oneField(calculator: string, name: string, field: KeptField): KeptFields {
  return { [calculator]: { [name]: field } };
}

/** All fields of both; of a field that is in both the newer text and the older base. */
export function mergeFields(older: KeptFields, newer: KeptFields): KeptFields {
  const merged: Record<string, Record<string, KeptField>> = {};
  for (const [calculator, fields] of Object.entries(older)) merged[calculator] = { ...fields };
  for (const [calculator, fields] of Object.entries(newer)) {
    const into = { ...(Object.hasOwn(merged, calculator) ? merged[calculator] : {}) };
    for (const [name, field] of Object.entries(fields)) {
      const before = Object.hasOwn(into, name) ? into[name] : undefined;
      into[name] = { text: field.text, base: before ? before.base : field.base };
    }
    merged[calculator] = into;
  }
  return merged;
}

export function hasField(fields: KeptFields | null, calculator: string, name: string): boolean {
  return fields !== null && Object.hasOwn(fields, calculator) && Object.hasOwn(fields[calculator] ?? {}, name);
}

export function textAt(inputs: KeptInputs, calculator: string, name: string): string | null {
  const own = Object.hasOwn(inputs, calculator) ? inputs[calculator] : undefined;
  return own && Object.hasOwn(own, name) ? (own[name] ?? null) : null;
}

/** The inputs with one field changed; null takes it out. */
export function withText(inputs: KeptInputs, calculator: string, name: string, text: string | null): KeptInputs {
  const { [name]: _old, ...others } = Object.hasOwn(inputs, calculator) ? (inputs[calculator] ?? {}) : {};
  return { ...inputs, [calculator]: text === null ? others : { ...others, [name]: text } };
}

export function withFields(inputs: KeptInputs, fields: KeptFields): KeptInputs {
  let all = inputs;
  for (const [calculator, own] of Object.entries(fields)) {
    for (const [name, { text }] of Object.entries(own)) all = withText(all, calculator, name, text);
  }
  return all;
}

/**
 * Parts what was typed here and never acknowledged: what may go on, and what was changed elsewhere since it was typed,
 * which is offered instead. What the server has already is in neither.
 */
export function partUnsent(unsent: KeptFields, server: KeptInputs): { going: KeptFields; offered: KeptFields } {
  let going: KeptFields = {};
  let offered: KeptFields = {};
  for (const [calculator, fields] of Object.entries(unsent)) {
    for (const [name, field] of Object.entries(fields)) {
      const there = textAt(server, calculator, name);
      const one = oneField(calculator, name, { text: field.text, base: there });
      if (there === field.base) going = mergeFields(going, one);
      else if (there !== field.text) offered = mergeFields(offered, one);
    }
  }
  return { going, offered };
}

/** Reads what this browser kept, which another release may have written. Null for what is not of this form. */
export function readFields(payload: unknown): KeptFields | null {
  if (typeof payload !== 'object' || payload === null) return null;
  const fields: Record<string, Record<string, KeptField>> = {};
  for (const [calculator, own] of Object.entries(payload)) {
    if (typeof own !== 'object' || own === null) return null;
    const read: Record<string, KeptField> = {};
    for (const [name, field] of Object.entries(own)) {
      const { text, base } = Object(field);
      if (!isTextOrNull(text) || !isTextOrNull(base)) return null;
      read[name] = { text, base };
    }
    fields[calculator] = read;
  }
  return fields;
}

export function isTextOrNull(value: unknown): value is string | null {
  return value === null || typeof value === 'string';
}
