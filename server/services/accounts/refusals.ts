import type { Failure, FieldError } from '#api';

/** A refusal that lands in fields of a form. */
export function refusedFields(fields: readonly FieldError[]): Failure {
  const count = fields.length === 1 ? 'One field needs' : `${fields.length} fields need`;
  return { kind: 'invalid', detail: `${count} another value.`, fields };
}

export function refusedField(field: string, message: string): Failure {
  return refusedFields([{ field, message }]);
}
