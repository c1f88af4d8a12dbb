import { type ComponentProps, type ReactNode, useId, useState } from 'react';

export interface FieldFrame {
  readonly label: ReactNode;
  readonly hint?: ReactNode;
  readonly error?: string | undefined;
  readonly optional?: boolean;
}

interface Tied {
  readonly id: string;
  readonly 'aria-describedby': string | undefined;
  readonly 'aria-invalid': true | undefined;
}

interface FrameProps extends FieldFrame {
  readonly aside?: ReactNode;
  readonly children: (tied: Tied) => ReactNode;
}

/** Label above, hint and error beneath, all tied to the control that `children` draws with the ids given. */
export function Field({ label, hint, error, optional, aside, children }: FrameProps) {
  const id = useId();
  const describedBy = [hint === undefined ? '' : `${id}-hint`, error === undefined ? '' : `${id}-error`];
  return (
    <div className="field">
      <div className="flex min-h-5 items-baseline justify-between gap-4">
        <label className="lab" htmlFor={id}>
          {label}
          {optional && ' (may stay empty)'}
        </label>
        {aside}
      </div>
      {children({
        id,
        'aria-describedby': describedBy.filter(Boolean).join(' ') || undefined,
        'aria-invalid': error === undefined ? undefined : true,
      })}
      {error !== undefined && (
        <p id={`${id}-error`} className="field-error">
          {error}
        </p>
      )}
      {hint !== undefined && (
        <p id={`${id}-hint`} className="note">
          {hint}
        </p>
      )}
    </div>
  );
}

export type TextFieldProps = FieldFrame & Omit<ComponentProps<'input'>, 'id'>;

export function TextField({ label, hint, error, optional, className = '', ...input }: TextFieldProps) {
  return (
    <Field label={label} hint={hint} error={error} {...(optional ? { optional } : {})}>
      {(tied) => <input type="text" {...input} {...tied} className={`field-box ${className}`} />}
    </Field>
  );
}

export function PasswordField({ label, hint, error, ...input }: Omit<TextFieldProps, 'type'>) {
  const [isShown, setShown] = useState(false);
  const toggle = (
    <button type="button" className="btn-text text-label" aria-pressed={isShown} onClick={() => setShown(!isShown)}>
      {isShown ? 'hide' : 'show'}
      <span className="sr-only"> what is typed under {label}</span>
    </button>
  );
  return (
    <Field label={label} hint={hint} error={error} aside={toggle}>
      {(tied) => (
        <input
          {...input}
          {...tied}
          type={isShown ? 'text' : 'password'}
          autoCapitalize="none"
          spellCheck={false}
          className="field-box"
        />
      )}
    </Field>
  );
}

export type TextAreaProps = FieldFrame & Omit<ComponentProps<'textarea'>, 'id'>;

export function TextArea({ label, hint, error, optional, className = '', ...area }: TextAreaProps) {
  return (
    <Field label={label} hint={hint} error={error} {...(optional ? { optional } : {})}>
      {(tied) => <textarea {...area} {...tied} className={`field-box ${className}`} />}
    </Field>
  );
}

export interface SelectFieldProps extends FieldFrame, Omit<ComponentProps<'select'>, 'id' | 'children'> {
  readonly options: readonly { readonly value: string; readonly label: string }[];
}

/** The platform's own list: it is the most accessible one, on a phone above all. */
export function SelectField({ label, hint, error, optional, options, ...select }: SelectFieldProps) {
  return (
    <Field label={label} hint={hint} error={error} {...(optional ? { optional } : {})}>
      {(tied) => (
        <select {...select} {...tied} className="field-box">
          {options.map((option) => (
            <option key={option.value} value={option.value}>
              {option.label}
            </option>
          ))}
        </select>
      )}
    </Field>
  );
}

export type CheckboxProps = Omit<FieldFrame, 'optional'> & Omit<ComponentProps<'input'>, 'id' | 'type'>;

export function Checkbox({ label, hint, error, ...input }: CheckboxProps) {
  const id = useId();
  const describedBy = [hint === undefined ? '' : `${id}-hint`, error === undefined ? '' : `${id}-error`];
  return (
    <div>
      <label className="check" htmlFor={id}>
        <input
          {...input}
          id={id}
          type="checkbox"
          aria-describedby={describedBy.filter(Boolean).join(' ') || undefined}
          aria-invalid={error === undefined ? undefined : true}
        />
        <span>{label}</span>
      </label>
      {error !== undefined && (
        <p id={`${id}-error`} className="field-error pl-6">
          {error}
        </p>
      )}
      {hint !== undefined && (
        <p id={`${id}-hint`} className="note pl-6">
          {hint}
        </p>
      )}
    </div>
  );
}

export interface SegmentsProps<T extends string> {
  readonly label: string;
  readonly options: readonly { readonly value: T; readonly label: string }[];
  readonly value: T;
  readonly onChange: (value: T) => void;
}

/** A few choices side by side, one of them chosen (ink fill): a radio group. */
export function Segments<T extends string>({ label, options, value, onChange }: SegmentsProps<T>) {
  const name = useId();
  return (
    <fieldset>
      <legend className="lab mb-1">{label}</legend>
      <div className="segments">
        {options.map((option) => (
          <label key={option.value}>
            <input
              type="radio"
              name={name}
              value={option.value}
              checked={option.value === value}
              onChange={() => onChange(option.value)}
            />
            {option.label}
          </label>
        ))}
      </div>
    </fieldset>
  );
}
