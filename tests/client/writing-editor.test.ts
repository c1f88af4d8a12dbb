import { CompletionContext } from '@codemirror/autocomplete';
import { EditorState } from '@codemirror/state';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import type { Compiled } from '#recipe';
import type { CompileAnswer, CompileRequest } from '../../src/features/writing/compile.worker.ts';
import { type CompileWorker, createCompileDriver, type LiveAnswer } from '../../src/features/writing/compile-driver.ts';
import { completeRecipe } from '../../src/features/writing/editor/completion.ts';
import { nextProblem, smallestChange } from '../../src/features/writing/editor/mount-editor.ts';
import { sourceTags } from '../../src/features/writing/editor/source-tags.ts';
import { colouredPlaces } from '../../src/features/writing/editor/tag-colours.ts';
import { partAt } from '../../src/features/writing/live-page.tsx';

/** The labels offered where | stands. */
function offered(marked: string): readonly string[] {
  const pos = marked.indexOf('|');
  const state = EditorState.create({ doc: marked.replace('|', '') });
  return completeRecipe(new CompletionContext(state, pos, true))?.options.map((option) => option.label) ?? [];
}

const CALCULATOR = `---
title: A lamp
sources:
  book: "A book"
---

<Calculator id="amp" title="Numbers">
  <Given name="R1" label="Upper" quantity="resistance" value="10 kΩ" />
  <Given name="V_in" label="Input" quantity="voltage" value="1 V" />
`;

describe('completion', () => {
  test('offers elements that may stand here, and none of a later release', () => {
    expect(offered('text\n\n<|')).toEqual(expect.arrayContaining(['<Calculator', '<Caution', '<Note', '<Value']));
    expect(offered('text\n\n<|')).not.toContain('<Given');
    expect(offered('text\n\n<|')).not.toContain('<Drawing');
    expect(offered(`${CALCULATOR}  <|`)).toEqual(['<Given', '<Result', '<Limit', '<Example']);
  });

  test('closes the element that is open', () => {
    expect(offered(`${CALCULATOR}</|`)).toEqual(['</Calculator>']);
  });

  test('offers attributes that are not there yet', () => {
    const names = offered(`${CALCULATOR}  <Given name="x" l| />`);
    expect(names).toContain('label');
    expect(names).not.toContain('name');
    expect(names).not.toContain('part');
  });

  test('offers quantities, units of the quantity, and names of the calculator inside formulas', () => {
    expect(offered(`${CALCULATOR}  <Given quantity="|" />`)).toEqual(expect.arrayContaining(['voltage', 'resistance']));
    expect(offered(`${CALCULATOR}  <Given quantity="resistance" value="10|" />`)).toContain('kΩ');
    const names = offered(`${CALCULATOR}  <Result name="I" formula="V_in / R|" />`);
    expect(names.slice(0, 2)).toEqual(['R1', 'V_in']);
    expect(names).toContain('parallel');
  });

  test('offers references: results in sentences, sources of examples, keys and hazards of the front matter', () => {
    expect(offered(`${CALCULATOR}</Calculator>\n\nIt is <Value of="|" />`)).toEqual(['amp.R1', 'amp.V_in']);
    expect(offered(`${CALCULATOR}  <Example title="a" source="|">`)).toEqual([
      'book',
      'own arithmetic',
      'common practice',
      'from memory',
    ]);
    expect(offered('---\nhaz|\n---\n')).toContain('hazards');
    expect(offered('---\nhazards: [st|]\n---\n')).toContain('stored energy');
  });
});

describe('the colours of the source', () => {
  test('follow the tokens of a formula, also behind an entity', () => {
    const text = '<Limit of="R1 &lt; 10 kΩ" to="x" />';
    const places = colouredPlaces(text, sourceTags(text));
    const shown = places.map(({ from, to, mark }) => [text.slice(from, to), mark.spec.class]);
    expect(shown).toEqual([
      ['<Limit', 'src-tag'],
      ['R1', 'src-name'],
      ['&lt;', 'src-operator'],
      ['10', 'src-number'],
      ['kΩ', 'src-unit'],
      ['x', 'src-name'],
      ['/>', 'src-tag'],
    ]);
  });

  test.each([
    '<Given name="a',
    '<Given name="a\n<Result name="b" />',
    '<',
    '</',
    '<Given =',
    '<Given name=">" />',
    `<Given ${'name="" '.repeat(300)}`,
  ])('stand in order, without overlap, in %j', (text) => {
    const places = colouredPlaces(text, sourceTags(text));
    for (const [index, place] of places.entries()) {
      expect(place.to).toBeGreaterThanOrEqual(place.from);
      expect(place.from).toBeGreaterThanOrEqual(places[index - 1]?.to ?? 0);
      expect(place.to).toBeLessThanOrEqual(text.length);
    }
  });
});

