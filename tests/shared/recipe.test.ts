import { describe, expect, test } from 'vitest';
import { type CompileFacts, compileRecipe } from '#recipe';
import { readPages } from '../cases/read-pages.ts';

const FRONT = `---
title: A page
slug: a-page
summary: For a test.
hazards: [none]
---

`;
const FACTS: CompileFacts = { recipes: { 'rail-splitter': [1, 2] }, topics: ['noise'] };

const FILES = ['recipe-page.txt', 'recipe-front-matter.txt', 'recipe-calculator.txt', 'recipe-positions.txt'];

describe.each(FILES)('%s', (file) => {
  test.each(readPages(file, FRONT))('$title (line $line)', ({ text, expected }) => {
    expect(problemsOf(text)).toEqual(expected);
  });
});

describe('places with CRLF line ends', () => {
  test.each(readPages('recipe-positions.txt', FRONT, '\r\n'))('$title (line $line)', ({ text, expected }) => {
    expect(problemsOf(text)).toEqual(expected);
  });
});

function problemsOf(text: string) {
  return compileRecipe(text, FACTS).diagnostics.map(({ severity, code, start, end, message }) => {
    const before = text.slice(0, start.offset).split(/\r\n|\n/);
    expect([start.line, start.column]).toEqual([before.length, (before.at(-1) ?? '').length + 1]);
    expect(message).not.toMatch(/undefined|NaN|\[object/);
    return { severity, code, start: start.offset, end: end.offset };
  });
}
