import { type FocusEvent, type KeyboardEvent, useId, useRef, useState } from 'react';
import { fieldMessage, type Given, type InputField } from '#calculator';
import { endsOf, hasTwoEnds, stepText, withEnd } from './field-text.ts';
import { Letter } from './letter.tsx';
import { useLingering } from './use-lingering.ts';

export interface GivenFieldProps {
  readonly given: Given;
  readonly field: InputField;
  /** The title of the calculator above that the value comes from. */
  readonly fromTitle: string | undefined;
  readonly onChange: (text: string | null) => void;
  readonly onBegin: () => void;
  readonly onSettle: () => void;
}

/** One input with its label and letter; what was typed stays, with what was understood of it or why it was refused beneath. */
export function GivenField(props: GivenFieldProps) {
  const { given, field } = props;
  const id = useId();
  const [isFocused, setFocused] = useState(false);
  const root = useRef<HTMLDivElement>(null);
  const atFocus = useRef<string | null>(null);
  const refusal = field.state === 'refused' ? fieldMessage(field.problem) : null;
  const below = useLingering(noteFor(props, isFocused));
  const ids = [refusal ? `${id}-error` : '', below === null ? '' : `${id}-note`].filter(Boolean).join(' ') || undefined;
  const enter = () => {
    if (isFocused) return;
    setFocused(true);
    atFocus.current = field.origin === 'typed' ? field.text : null;
    props.onBegin();
  };
  const leave = (event: FocusEvent) => {
    if (event.relatedTarget instanceof Node && root.current?.contains(event.relatedTarget)) return;
    setFocused(false);
    props.onSettle();
  };
  const putBack = () => props.onChange(atFocus.current);
  const tied: Tied = {
    'aria-describedby': ids,
    'aria-invalid': refusal ? true : undefined,
    onFocus: enter,
    onBlur: leave,
  };
  const shared = { ...props, tied, id, putBack };
  return (
    <div ref={root} className="given" data-origin={field.origin} data-refused={refusal ? '' : undefined}>
      <span className="given-label">
        <label htmlFor={id}>{given.label}</label> <Letter name={given.name} />
      </span>
      <div className="given-entry">
        {given.options ? (
          <OptionField {...shared} />
        ) : hasTwoEnds(given, field) ? (
          <RangeField {...shared} />
        ) : (
          <SingleField {...shared} />
        )}
        {given.reading !== undefined && <span className="given-reading">{READING_WORDS[given.reading]}</span>}
      </div>
      {refusal && (
        <p id={`${id}-error`} className="field-error given-below">
          {refusal.message} {refusal.hint}
        </p>
      )}
      {below !== null && (
        <p id={`${id}-note`} className="note given-below">
          {below}
        </p>
      )}
    </div>
  );
}

const READING_WORDS = { rms: 'RMS', peak: 'peak', 'peak-to-peak': 'peak to peak' } as const satisfies Record<
  NonNullable<Given['reading']>,
  string
>;

/** What was understood while it differs from what stands there, where the value comes from, and the author's note. */
function noteFor({ given, field, fromTitle }: GivenFieldProps, isFocused: boolean): string | null {
  const parts: string[] = [];
  const isEcho = field.state === 'read' && !given.options && simple(field.text) !== simple(field.understood);
  if (isEcho && (isFocused || field.origin === 'typed')) parts.push(`Read as ${field.understood}.`);
  if (field.state === 'waiting') parts.push(`Waiting: ${field.because}.`);
  if (field.origin === 'earlier' && fromTitle !== undefined) parts.push(`From “${fromTitle}”.`);
  if (field.state === 'read' && field.notValid.length > 0) parts.push(`Not valid there: ${field.notValid.join(', ')}.`);
  if (given.note !== undefined) parts.push(given.note);
  return parts.length === 0 ? null : parts.join(' ');
}

/** The same but for kinds of minus and space. */
function simple(text: string): string {
  return text.replaceAll('−', '-').replaceAll(/\s+/g, ' ').trim();
}

interface Tied {
  readonly 'aria-describedby': string | undefined;
  readonly 'aria-invalid': true | undefined;
  readonly onFocus: () => void;
  readonly onBlur: (event: FocusEvent) => void;
}

