import { cleanup } from '@testing-library/react';
import { afterEach, beforeEach, vi } from 'vitest';

let errors: unknown[][] = [];

/** Says that a test makes the page complain on purpose, and gives what was said so far. */
export function expectedConsoleErrors(): readonly unknown[][] {
  const said = errors;
  errors = [];
  return said;
}

beforeEach(() => {
  errors = [];
  vi.spyOn(console, 'error').mockImplementation((...said: unknown[]) => {
    errors.push(said);
  });
});

afterEach(() => {
  cleanup();
  const said = errors;
  vi.restoreAllMocks();
  vi.unstubAllGlobals();
  if (said.length > 0) throw new Error(`console.error was called: ${said.map((each) => each.join(' ')).join('\n')}`);
});
