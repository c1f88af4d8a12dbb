import type { Given, InputField } from '#calculator';

const RANGE_JOINT = /\s+to\s+|\s*…\s*/;
const RANGE_SIGN = /±|\+\/-|\+-|(?:^|\s)to(?:\s|$)|…/;

/** Whether a given is drawn with two ends: as the recipe has it, or because somebody gave it a range. */
export function hasTwoEnds(given: Given, field: InputField): boolean {
  if (given.options || given.quantity === 'count') return false;
  if (given.value.low < given.value.high) return true;
  return field.state === 'read' && field.low < field.high;
}

/** The texts of a field's two ends. */
export function endsOf(field: InputField): readonly [string, string] {
  const text = field.state === 'read' ? field.understood : field.text;
  const [low = '', high] = text.split(RANGE_JOINT);
  if (high !== undefined) return [low, high];
  return field.state === 'read' ? [low, low] : [text, ''];
}

/** The field's text after one end was typed. An end that holds a range by itself, `±2 V`, stands for both. */
export function withEnd(field: InputField, end: 'low' | 'high', typed: string): string {
  if (RANGE_SIGN.test(typed)) return typed;
  const [low, high] = endsOf(field);
  return end === 'low' ? `${typed} to ${high}` : `${low} to ${typed}`;
}

const PLAIN_NUMBER = /^(\s*)([-−+]?)(\d+)(?:([.,])(\d+))?(?=$|[^\d.,])(.*)$/s;

/**
 * Steps the last digit shown: `4.70 kΩ` by 1 gives `4.71 kΩ`.
 * When it cannot: null, for a text that is not one number before its unit, such as `4k7` or `1e3 V`.
 */
export function stepText(text: string, steps: number): string | null {
  const match = PLAIN_NUMBER.exec(text);
  if (!match) return null;
  const [, lead = '', sign = '', whole = '', point = '', decimals = '', rest = ''] = match;
  if (/\d/.test(rest.replace(/[⁰¹²³⁴-⁹]/g, '')) || /^e[-+]?$/i.test(rest.trim())) return null;
  const size = BigInt(whole + decimals);
  const stepped = (sign === '-' || sign === '−' ? -size : size) + BigInt(steps);
  const digits = String(stepped < 0n ? -stepped : stepped).padStart(decimals.length + 1, '0');
  const split = digits.length - decimals.length;
  const number = digits.slice(0, split) + (decimals === '' ? '' : point + digits.slice(split));
  return `${lead}${stepped < 0n ? '−' : ''}${number}${rest}`;
}
