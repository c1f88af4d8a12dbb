import { describe, expect, test } from 'vitest';
import { type BodyNode, type Compiled, type CompileFacts, compileRecipe, createCompiler } from '#recipe';

const FACTS: CompileFacts = { recipes: { 'rail-splitter': [1] }, topics: ['noise'] };
const ROUNDS = 1000;

/** Signs and pieces that mean something to one of the parsers, and those that have broken parsers before. */
const PIECES = [
  ...['\n', '\n\n', '\r\n', '\t', ' ', '  ', '\u00a0', '\u0000', '\ud83e', '🧪', 'Ω', 'µ', '−', '\u202e'],
  ...[
    '<',
    '>',
    '</',
    '/>',
    '{',
    '}',
    '[',
    ']',
    '(',
    ')',
    '|',
    '`',
    '```\n',
    '~~~\n',
    '$',
    '$$',
    '$$\n',
    '\\',
    '&',
    '&lt;',
    '&#106;',
  ],
  ...[
    '*',
    '**',
    '_',
    '~~',
    '#',
    '## ',
    '- ',
    '1. ',
    '> ',
    '---\n',
    '| a | b |\n|---|---|\n',
    '[^a]',
    '[^a]: x\n',
    '![',
    '](',
    '[a]: ',
  ],
  ...[
    'javascript:alert(1)',
    'data:text/html,x',
    '//host',
    'https://example.org',
    'mailto:a@b.c',
    '#one',
    'www.a.b',
    '<!-- x -->',
  ],
  ...[
    '<script>',
    '</script>',
    '<img src="x" onerror="alert(1)" />',
    '<a href="javascript:x">',
    '<style>',
    '<iframe />',
    '<svg onload="x">',
  ],
  ...[
    '<Note kind="layout">',
    '<Note>',
    '</Note>',
    '<Caution kind="mains">',
    '</Caution>',
    '<Value of="c.a" />',
    '<Value of="',
    '" />',
  ],
  ...['<Calculator id="c" title="t">', '</Calculator>', '<Given name="a" label="a" quantity="voltage" value="2 V" />'],
  ...[
    '<Result name="b" label="b" formula="a * 2" />',
    '<Result name="d" label="d" formula="',
    '<Limit name="l" of="b" to="3 V" says="x" />',
  ],
  ...[
    '<Example title="e" source="from memory">',
    '<Set name="a" to="3 V" />',
    '<Expect name="b" to="6 V" />',
    '</Example>',
  ],
  ...[
    '<Recipe slug="rail-splitter" />',
    '<Recipe slug="constructor" />',
    '<Drawing id="d" title="t">',
    '<Part kind="x" />',
    '</Drawing>',
  ],
  ...[
    '{...x}',
    '{/* x */}',
    '{/* ',
    ' */}',
    '{`x`}',
    'import x from "y"\n',
    'export default x\n',
    '__proto__="x"',
    'constructor',
    'style="x"',
  ],
  ...[
    '$\\frac{1}{2}$',
    '$\\href{javascript:x}{y}$',
    '$\\def\\a{\\a\\a}\\a$',
    '\\includegraphics{x}',
    '\\htmlStyle{color:red}{x}',
  ],
  ...[
    '1e999 V',
    '-0 V',
    '99999999999999999999 V',
    '±2 V',
    '2 V to 1 V',
    '4k7',
    '1,5 V',
    'sqrt(',
    'if(a > 1 V, ',
    'parallel(',
    ' ^ ',
    ' and ',
  ],
  ...[
    'title: x\n',
    'hazards: [mains]\n',
    'sources:\n  a: b\n',
    '? [\n',
    '&x *x\n',
    '!!js/function x\n',
    '<<: *x\n',
    '"',
    "'",
    ':',
    '=',
    'words',
  ],
];

const FRONT = '---\ntitle: A page\nslug: a-page\nsummary: For a test.\nhazards: [none]\n---\n\n';

/** Source: mulberry32 of Tommy Ettinger, from memory; any small generator with a seed would do. */
function generator(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let mixed = Math.imul(state ^ (state >>> 15), 1 | state);
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed;
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296;
  };
}

function pageOf(random: () => number): string {
  const length = 1 + Math.floor(random() * 24);
  const pieces = Array.from({ length }, () => PIECES[Math.floor(random() * PIECES.length)] ?? '');
  return (random() < 0.7 ? FRONT : '') + pieces.join(random() < 0.3 ? '\n' : '');
}

const TAGS =
  /^(?:p|h[2-6]|ul|ol|li|blockquote|pre|code|em|strong|del|a|br|hr|table|thead|tbody|tr|th|td|sup|section|input|span|m(?:ath|row|i|o|n|text|space|frac|sqrt|root|sub|sup|subsup|under|over|underover|table|tr|td|padded|style|phantom)|menclose|recipe-(?:calculator|value|link|caution|note))$/;

