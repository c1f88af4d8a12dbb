import type * as z from 'zod';

const FORMATS: Readonly<Record<string, string>> = {
  email: 'an e-mail address',
  url: 'an address such as https://bench.example',
  uuid: 'an id',
  datetime: 'an instant such as 2026-03-14T09:30:00.000Z',
  date: 'a date such as 2026-03-14',
};

/** Says what is wrong with a field where the contract gives no words of its own: for server and client alike. */
export function fieldWords(issue: z.core.$ZodRawIssue): string | undefined {
  switch (issue.code) {
    case 'invalid_type':
      return issue.input === undefined
        ? 'This field is needed.'
        : `Unexpected ${nameOf(issue.input)}, expected ${issue.expected}.`;
    case 'invalid_format':
      return `Unexpected text, expected ${FORMATS[issue.format] ?? 'another form'}.`;
    case 'invalid_value':
      return `Unexpected value, expected ${issue.values.map(String).join(', ')}.`;
    case 'too_small':
      return issue.origin === 'string'
        ? `Use at least ${issue.minimum} characters.`
        : `Expected at least ${issue.minimum}.`;
    case 'too_big':
      return issue.origin === 'string'
        ? `Use at most ${issue.maximum} characters.`
        : `Expected at most ${issue.maximum}.`;
    default:
      return undefined;
  }
}

function nameOf(value: unknown): string {
  if (value === null) return 'nothing';
  return Array.isArray(value) ? 'list' : typeof value;
}
