import type { Choice } from '#calculator';
import { type CheckedExpr, type Expr, typeWords } from '#formula';
import { type Dimension, kindOfDimension, sameDimension } from '#quantity';
import { type Span, span } from '#text';
import { type Attributes, readName, readWhole } from './attributes.ts';
import type { ElementBlock } from './blocks.ts';
import { readUncertainty, textsOf } from './build-given.ts';
import type { Names } from './names.ts';
import type { Problems } from './problems.ts';
import type { AttributeText } from './scan-tags.ts';

/** A name with the place where it is made. */
export interface MadeName {
  readonly name: string;
  readonly span: Span;
}

/** The names that a Choose makes: its own, then its twins. */
export function chosenNames(attributes: Attributes, problems: Problems): readonly MadeName[] {
  const own = [...piecesOf(attributes.get('name'), /[^\s]+/g), ...piecesOf(attributes.get('names'), /[^\s,]+/g)];
  const twins = twinsOf(attributes).map(({ name }) => name);
  return [...own, ...twins].filter((made) => readName(made.name, made.span, problems) !== null);
}

/** Offsets hold as long as the value has no entities, which no name has. */
function piecesOf(attribute: AttributeText | undefined, pattern: RegExp): readonly MadeName[] {
  if (attribute === undefined) return [];
  return [...attribute.text.matchAll(pattern)].map((match) => {
    const start = attribute.value.start + match.index;
    return { name: match[0], span: span(start, start + match[0].length) };
  });
}

function twinsOf(attributes: Attributes): readonly { readonly name: MadeName; readonly of: string }[] {
  return piecesOf(attributes.get('twins'), /[^;]+/g).flatMap(({ name: pair, span: place }) => {
    const [, lead = '', name, of] = /^(\s*)(\w+)\s*:\s*(\w+)\s*$/.exec(pair) ?? [];
    if (name === undefined || of === undefined) return [];
    const start = place.start + lead.length;
    return [{ name: { name, span: span(start, start + name.length) }, of }];
  });
}

/** The formulas that a choice reads before it is made; `best` reads its own names as well and comes after. */
export function choiceFormulas(attributes: Attributes, names: Names): readonly Expr[] {
  const near = attributes.get('near');
  const within = attributes.get('within');
  const places = [...(near === undefined ? [] : [near.value]), ...(within === undefined ? [] : halves(within, names))];
  return places.map((place) => names.parse(place));
}

function halves({ value }: AttributeText, { source, problems }: Names): readonly Span[] {
  let depth = 0;
  for (let at = value.start; at < value.end; at++) {
    const sign = source.charAt(at);
    if (sign === '(') depth++;
    else if (sign === ')') depth--;
    else if (sign === ',' && depth === 0) return [span(value.start, at), span(at + 1, value.end)];
  }
  problems.error('within-form', value);
  return [];
}

/** The dimension of the chosen values, from the formulas they are chosen by. */
export function choiceType(
  checked: readonly (CheckedExpr | null)[],
  place: Span,
  problems: Problems,
): Dimension | null {
  const [first, second] = checked;
  if (!first || first.type === 'truth' || second === null) return null;
  if (second !== undefined && (second.type === 'truth' || !sameDimension(first.type, second.type))) {
    problems.error('within-dimension', place, { lowest: typeWords(first.type), highest: typeWords(second.type) });
    return null;
  }
  return first.type;
}

export function buildChoice(
  block: ElementBlock,
  attributes: Attributes,
  checked: readonly (CheckedExpr | null)[],
  type: Dimension | null,
  names: Names,
): Choice | null {
  const { problems } = names;
  const made = [...piecesOf(attributes.get('name'), /[^\s]+/g), ...piecesOf(attributes.get('names'), /[^\s,]+/g)];
  const [first, second] = checked;
  const best = attributes.get('best');
  const bestChecked = best === undefined ? null : names.read(best.value);
  const keep = attributes.get('keep');
  const kept = keep === undefined ? null : readWhole(keep, 1, 100, problems);
  if (made.length === 0) {
    problems.error('missing-attribute', block.nameSpan, { element: 'Choose', names: ['name'] });
  }
  const hasNear = attributes.has('near');
  if (!hasNear && !attributes.has('within')) {
    problems.error('missing-attribute', block.nameSpan, { element: 'Choose', names: ['near'] });
  }
  const uncertainty = readUncertainty(attributes, type === null ? null : kindOfDimension(type), type, names);
  if (!first || type === null) return null;
  const round = attributes.get('round')?.text as Choice['round'];
  return {
    ...uncertainty,
    names: made.map(({ name }) => name),
    label: attributes.get('label')?.text ?? '',
    series: (attributes.get('series')?.text ?? '').split('|').map((series) => series.trim()),
    ...(hasNear ? { near: first } : second ? { within: [first, second] as const } : {}),
    ...(round === undefined ? {} : { round }),
    ...(bestChecked === null ? {} : { best: bestChecked }),
    ...(kept === null ? {} : { keep: kept }),
    twins: twinsOf(attributes).map(({ name, of }) => ({ name: name.name, of })),
    ...textsOf(attributes, ['note']),
    span: block.span,
  };
}
