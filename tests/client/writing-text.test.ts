import { describe, expect, test } from 'vitest';
import { CONTRACT } from '#api';
import { conflictOf, saveConflictOf } from '../../src/features/writing/draft-save.ts';
import { frontValue, retitled, slugOf } from '../../src/features/writing/front-text.ts';
import { kindsOf, readPastedList, recipeOfGivens, understood } from '../../src/features/writing/pasted-list.ts';
import { SKELETONS } from '../../src/features/writing/skeletons.ts';
import { likelySides, mergedText, textRows } from '../../src/features/writing/text-rows.ts';
import { refusalOf, withoutAnswer } from '../../src/lib/failure.ts';
import { compileText } from './starter-documents.ts';

const givens = (text: string) => readPastedList(text).flatMap((line) => (line.kind === 'given' ? [line] : []));

describe('a pasted list', () => {
  test('takes each line as a name and a value, and what follows # as the label', () => {
    const read = givens('R1 = 10k\n\nC_f: 4n7 # filter\nV_in\t±2 V');
    expect(read.map(({ line, name, label, quantity, value }) => [line, name, label, quantity, value])).toEqual([
      [1, 'R1', 'R1', 'resistance', '10k'],
      [3, 'C_f', 'filter', 'capacitance', '4n7'],
      [4, 'V_in', 'V_in', 'voltage', '±2 V'],
    ]);
    expect(read.map(understood)).toEqual(['10.00 kΩ', '4.700 nF', '−2.000 to 2.000 V'].map(spaced));
  });

  // The unit decides before the name; SI brochure, 9th edition, table 4, for the units of these quantities.
  test.each([
    ['x', '10 kΩ', 'resistance'],
    ['R_th', '3 K/W', 'thermal-resistance'],
    ['C1', '12 V', 'voltage'],
    ['G', '66 dB', 'level'],
    ['f_c', '1 kHz', 'frequency'],
    ['k', '0.05 %', 'ratio'],
  ])('guesses that %s = %s is a %s', (name, value, quantity) => {
    expect(kindsOf(name, value)[0]).toBe(quantity);
  });

  test('takes a bare number in the unit that its name stands for, and as a ratio where it stands for none', () => {
    const [v, x] = givens('V_s = 9\nx = 9');
    expect(v).toMatchObject({ quantity: 'voltage', value: '9 V' });
    expect(x).toMatchObject({ quantity: 'ratio', value: '9' });
  });

  test.each([
    ['just words', 'Expected a name'],
    ['R-1 = 10k', 'is no name'],
    ['pi = 3', 'has a meaning'],
    ['R1 = ten', 'not read as any quantity'],
    ['R1 = 1 k\nR1 = 2 k', 'stands above already'],
  ])('leaves out "%s" and says why', (text, words) => {
    const problems = readPastedList(text).flatMap((line) => (line.kind === 'problem' ? [line.why] : []));
    expect(problems.at(-1)).toContain(words);
  });

  test('becomes the Givens of a recipe that compiles', () => {
    const text = recipeOfGivens(givens('R1 = 10k # "upper" <one>\nR2 = 4k7'), 'Two resistors', 'two-resistors');
    const [calculator] = compileText(text).calculators;
    expect(calculator?.givens.map(({ name, label }) => [name, label])).toEqual([
      ['R1', '"upper" <one>'],
      ['R2', 'R2'],
    ]);
  });
});

/** Results put a thin space before the unit. */
function spaced(text: string): string {
  return text.replace(/ (?=\S+$)/, '\u2009');
}

describe('the skeletons', () => {
  test('are three complete recipes', () => {
    expect(SKELETONS).toHaveLength(3);
    for (const { text } of SKELETONS) {
      const { proof } = compileText(text);
      expect(proof.examples).toBeGreaterThan(0);
      expect(proof.examplesPassed).toBe(proof.examples);
    }
  });

  test('take another title, the slug that follows from it, and lose a number', () => {
    const text = retitled(
      '---\ntitle: "Old: one"\nslug: old-one\nnumber: DA-01\n---\nBody\n',
      'Lamp: 9 V, “Überspannung”',
    );
    expect(frontValue(text, 'title')).toBe('Lamp: 9 V, “Überspannung”');
    expect(frontValue(text, 'slug')).toBe('lamp-9-v-uberspannung');
    expect(text).not.toContain('number:');
    expect(text.endsWith('---\nBody\n')).toBe(true);
  });

  test('keep their slug where a title gives none', () => {
    expect(slugOf('μ')).toBe('');
    expect(frontValue(retitled('---\ntitle: a\nslug: kept-one\n---\n', 'μ'), 'slug')).toBe('kept-one');
  });
});