interface EntryProps extends GivenFieldProps {
  readonly id: string;
  readonly tied: Tied;
  readonly putBack: () => void;
}

function SingleField({ given, field, id, tied, onChange, onSettle, putBack }: EntryProps) {
  return (
    <input
      {...tied}
      id={id}
      className="given-box"
      value={field.text}
      placeholder={field.state === 'waiting' ? 'waiting' : undefined}
      {...TYPING}
      data-name={given.name}
      onChange={(event) => onChange(event.target.value)}
      onKeyDown={(event) =>
        onFieldKey(event, { text: steppable(field, field.text), onStep: onChange, onKeep: onSettle, putBack })
      }
    />
  );
}

/** A phone's keyboard with letters: units are typed. */
const TYPING = { type: 'text', autoComplete: 'off', autoCapitalize: 'none', spellCheck: false } as const;

function RangeField({ given, field, id, tied, onChange, onSettle, putBack }: EntryProps) {
  // What stands in the end that is being typed in, as long as it is what the field's text was made from.
  const [typing, setTyping] = useState<{ end: 'low' | 'high'; typed: string; text: string } | null>(null);
  const ends = endsOf(field);
  const end = (which: 'low' | 'high') => {
    const own = ends[which === 'low' ? 0 : 1];
    const isTyped = typing?.end === which && typing.text === field.text;
    const type = (typed: string) => {
      const text = withEnd(field, which, typed);
      setTyping({ end: which, typed, text });
      onChange(text);
    };
    const keep = () => {
      setTyping(null);
      onSettle();
    };
    const back = () => {
      setTyping(null);
      putBack();
    };
    return (
      <input
        {...tied}
        id={which === 'low' ? id : `${id}-high`}
        aria-label={`${given.label}, ${which === 'low' ? 'lowest' : 'highest'}`}
        className="given-box given-box-end"
        value={isTyped ? typing.typed : own}
        {...TYPING}
        data-name={given.name}
        onChange={(event) => type(event.target.value)}
        onBlur={(event) => {
          setTyping(null);
          tied.onBlur(event);
        }}
        onKeyDown={(event) =>
          onFieldKey(event, { text: isTyped ? typing.typed : own, onStep: type, onKeep: keep, putBack: back })
        }
      />
    );
  };
  return (
    <>
      {end('low')}
      <em className="given-to">to</em>
      {end('high')}
    </>
  );
}

function OptionField({ given, field, id, tied, onChange }: EntryProps) {
  const options = given.options ?? [];
  const chosen = field.state === 'read' ? options.find((option) => option.value === field.low)?.text : undefined;
  return (
    <select
      {...tied}
      id={id}
      className="given-box given-box-list"
      value={chosen ?? ''}
      data-name={given.name}
      onChange={(event) => onChange(event.target.value)}
    >
      {chosen === undefined && <option value="">{field.text}</option>}
      {options.map((option) => (
        <option key={option.text} value={option.text}>
          {option.label}
        </option>
      ))}
    </select>
  );
}

/** The text to step: as it stands, or as understood where it is written otherwise (`4k7`). */
function steppable(field: InputField, text: string): string {
  return stepText(text, 1) === null && field.state === 'read' ? field.understood : text;
}

interface FieldKeys {
  readonly text: string;
  readonly onStep: (text: string) => void;
  readonly onKeep: () => void;
  readonly putBack: () => void;
}

const COARSE_STEPS = 10;

/** ↑ ↓ step the last digit, with Shift by ten; Enter keeps; Esc puts back what stood there when the field got the focus. */
function onFieldKey(event: KeyboardEvent<HTMLInputElement>, { text, onStep, onKeep, putBack }: FieldKeys): void {
  if (event.altKey || event.ctrlKey || event.metaKey) return;
  switch (event.key) {
    case 'ArrowUp':
    case 'ArrowDown': {
      const size = event.shiftKey ? COARSE_STEPS : 1;
      const stepped = stepText(text, event.key === 'ArrowUp' ? size : -size);
      event.preventDefault();
      if (stepped !== null) onStep(stepped);
      return;
    }
    case 'Enter':
      event.preventDefault();
      onKeep();
      event.currentTarget.select();
      return;
    case 'Escape':
      event.preventDefault();
      putBack();
      return;
    default:
  }
}
