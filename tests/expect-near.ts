import { expect } from 'vitest';

/**
 * Asserts that two numbers agree within a part of the expected one. Where zero is expected, only zero will do.
 * The message gives both numbers, the error in parts and the allowance.
 */
export function expectNear(actual: number, expected: number, relative: number): void {
  const error = expected === 0 ? Math.abs(actual) : Math.abs(actual - expected) / Math.abs(expected);
  const allowed = expected === 0 ? 0 : relative;
  expect(
    error <= allowed,
    `${actual} is not near ${expected}: off by ${error.toExponential(2)} parts, allowed ${allowed}`,
  ).toBe(true);
}
