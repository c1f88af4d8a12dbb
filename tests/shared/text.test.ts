import { describe, expect, test } from 'vitest';
import { assertNever, fail, LineIndex, ok, problem, span, spanFrom, warning } from '#text';

describe('LineIndex', () => {
  const text = 'a\nbc\r\nd\re';

  test.each([
    // offset, line, column
    [0, 1, 1],
    [1, 1, 2],
    [2, 2, 1],
    [4, 2, 3],
    [5, 2, 4],
    [6, 3, 1],
    [8, 4, 1],
    [9, 4, 2],
  ])('offset %i stands in line %i, column %i; LF, CRLF and CR each end one line', (offset, line, column) => {
    expect(new LineIndex(text).pointAt(offset)).toEqual({ line, column, offset });
  });

  test('columns count UTF-16 units, so Ω is one and an emoji two', () => {
    const index = new LineIndex('Ω🔧x\nµy');
    expect(index.pointAt(3)).toEqual({ line: 1, column: 4, offset: 3 });
    expect(index.pointAt(6)).toEqual({ line: 2, column: 2, offset: 6 });
  });

  test('offsets outside the text are brought to its nearer end', () => {
    expect(new LineIndex('ab').pointAt(-3)).toEqual({ line: 1, column: 1, offset: 0 });
    expect(new LineIndex('ab').pointAt(99)).toEqual({ line: 1, column: 3, offset: 2 });
    expect(new LineIndex('').pointAt(1)).toEqual({ line: 1, column: 1, offset: 0 });
  });

  test('a text of many lines agrees with counting the line ends before each offset', () => {
    const long = Array.from({ length: 300 }, (_, i) => 'x'.repeat(i % 7)).join('\n');
    const index = new LineIndex(long);
    for (let offset = 0; offset <= long.length; offset++) {
      const before = long.slice(0, offset).split('\n');
      const expected = { line: before.length, column: (before.at(-1) ?? '').length + 1, offset };
      expect(index.pointAt(offset)).toEqual(expected);
    }
  });
});

describe('spans, diagnostics and results', () => {
  test('spanFrom reaches from the start of the first to the end of the last', () => {
    expect(spanFrom(span(3, 5), span(9, 12))).toEqual({ start: 3, end: 12 });
  });

  test('a problem is an error and a warning is not; facts are empty unless given', () => {
    expect(problem('some-code', span(0, 1))).toEqual({
      code: 'some-code',
      severity: 'error',
      span: { start: 0, end: 1 },
      facts: {},
    });
    expect(warning('other', span(0, 1), { name: 'R1' }).severity).toBe('warning');
    expect(warning('other', span(0, 1), { name: 'R1' }).facts).toEqual({ name: 'R1' });
  });

  test('a result holds a value or one refusal', () => {
    expect(ok(1)).toEqual({ ok: true, value: 1 });
    expect(fail('no')).toEqual({ ok: false, error: 'no' });
  });

  test('assertNever names the value that nobody handles', () => {
    expect(() => assertNever({ kind: 'new' } as never)).toThrow('{"kind":"new"}');
  });
});
