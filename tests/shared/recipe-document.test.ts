import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import {
  type BodyNode,
  type CompileFacts,
  compareDocuments,
  compileRecipe,
  createCompiler,
  ELEMENTS,
  type RecipeDocument,
  searchText,
} from '#recipe';

const ROOT = new URL('../../', import.meta.url);
const STARTERS = filesOf('content/');
const SKELETONS = filesOf('content/skeletons/');
const SLUGS = Object.fromEntries(STARTERS.map((file) => [/^slug: (.*)$/m.exec(read(file))?.[1] ?? '', [1]]));
const FACTS: CompileFacts = { recipes: SLUGS };

function filesOf(folder: string): readonly string[] {
  return readdirSync(new URL(folder, ROOT))
    .filter((name) => name.endsWith('.mdx'))
    .map((name) => folder + name);
}

function read(file: string): string {
  return readFileSync(new URL(file, ROOT), 'utf8');
}

const PAGE = `---
title: A page
slug: a-page
summary: For a test.
hazards: [none]
keywords: [other name]
sources:
  book: A book, chapter 1
---

## First part

Words with $R_1$ and <Value of="one.W" />, see <Recipe slug="rail-splitter" />.

<Calculator id="one" title="First numbers">
  <Given name="U" label="Voltage in" quantity="voltage" value="2 V" />
  <Result name="W" label="Twice" formula="2 * U" />
  <Limit name="top" of="W" to="10 V" says="x" />
  <Example title="Three volts" source="book">
    <Set name="U" to="3 V" />
    <Expect name="W" to="6 V" />
  </Example>
</Calculator>

## First part

<Calculator id="two" title="Second numbers">
  <Given name="U" label="From above" quantity="voltage" value="2 V" from="one.W" />
  <Result name="Q" label="Squared" formula="U ^ 2" />
</Calculator>

<Note kind="layout">One sentence.</Note>
`;

describe('a document', () => {
  const { document, checks, diagnostics } = compileRecipe(PAGE, FACTS);

  test('holds front matter, body, calculators, headings with ids of their own, links and proof', () => {
    expect(diagnostics).toEqual([]);
    expect(document?.front).toMatchObject({ title: 'A page', hazards: [], reviewMonths: 24, topics: [] });
    expect(document?.headings).toEqual([
      { id: 'first-part', depth: 2, text: 'First part' },
      { id: 'first-part-2', depth: 2, text: 'First part' },
    ]);
    expect(document?.uses).toEqual([{ slug: 'rail-splitter' }]);
    expect(document?.proof).toEqual({
      formulas: 2,
      provenAgainstDrawing: 0,
      examples: 1,
      examplesPassed: 1,
      examplesFromOutside: 1,
    });
    expect(document?.calculators.map(({ id, order }) => [id, order])).toEqual([
      ['one', ['W']],
      ['two', ['Q']],
    ]);
    expect(checks).toEqual(document?.checks);
  });

  test('is plain JSON', () => {
    expect(JSON.parse(JSON.stringify(document))).toEqual(document);
  });

  test('puts the words of a note into a paragraph and keeps the place of elements', () => {
    const note = all(document?.body ?? []).find((node) => node.type === 'element' && node.tagName === 'recipe-note');
    const start = PAGE.indexOf('<Note');
    expect(note).toEqual({
      type: 'element',
      tagName: 'recipe-note',
      properties: { kind: 'layout' },
      children: [
        { type: 'element', tagName: 'p', properties: {}, children: [{ type: 'text', value: 'One sentence.' }] },
      ],
      span: { start, end: PAGE.length - 1 },
    });
  });

  test('has checks for dimensions, examples and voltages and none for drawings that are not there', () => {
    expect(checks.map(({ kind, title, passed }) => [kind, title, passed])).toEqual([
      ['dimensions', 'First numbers', true],
      ['dimensions', 'Second numbers', true],
      ['example', 'Three volts', true],
      ['caution', 'voltages', true],
    ]);
  });

  test('is null while an error stands, and the preview holds what could be made', () => {
    const faulty = compileRecipe(PAGE.replace('value="2 V" />', 'value="2 A" />'), FACTS);
    expect(faulty.document).toBeNull();
    expect(faulty.preview?.calculators[0]).toMatchObject({ id: 'one', givens: [], results: [], limits: [] });
    expect(
      all(faulty.preview?.body ?? []).some((node) => node.type === 'element' && node.tagName === 'recipe-value'),
    ).toBe(false);
  });

  test('has no preview where MDX cannot be read', () => {
    const broken = compileRecipe(`${PAGE}\n<Note>\n`, FACTS);
    expect(broken.preview).toBeNull();
    expect(broken.diagnostics.map(({ code }) => code)).toEqual(['unclosed-element']);
  });

  test('says what it cannot look up when it has no facts', () => {
    const { diagnostics: found, document: made } = compileRecipe(PAGE.replace('keywords', 'topics'), {});
    expect(found.map(({ severity, code }) => [severity, code])).toEqual([
      ['warning', 'not-checked-here'],
      ['warning', 'not-checked-here'],
    ]);
    expect(made).not.toBeNull();
  });

  test('refuses another slug than the one that was fixed', () => {
    const { diagnostics: found } = compileRecipe(PAGE, { ...FACTS, fixedSlug: 'another' });
    expect(found.map(({ code, start }) => [code, start.line, start.column])).toEqual([['slug-changed', 3, 7]]);
  });

  test('needs a hazard at a lower voltage where the team says so, and never only at a higher one', () => {
    const at = (volts: string, hazardVolts: number) =>
      compileRecipe(PAGE.replace('value="2 V" />', `value="${volts}" />`), { ...FACTS, hazardVolts }).diagnostics.map(
        ({ code }) => code,
      );
    expect(at('2.6 V', 5)).toEqual(['hazard-missing']);
    expect(at('4 V', 60)).toEqual([]);
    expect(at('22 V', 60)).toContain('hazard-missing');
  });
});

