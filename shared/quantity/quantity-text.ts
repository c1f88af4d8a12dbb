import type { Result } from '#text';
import type { QuantityKind } from './kinds.ts';

/** How an alternating voltage or current is typed and shown; inside the program it is always the peak of a sine. */
export type Reading = 'rms' | 'peak' | 'peak-to-peak';

/** Two ends in SI base units (levels in dB); equal for a single value. `unit` is the unit as typed, with prefix, for showing it again. */
export interface ReadValue {
  readonly low: number;
  readonly high: number;
  readonly isRange: boolean;
  readonly unit: string;
}
export type { Result, QuantityKind };
