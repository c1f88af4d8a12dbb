import {
  autocompletion,
  type Completion,
  type CompletionContext,
  type CompletionResult,
  snippetCompletion,
} from '@codemirror/autocomplete';
import type { Extension } from '@codemirror/state';
import { KINDS } from '#quantity';
import { type AttributeRow, ELEMENTS, type ElementRow, HAZARDS } from '#recipe';
import { attributeValue, enclosing, type SourceAttribute, type SourceTag, sourceTags } from './source-tags.ts';
import { elementRow } from './tag-colours.ts';

/** Offers what may stand at the cursor: keys, elements, attributes, words, names of the calculator, units. */
export function recipeCompletion(): Extension {
  return autocompletion({ override: [completeRecipe], icons: false });
}

export function completeRecipe(context: CompletionContext): CompletionResult | null {
  const text = context.state.doc.toString();
  const at = context.pos;
  const front = /^---\n[\s\S]*?\n---/.exec(text);
  if (front !== null && at <= front[0].length) return completeFront(context);
  const tags = sourceTags(text);
  const tag = tags.find((each) => each.from < at && at <= each.to && !(at === each.to && each.kind !== 'unfinished'));
  if (tag === undefined) return completeElement(context, enclosing(tags, at));
  if (at <= tag.nameFrom + tag.name.length) return completeElement(context, enclosing(tags, tag.from));
  const row = elementRow(tag.name);
  if (row === undefined || tag.kind === 'close') return null;
  const attribute = tag.attributes.find((each) => at >= each.valueFrom && at <= each.valueTo);
  if (attribute === undefined) return completeAttribute(context, tag, row);
  const known = row.attributes[attribute.name];
  return known === undefined ? null : completeValue(context, { text, tags, tag, attribute, row: known });
}

const FRONT_KEYS: Readonly<Record<string, string>> = {
  title: 'The name of the recipe.',
  summary: 'One line: what it does.',
  slug: 'Its address: small letters, digits and hyphens.',
  hazards: 'What can hurt, or none.',
  number: 'A short number, such as DA-03.',
  purpose: 'What the reader wants to do.',
  topics: 'A list of the topics of the team.',
  keywords: 'Other names that people search by.',
  supply: 'single, split or none.',
  review_months: 'When it is looked at again.',
  sources: 'Ids and full names of books, standards, data sheets.',
};

function completeFront(context: CompletionContext): CompletionResult | null {
  const line = context.state.doc.lineAt(context.pos);
  const before = line.text.slice(0, context.pos - line.from);
  const key = /^(\w+):/.exec(before)?.[1];
  const word = context.matchBefore(/[\w-]*$/);
  const from = word?.from ?? context.pos;
  if (key === undefined) {
    if (!/^\w*$/.test(before) || (before === '' && !context.explicit)) return null;
    return {
      from: line.from,
      options: Object.entries(FRONT_KEYS).map(([name, info]) => ({ label: name, apply: `${name}: `, info })),
    };
  }
  const words = key === 'hazards' ? [...HAZARDS, 'none'] : key === 'supply' ? ['single', 'split', 'none'] : [];
  return words.length === 0 ? null : { from, options: words.map((label) => ({ label })) };
}

function completeElement(context: CompletionContext, open: readonly SourceTag[]): CompletionResult | null {
  const word = context.matchBefore(/<\/?[A-Za-z]*$/);
  if (word === null) return null;
  const inside = open.at(-1);
  if (word.text.startsWith('</')) {
    return inside === undefined ? null : { from: word.from, options: [{ label: `</${inside.name}>` }] };
  }
  const home = inside?.name;
  const fits = (row: ElementRow) =>
    !row.later &&
    (home === 'Calculator' || home === 'Example'
      ? row.inside === home
      : row.inside === 'page' || row.inside === 'text');
  const options = Object.entries(ELEMENTS)
    .filter(([, row]) => fits(row))
    .map(([name, row]) => snippetCompletion(templateOf(name, row), { label: `<${name}`, info: row.help }));
  return { from: word.from, options, validFor: /^<[A-Za-z]*$/ };
}