describe('texts beyond the limits are refused before the MDX parser sees them', () => {
  test.each([
    ['text-too-long', 'a '.repeat(50_001)],
    ['line-too-long', 'a '.repeat(10_001)],
    ['too-many-markers', `${'> '.repeat(21)}a`],
    ['too-many-brackets', '['.repeat(401)],
    ['too-many-braces', `{(\n${'}\n'.repeat(300)}`],
    ['too-many-marks', '*a _b '.repeat(1200)],
    ['too-many-marks', '- a\n'.repeat(1600)],
    ['too-many-blocks', 'a\n\n'.repeat(5001)],
    ['too-many-elements', '<Value of="a.b" />\n'.repeat(2001)],
    ['nesting-too-deep', '<Note>\n'.repeat(40)],
    ['too-many-formulas', '$a$ b\n\n'.repeat(501)],
    ['maths-too-long', `$${'a'.repeat(2001)}$`],
    ['byte-order-mark', '\ufeff---'],
  ])('%s', (code, text) => {
    expect(compileRecipe(text, {}).diagnostics.map((diagnostic) => diagnostic.code)).toContain(code);
  });

  test('lists nested deeper than 32 are told where that begins', () => {
    const text = Array.from({ length: 40 }, (_, i) => `${'  '.repeat(i)}- a\n`).join('');
    const found = compileRecipe(text, {}).diagnostics.find(({ code }) => code === 'nesting-too-deep');
    expect(found?.start.line).toBeGreaterThan(10);
  });
});

describe('a compiler that remembers', () => {
  const edits: readonly (readonly [string, string])[] = [
    ['formula="2 * U"', 'formula="3 * U + 1 V"'],
    ['formula="2 * U"', 'formula="2 * "'],
    ['formula="2 * U"', 'formula=""'],
    ['value="2 V" from', 'value="25 V" from'],
    ['to="6 V"', 'to="61 V"'],
    ['label="Twice"', 'label="Tw&amp;ice"'],
    ['label="Twice"', 'label="Tw"ice"'],
    ['formula="U ^ 2"', 'formula="U ^ 3"'],
    ['id="two"', 'id="one"'],
    ['Words with', 'Words  with'],
    ['name="top"', 'name="top end"'],
    ['slug: a-page', 'slug: a-pages'],
  ];

  test.each(edits)('gives after %s → %s what compiling from nothing gives, and after taking it back too', (was, is) => {
    const compile = createCompiler();
    compile(PAGE, FACTS);
    const edited = PAGE.replace(was, is);
    expect(edited).not.toBe(PAGE);
    expect(compile(edited, FACTS)).toEqual(compileRecipe(edited, FACTS));
    expect(compile(PAGE, FACTS)).toEqual(compileRecipe(PAGE, FACTS));
  });

  test('follows a formula that is typed sign by sign', () => {
    const compile = createCompiler();
    const [head = '', tail = ''] = PAGE.split('2 * U');
    for (const typed of [
      '',
      '2',
      '2 ',
      '2 *',
      '2 * ',
      '2 * U',
      '2 * U ',
      '2 * U +',
      '2 * U + 1',
      '2 * U + 1 V',
      '2 * U',
    ]) {
      const text = head + typed + tail;
      expect(compile(text, FACTS)).toEqual(compileRecipe(text, FACTS));
    }
  });
});