describe('two texts', () => {
  const base = 'one\ntwo\nthree\nfour\n';

  test('are compared line by line, and joined again as chosen', () => {
    const rows = textRows('one\nTWO\nthree\nfour\n', 'one\ntwo\nthree\nFOUR\n') ?? [];
    expect(rows.map((row) => row.kind)).toEqual(['same', 'differs', 'same', 'differs']);
    expect(
      mergedText(
        rows,
        new Map([
          [1, 'left'],
          [3, 'right'],
        ]),
      ),
    ).toBe('one\nTWO\nthree\nFOUR\n');
    expect(
      mergedText(
        rows,
        new Map([
          [1, 'both'],
          [3, 'both'],
        ]),
      ),
    ).toBe('one\nTWO\ntwo\nthree\nfour\nFOUR\n');
  });

  test('offer for each difference the side that was changed', () => {
    const theirs = 'one\nTWO\nthree\nfour\nfive\n';
    const mine = 'zero\none\ntwo\nthree\nfour\n';
    const rows = textRows(theirs, mine) ?? [];
    expect(mergedText(rows, likelySides(rows, base))).toBe('zero\none\nTWO\nthree\nfour\nfive\n');
  });

  test('keep both where both changed the same line', () => {
    const rows = textRows('one\nTWO\n', 'one\n2\n') ?? [];
    expect(mergedText(rows, likelySides(rows, base))).toBe('one\nTWO\n2\n');
  });
});

describe('a refused save', () => {
  const body = {
    saveId: 'a-save-of-this-tab',
    state: 'draft',
    revision: 7,
    text: 'theirs',
    baseText: 'base',
    savedBy: 'Ines',
    code: 'stale',
  };
  const saved = saveConflictOf(refusalOf(409, body, new Headers()));
  const page = CONTRACT['drafts.read'].answer.parse({
    draft: {
      id: '0c7f6f0e-9a1d-4c4e-8d53-0e2f5c6f7a10',
      title: 'A lamp',
      number: '',
      slug: 'a-lamp',
      state: 'draft',
      revision: 8,
      from: null,
      owner: { id: 'p1', name: 'Aren' },
      authors: [],
      writtenBy: [],
      updatedAt: '2026-05-18T10:00:00.000Z',
      sentBy: null,
      sentAt: null,
      note: '',
      sentBack: null,
    },
    text: 'newest',
    hash: 'a'.repeat(64),
    mayWrite: true,
    mayTakeBack: false,
    base: null,
    facts: { recipes: {}, topics: [], hazardVolts: 42.4 },
  });

  test('carries both texts, and is no conflict without them', () => {
    expect(saved).toEqual({
      saveId: body.saveId,
      state: 'draft',
      revision: 7,
      text: 'theirs',
      baseText: 'base',
      savedBy: 'Ines',
    });
    expect(saveConflictOf(refusalOf(409, { ...body, text: undefined }, new Headers()))).toBeNull();
    expect(saveConflictOf(refusalOf(403, body, new Headers()))).toBeNull();
    expect(saveConflictOf(withoutAnswer('offline'))).toBeNull();
  });

  test('is a draft that moved while this person may write: the newest text and its hash are taken', () => {
    if (saved === null) throw new Error('the conflict was not read');
    expect(conflictOf(saved, page, null)).toEqual({
      kind: 'moved',
      saved: { ...saved, revision: 8, text: 'newest' },
      hash: page.hash,
    });
  });

  test('is a closed draft when it is in review or this person was taken off', () => {
    if (saved === null) throw new Error('the conflict was not read');
    const inReview = { ...page, mayWrite: false, draft: { ...page.draft, state: 'in-review' as const } };
    expect(conflictOf(saved, inReview, null)).toMatchObject({ kind: 'closed', saved: { state: 'in-review' } });
    const gone = refusalOf(404, { code: 'not-found', detail: 'There is no such draft.' }, new Headers());
    expect(conflictOf(saved, null, gone)).toMatchObject({ kind: 'closed', saved: { state: 'draft' } });
  });

  test('shows both texts even when the draft could not be read again', () => {
    if (saved === null) throw new Error('the conflict was not read');
    expect(conflictOf(saved, null, withoutAnswer('offline'))).toEqual({ kind: 'moved', saved, hash: null });
  });
});
