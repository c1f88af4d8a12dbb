import { zodResolver } from '@hookform/resolvers/zod';
import { type FormEvent, useState } from 'react';
import { type DefaultValues, type FieldErrors, type FieldValues, type Path, useForm } from 'react-hook-form';
import type * as z from 'zod';
import { type FieldError, fieldWords } from '#api';
import type { Result } from '#text';
import { announce } from './announce.tsx';

/** Why a form was not taken: one sentence, and what is wrong with single fields. The client's failures have this form. */
export interface Refusal {
  readonly message: string;
  readonly fields: readonly FieldError[];
}

export interface EndpointForm<Input extends FieldValues, Output extends FieldValues, Answer, F extends Refusal> {
  readonly schema: z.ZodType<Output, Input>;
  readonly defaultValues: DefaultValues<Input>;
  readonly send: (values: Output) => Promise<Result<Answer, F>>;
  readonly onDone: (answer: Answer, values: Output) => void | Promise<void>;
  readonly onRefused?: (failure: F) => void;
}

/**
 * The one behaviour of forms: errors appear on leaving a field and go while it is mended; sending with errors moves
 * the focus to the first and says how many; errors from the server land in the same places.
 */
export function useEndpointForm<Input extends FieldValues, Output extends FieldValues, Answer, F extends Refusal>(
  settings: EndpointForm<Input, Output, Answer, F>,
) {
  const form = useForm<Input, unknown, Output>({
    resolver: zodResolver<Input, unknown, Output>(settings.schema, { error: fieldWords }),
    defaultValues: settings.defaultValues,
    mode: 'onBlur',
    reValidateMode: 'onBlur',
  });
  const [refusal, setRefusal] = useState<F | null>(null);
  const [serverErrors, setServerErrors] = useState<Readonly<Record<string, string>>>({});
  const errors = form.formState.errors;

  const field = (name: Path<Input>) => {
    const registered = form.register(name, {
      onChange: () => {
        form.clearErrors(name);
        setServerErrors(({ [name]: _mended, ...others }) => others);
      },
    });
    return { ...registered, error: messageAt(errors, name) ?? serverErrors[name] };
  };

  const refuse = (failure: F) => {
    const known = failure.fields.filter((error) => error.field in form.getValues());
    // What stands by a field need not stand by the button as well.
    setRefusal(known.length > 0 ? null : failure);
    setServerErrors(Object.fromEntries(known.map((error) => [error.field, error.message])));
    settings.onRefused?.(failure);
    announce(failure.message, 'assertive');
    const first = Object.keys(form.getValues()).find((name) => known.some((error) => error.field === name));
    if (first !== undefined) form.setFocus(first as Path<Input>);
  };

  const sendValues = async (values: Output) => {
    setRefusal(null);
    const sent = await settings.send(values);
    if (sent.ok) {
      setServerErrors({});
      await settings.onDone(sent.value, values);
    } else refuse(sent.error);
  };

  const sayHowMany = (wrong: FieldErrors<Input>) => {
    announce(fieldsToMend(Object.keys(wrong).length), 'assertive');
  };

  const submit = form.handleSubmit(sendValues, sayHowMany);
  const shownCount = new Set([...Object.keys(errors), ...Object.keys(serverErrors)]).size;
  return {
    form,
    field,
    refusal,
    isSending: form.formState.isSubmitting,
    /** Said beside the button after a try with errors; null when nothing is wrong. */
    mending: form.formState.isSubmitted && shownCount > 0 ? fieldsToMend(shownCount) : null,
    onSubmit: (event: FormEvent) => {
      if (form.formState.isSubmitting) event.preventDefault();
      else void submit(event);
    },
  };
}

function fieldsToMend(count: number): string {
  return count === 1 ? '1 field needs a change.' : `${count} fields need a change.`;
}

function messageAt(errors: object, path: string): string | undefined {
  let at: unknown = errors;
  for (const key of path.split('.')) {
    if (typeof at !== 'object' || at === null) return undefined;
    at = Reflect.get(at, key);
  }
  if (typeof at !== 'object' || at === null || !('message' in at)) return undefined;
  return typeof at.message === 'string' && at.message !== '' ? at.message : undefined;
}