describe('whole recipes', () => {
  test.each([...STARTERS, ...SKELETONS])('%s compiles without an error and all its checks pass', (file) => {
    const { diagnostics, checks, document } = compileRecipe(read(file), FACTS);
    expect(diagnostics.filter(({ severity }) => severity === 'error')).toEqual([]);
    expect(checks.filter(({ passed }) => !passed)).toEqual([]);
    expect(document?.calculators.length).toBeGreaterThan(0);
  });

  test('there are eight starters and three skeletons', () => {
    expect([STARTERS.length, SKELETONS.length]).toEqual([8, 3]);
  });

  test('a recipe that uses the whole language has no error but what is not available yet', () => {
    const { diagnostics, preview } = compileRecipe(read('tests/cases/whole-recipe.mdx'), {});
    const errors = diagnostics.filter(({ severity }) => severity === 'error');
    expect([...new Set(errors.map(({ code }) => code))]).toEqual(['not-available-yet']);
    expect(preview?.drawings[0]?.parts.length).toBe(12);
    expect(preview?.calculators[0]?.results.map(({ name }) => name)).toContain('CMRR');
  });
});

describe('compareDocuments', () => {
  const before = documentOf(PAGE);

  test('finds nothing between a document and itself', () => {
    expect(compareDocuments(before, before)).toEqual([]);
  });

  test('gives each number that differs, at the recipe’s own values and in each example, through calculators that follow', () => {
    const after = documentOf(
      PAGE.replace('2 * U', '2 * U + 0 V * U / 1 V').replace(
        'quantity="voltage" value="2 V" />',
        'quantity="voltage" value="2.5 V" />',
      ),
    );
    expect(
      compareDocuments(before, after).map((change) => [change.example, change.result, change.before, change.after]),
    ).toEqual([
      ['the recipe’s own values', 'W', '4.000\u2009V', '5.000\u2009V'],
      ['the recipe’s own values', 'Q', expect.stringContaining('16.00'), expect.stringContaining('25.00')],
    ]);
  });

  test('gives null where a result is gone or new', () => {
    const after = documentOf(PAGE.replace('<Result name="Q"', '<Result name="Q2"'));
    expect(
      compareDocuments(before, after).map(({ result, before: was, after: is }) => [result, was === null, is === null]),
    ).toEqual([
      ['Q2', true, false],
      ['Q', false, true],
    ]);
  });
});

test('searchText takes names and labels once and the prose without its maths', () => {
  const found = searchText(documentOf(PAGE));
  expect(found).toMatchObject({ title: 'A page', keywords: ['other name'], purpose: '', number: '' });
  expect(found.labels).toEqual([
    'First part',
    'First numbers',
    'Voltage in',
    'Twice',
    'top',
    'Second numbers',
    'From above',
    'Squared',
  ]);
  expect(found.prose).toBe('First part Words with and , see . First part One sentence.');
});

test('every element has words for the language guide, and every attribute too', () => {
  for (const [name, row] of Object.entries(ELEMENTS)) {
    expect(row.help, name).toMatch(/\.$/);
    for (const [attribute, { help }] of Object.entries(row.attributes))
      expect(help, `${name} ${attribute}`).not.toBe('');
  }
});

function documentOf(text: string): RecipeDocument {
  const { document, diagnostics } = compileRecipe(text, FACTS);
  if (document === null) throw new Error(JSON.stringify(diagnostics));
  return document;
}

function all(nodes: readonly BodyNode[]): readonly BodyNode[] {
  return nodes.flatMap((node) => (node.type === 'text' ? [node] : [node, ...all(node.children)]));
}