describe('moving in the text', () => {
  const at = (offset: number) => ({ line: 1, column: 1, offset });
  const problem = (offset: number) =>
    ({ severity: 'error', code: 'x', message: 'x', start: at(offset), end: at(offset + 1) }) as const;

  test('goes to the next problem and round at the end', () => {
    const problems = [problem(30), problem(10)];
    expect(nextProblem(problems, 0, 1)?.start.offset).toBe(10);
    expect(nextProblem(problems, 10, 1)?.start.offset).toBe(30);
    expect(nextProblem(problems, 30, 1)?.start.offset).toBe(10);
    expect(nextProblem(problems, 10, -1)?.start.offset).toBe(30);
    expect(nextProblem([], 0, 1)).toBeNull();
  });

  test.each([
    ['', '', { from: 0, to: 0, insert: '' }],
    ['abc', 'abXc', { from: 2, to: 2, insert: 'X' }],
    ['aaaa', 'aa', { from: 2, to: 4, insert: '' }],
    ['abc', 'xyz', { from: 0, to: 3, insert: 'xyz' }],
  ])('changes %j to %j by the least that differs', (before, after, change) => {
    expect(smallestChange(before, after)).toEqual(change);
  });

  test('finds the smallest part of the page around the cursor, else the last before it', () => {
    const part = (start: number, end: number) => ({ element: document.createElement('p'), start, end });
    const parts = [part(0, 50), part(10, 20), part(60, 70)];
    expect(partAt(parts, 15)).toBe(parts[1]);
    expect(partAt(parts, 30)).toBe(parts[0]);
    expect(partAt(parts, 55)).toBe(parts[0]);
    expect(partAt(parts, 80)).toBe(parts[2]);
    expect(partAt([], 3)).toBeNull();
  });
});

describe('compiling beside the page', () => {
  beforeEach(() => {
    vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] });
  });
  afterEach(() => {
    vi.useRealTimers();
  });

  const compiled: Compiled = { document: null, preview: null, diagnostics: [], checks: [] };

  function bench() {
    const workers: (CompileWorker & { readonly requests: CompileRequest[]; isEnded: boolean })[] = [];
    const answers: LiveAnswer[] = [];
    const driver = createCompileDriver(
      () => {
        const requests: CompileRequest[] = [];
        const made = {
          requests,
          isEnded: false,
          onmessage: null,
          onerror: null,
          postMessage: (request: CompileRequest) => void requests.push(request),
          terminate: () => {
            made.isEnded = true;
          },
        };
        workers.push(made);
        return made;
      },
      (answer) => answers.push(answer),
    );
    const say = (worker: number, data: CompileAnswer) =>
      workers[worker]?.onmessage?.(new MessageEvent('message', { data }));
    return { driver, workers, answers, say };
  }

  test('compiles the first text at once, later ones after 150 ms of quiet, the newest only', () => {
    const { driver, workers, answers, say } = bench();
    driver.set('a', {});
    vi.advanceTimersByTime(0);
    say(0, { ready: true });
    say(0, { version: 1, compiled });
    driver.set('ab', {});
    vi.advanceTimersByTime(100);
    driver.set('abc', {});
    vi.advanceTimersByTime(149);
    expect(workers[0]?.requests.map((request) => request.text)).toEqual(['a']);
    vi.advanceTimersByTime(1);
    expect(workers[0]?.requests.map((request) => request.text)).toEqual(['a', 'abc']);
    say(0, { version: 3, compiled });
    expect(answers).toHaveLength(2);
  });

  test('drops the answer for a text that has moved on', () => {
    const { driver, answers, say, workers } = bench();
    driver.set('a', {});
    vi.advanceTimersByTime(0);
    driver.set('ab', {});
    vi.advanceTimersByTime(150);
    say(0, { version: 1, compiled });
    expect(answers).toEqual([]);
    expect(workers[0]?.requests.at(-1)?.text).toBe('ab');
    say(0, { version: 2, compiled });
    expect(answers).toEqual([{ kind: 'compiled', compiled }]);
  });

  test('ends a worker after 4 s over one text, says so, and compiles the next with another', () => {
    const { driver, workers, answers, say } = bench();
    driver.set('slow', {});
    vi.advanceTimersByTime(10_000);
    expect(answers).toEqual([]);
    say(0, { ready: true });
    vi.advanceTimersByTime(4000);
    expect(workers[0]?.isEnded).toBe(true);
    expect(answers).toEqual([{ kind: 'too-slow' }]);
    driver.set('quick', {});
    vi.advanceTimersByTime(150);
    expect(workers[1]?.requests.map((request) => request.text)).toEqual(['quick']);
  });

  test('says that no worker can be had when its file is gone', () => {
    const { driver, workers, answers } = bench();
    driver.set('a', {});
    vi.advanceTimersByTime(0);
    workers[0]?.onerror?.(new ErrorEvent('error'));
    expect(answers).toEqual([{ kind: 'no-worker' }]);
  });
});