/** Gives what is wrong with a tree; one look at each node, as `expect` for each would take longer than compiling. */
function dangersIn(nodes: readonly BodyNode[]): readonly string[] {
  return nodes.flatMap((node): readonly string[] => {
    if (node.type === 'text') return [];
    const dangers = Object.entries(node.properties).flatMap(([name, value]) => {
      const isStrange = /^on|style|src|^data(?!Footnote)/i.test(name);
      const isUnsafe = name === 'href' && !/^(?:https:\/\/|mailto:|#|\/recipes\/)/i.test(String(value));
      return isStrange || isUnsafe ? [`${name}=${String(value)}`] : [];
    });
    return [...(TAGS.test(node.tagName) ? [] : [node.tagName]), ...dangers, ...dangersIn(node.children)];
  });
}

function expectSound(text: string, { document, preview, diagnostics }: Compiled): void {
  const hasErrors = diagnostics.some(({ severity }) => severity === 'error');
  expect(document === null).toBe(hasErrors);
  const strange = diagnostics.filter(({ start, end, message }) => {
    const isPlace = start.offset >= 0 && start.offset <= end.offset && end.offset <= text.length;
    return !isPlace || /undefined|\[object/.test(message);
  });
  expect(strange).toEqual([]);
  if (preview === null) return;
  expect(dangersIn(preview.body)).toEqual([]);
  const json = JSON.stringify(preview);
  expect(JSON.stringify(JSON.parse(json))).toBe(json);
}

describe('hostile documents', () => {
  test(`${ROUNDS} made of nasty pieces (seed 1) neither throw nor let anything through`, () => {
    const random = generator(1);
    for (let round = 0; round < ROUNDS; round++) {
      const text = pageOf(random);
      const compiled = compileWithText(text);
      expectSound(text, compiled);
    }
  }, 120_000);

  test('a compiler that remembers agrees with one that does not over random edits (seed 2)', () => {
    const random = generator(2);
    const compile = createCompiler();
    const page = `${FRONT}<Calculator id="c" title="t">
  <Given name="a" label="a" quantity="voltage" value="2 V" />
  <Result name="b" label="b" formula="a * 2 + 1 V" />
  <Limit name="l" of="b" to="3 V" says="x" />
</Calculator>

Words <Value of="c.b" /> and $x$.
`;
    for (let round = 0; round < 250; round++) {
      const from = FRONT.length + Math.floor(random() * (page.length - FRONT.length));
      const to = Math.min(page.length, from + Math.floor(random() * 4));
      const piece =
        random() < 0.5
          ? 'a * 2 V'.charAt(Math.floor(random() * 7))
          : (PIECES[Math.floor(random() * PIECES.length)] ?? '');
      const text = page.slice(0, from) + piece + page.slice(to);
      expect({ text, ...compile(text, FACTS) }).toEqual({ text, ...compileRecipe(text, FACTS) });
      compile(page, FACTS);
    }
  }, 120_000);
});

/** What is tried has to be seen when it throws. */
function compileWithText(text: string): Compiled {
  try {
    return compileRecipe(text, FACTS);
  } catch (fault) {
    throw new Error(`compiling ${JSON.stringify(text)} threw`, { cause: fault });
  }
}

describe('large hostile documents are refused or read, never thrown at', () => {
  const fill = (piece: string) => piece.repeat(Math.floor(99_000 / piece.length));
  test.each([
    ['100,000 brackets', '['.repeat(100_000)],
    ['brackets over lines', fill('[\n')],
    ['brackets in an expression', `{${fill('[\n')}`],
    ['closing braces after an open one', `{(\n${fill('}\n')}`],
    ['braces that close', fill('{(}\n')],
    ['open elements', fill('<Note>\n\n')],
    ['open elements on one line', fill('<Note>')],
    ['attributes', `<Note ${'a="b" '.repeat(3000)}/>`],
    ['emphasis', fill('a**b_c* \n')],
    ['list marks', fill(`${'- '.repeat(19)}a\n`)],
    ['list items', fill('- a\n')],
    ['table cells', `|${'a|'.repeat(150)}\n|${'-|'.repeat(150)}\n${fill('b|c\n')}`],
    ['footnotes', `[^a]: x\n\n${fill('[^a]')}`],
    ['dollars', fill('$a\n')],
    ['exports over blank lines', `export const a = [\n${fill('1,\n\n')}`],
    ['a front matter of brackets', `---\n${'['.repeat(9000)}\n---\n`],
    ['front matter that refers to itself', `---\na: &a [x]\nb: &b [*a, *a]\nc: &c [*b, *b]\n---\n`],
    [
      'huge numbers',
      `<Calculator id="c" title="t">\n<Given name="a" label="a" quantity="ratio" value="${'9'.repeat(5000)}" />\n</Calculator>`,
    ],
    [
      'a deep formula',
      `<Calculator id="c" title="t">\n<Result name="a" label="a" formula="${'('.repeat(180)}1${')'.repeat(180)}" />\n</Calculator>`,
    ],
    [
      'a chain of results',
      `<Calculator id="c" title="t">\n${Array.from({ length: 400 }, (_, i) => `<Result name="r${i}" label="a" formula="${i === 399 ? 1 : `r${i + 1} + r${i + 1}`}" />\n`).join('')}</Calculator>`,
    ],
    [
      'a reference to a long address many times',
      `[a]: https://example.org/${'x'.repeat(1900)}\n\n${'[a] \n'.repeat(1500)}`,
    ],
  ])(
    '%s',
    (_, text) => {
      for (const page of [text, FRONT + text]) expectSound(page, compileWithText(page));
    },
    120_000,
  );
});