/** Attributes that may be left out, and hardly ever are. */
const USUAL: Readonly<Record<string, readonly string[]>> = {
  Result: ['formula'],
  Limit: ['to'],
  Expect: ['name', 'to'],
};

/** The element with what it must have; fields are visited with Tab while the snippet is open. */
export function templateOf(name: string, row: ElementRow): string {
  const wanted = USUAL[name] ?? [];
  const required = Object.entries(row.attributes).filter(([key, { required }]) => required || wanted.includes(key));
  const typed = required.map(([attribute]) => ` ${attribute}="\${}"`).join('');
  if (row.holds === 'nothing') return `<${name}${typed} />\${}`;
  return `<${name}${typed}>\n\${}\n</${name}>`;
}

function completeAttribute(context: CompletionContext, tag: SourceTag, row: ElementRow): CompletionResult | null {
  const word = context.matchBefore(/[A-Za-z_]*$/);
  const before = context.state.sliceDoc(Math.max(0, (word?.from ?? context.pos) - 1), word?.from ?? context.pos);
  if (!/\s/.test(before) || (word?.text === '' && !context.explicit)) return null;
  const given = new Set(tag.attributes.map((attribute) => attribute.name));
  const options = Object.entries(row.attributes)
    .filter(([name, attribute]) => !attribute.later && !given.has(name))
    .map(([name, attribute]) =>
      snippetCompletion(`${name}="\${}"`, {
        label: name,
        info: attribute.help,
        boost: attribute.required ? 1 : 0,
      }),
    );
  return { from: word?.from ?? context.pos, options, validFor: /^[A-Za-z_]*$/ };
}

interface AtValue {
  readonly text: string;
  readonly tags: readonly SourceTag[];
  readonly tag: SourceTag;
  readonly attribute: SourceAttribute;
  readonly row: AttributeRow;
}

function completeValue(context: CompletionContext, at: AtValue): CompletionResult | null {
  const { row, attribute } = at;
  const from = attribute.valueFrom;
  if (row.values !== undefined) return { from, options: row.values.map((label) => ({ label })) };
  if (row.reader === 'value') return completeUnit(context, at);
  if (row.reader === 'formula') {
    const word = context.matchBefore(/[A-Za-z_]\w*$/);
    const isUnit = word !== null && /[\d.]\s?$/.test(context.state.sliceDoc(Math.max(0, word.from - 2), word.from));
    if (isUnit || (word === null && !context.explicit)) return null;
    return {
      from: word?.from ?? context.pos,
      options: [...calculatorNames(at), ...FUNCTIONS],
      validFor: /^\w*$/,
    };
  }
  const options = references(at);
  return options.length === 0 ? null : { from, options };
}

function completeUnit(context: CompletionContext, { text, tag }: AtValue): CompletionResult | null {
  const kind = attributeValue(text, tag, 'quantity');
  const row = Object.entries(KINDS).find(([name]) => name === kind)?.[1];
  const typed = context.matchBefore(/\d\s?[A-Za-zµΩ°%]*$/);
  if (row === undefined || row.unit === '' || typed === null) return null;
  const from = typed.from + (/^\d\s?/.exec(typed.text)?.[0].length ?? 1);
  const prefixes = PREFIXED.has(row.unit) ? ['', 'k', 'M', 'G', 'm', 'µ', 'n', 'p'] : [''];
  const gap = typed.text.charAt(1) === ' ' ? '' : ' ';
  return { from, options: prefixes.map((prefix) => unitOption(prefix + row.unit, gap)), filter: false };
}

const PREFIXED: ReadonlySet<string> = new Set(['V', 'A', 'Ω', 'S', 'F', 'H', 'Hz', 's', 'W', 'J', 'C', 'm']);

function unitOption(unit: string, gap: string): Completion {
  return { label: unit, apply: gap + unit };
}

/** Names that formulas of the calculator around this place may use. */
function calculatorNames({ text, tags, tag }: AtValue): readonly Completion[] {
  const calculator = enclosing(tags, tag.from).find((each) => each.name === 'Calculator');
  if (calculator === undefined) return [];
  return membersOf(text, tags, calculator).flatMap((member) => {
    const name = attributeValue(text, member, 'name');
    if (name === undefined || name === '' || member.from === tag.from) return [];
    return [{ label: name, detail: attributeValue(text, member, 'label') ?? '', boost: 1 }];
  });
}

