import { describe, expect, test } from 'vitest';
import { stepText } from '../../src/document/field-text.ts';
import { addStep, type Change, EMPTY_HISTORY, redone, undone } from '../../src/document/input-history.ts';

describe('stepText', () => {
  test.each([
    ['4.70 kΩ', 1, '4.71 kΩ'],
    ['4.7', 10, '5.7'],
    ['9.99 V', 1, '10.00 V'],
    ['0.1 V', -2, '−0.1 V'],
    ['−0.1 V', 1, '0.0 V'],
    ['-2 V', -1, '−3 V'],
    ['47 kΩ', -10, '37 kΩ'],
    ['1,50 V', 1, '1,51 V'],
    ['7 nV/√Hz', 1, '8 nV/√Hz'],
    ['100000000000000000000 Ω', 1, '100000000000000000001 Ω'],
  ])('%s by %d is %s', (text, steps, stepped) => {
    expect(stepText(text, steps)).toBe(stepped);
  });

  test.each(['4k7', '', 'abc', '1e3 V', '1.2.3', '1 V to 2 V'])('%s has no single last digit', (text) => {
    expect(stepText(text, 1)).toBeNull();
  });
});

describe('the history of inputs', () => {
  const change = (before: string | null, after: string | null, name = 'R1'): Change => ({
    calculator: 'amp',
    name,
    before,
    after,
  });

  test('joins what is typed in one field, and starts a new step in another', () => {
    let history = addStep(EMPTY_HISTORY, [change(null, '1')], true);
    history = addStep(history, [change('1', '12')], true);
    history = addStep(history, [change(null, '3', 'R2')], true);
    expect(history.past).toEqual([[change(null, '12')], [change(null, '3', 'R2')]]);
  });

  test('undoes the newest step, redoes it, and forgets the undone once something new is done', () => {
    const history = addStep(addStep(EMPTY_HISTORY, [change(null, '1')], false), [change('1', '2')], false);
    const back = undone(history);
    expect(back?.changes).toEqual([change('2', '1')]);
    expect(redone(back?.history ?? EMPTY_HISTORY)?.changes).toEqual([change('1', '2')]);
    const other = addStep(back?.history ?? EMPTY_HISTORY, [change('1', '5')], false);
    expect(redone(other)).toBeNull();
  });

  test('has nothing to undo at the start', () => {
    expect(undone(EMPTY_HISTORY)).toBeNull();
  });
});