function membersOf(text: string, tags: readonly SourceTag[], calculator: SourceTag): readonly SourceTag[] {
  const end = tags.find((tag) => tag.kind === 'close' && tag.name === 'Calculator' && tag.from > calculator.from);
  const to = end?.from ?? text.length;
  return tags.filter(
    (tag) => (tag.name === 'Given' || tag.name === 'Result') && tag.from > calculator.from && tag.to <= to,
  );
}

function references(at: AtValue): readonly Completion[] {
  const { text, tags, tag, attribute } = at;
  if (tag.name === 'Value' || attribute.name === 'from') {
    return tags
      .filter((each) => each.name === 'Calculator' && each.kind === 'open')
      .flatMap((calculator) => {
        const id = attributeValue(text, calculator, 'id') ?? '';
        return membersOf(text, tags, calculator).map((member) => ({
          label: `${id}.${attributeValue(text, member, 'name') ?? ''}`,
          detail: attributeValue(text, member, 'label') ?? '',
        }));
      });
  }
  if (tag.name === 'Set' || (tag.name === 'Expect' && attribute.name === 'name')) return calculatorNames(at);
  if (tag.name === 'Expect' && attribute.name === 'limit') {
    return tags
      .filter((each) => each.name === 'Limit')
      .map((each) => ({ label: attributeValue(text, each, 'name') ?? '' }));
  }
  if (tag.name === 'Example' && attribute.name === 'source') return sources(text);
  return [];
}

function sources(text: string): readonly Completion[] {
  const listed = /^sources:\n((?:[ \t]+.*\n)*)/m.exec(text)?.[1] ?? '';
  const ids = [...listed.matchAll(/^[ \t]+([\w-]+):\s*(.*)$/gm)].map(([, label = '', detail = '']) => ({
    label,
    detail,
  }));
  return [...ids, ...['own arithmetic', 'common practice', 'from memory'].map((label) => ({ label }))];
}

const CALLS: readonly (readonly [name: string, shape: string, info: string])[] = [
  ['sqrt', 'x', 'Square root.'],
  ['abs', 'x', 'Size without sign.'],
  ['min', 'a, b', 'The least.'],
  ['max', 'a, b', 'The greatest.'],
  ['exp', 'x', 'e to the power of x.'],
  ['ln', 'x', 'Natural logarithm.'],
  ['log10', 'x', 'Logarithm to base 10.'],
  ['sin', 'x', 'Sine of an angle.'],
  ['cos', 'x', 'Cosine of an angle.'],
  ['tan', 'x', 'Tangent of an angle.'],
  ['asin', 'x', 'Arc sine.'],
  ['acos', 'x', 'Arc cosine.'],
  ['atan', 'x', 'Arc tangent.'],
  ['atan2', 'y, x', 'Angle of a point.'],
  ['hypot', 'a, b', 'Root of the sum of squares.'],
  ['floor', 'x', 'Next whole number below.'],
  ['ceil', 'x', 'Next whole number above.'],
  ['round', 'x', 'Nearest whole number.'],
  ['sign', 'x', '−1, 0 or 1.'],
  ['if', 'test, a, b', 'a where the test holds, else b.'],
  ['parallel', 'a, b', 'Resistances side by side.'],
  ['db', 'x', 'Level of a ratio: 20·log10|x|.'],
  ['from_db', 'x', 'Ratio of a level.'],
  ['db_power', 'x', 'Level of a ratio of powers: 10·log10|x|.'],
  ['from_db_power', 'x', 'Ratio of powers of a level.'],
];

const FUNCTIONS: readonly Completion[] = CALLS.map(([name, shape, info]) =>
  snippetCompletion(
    `${name}(${shape
      .split(', ')
      .map((word) => `\${${word}}`)
      .join(', ')})`,
    { label: name, detail: `(${shape})`, info },
  ),
);
