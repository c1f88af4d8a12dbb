import { type Dimension, NONE } from './dimension.ts';

/** What a Given may be, its dimension, and the unit its numbers are shown in (prefixes come on top). */
export interface KindRow {
  readonly dimension: Dimension;
  /** Unit without prefix; '' where none is written. */
  readonly unit: string;
  readonly words: string;
}

/** Source: SI brochure, 9th edition (BIPM 2019), tables 4 and 5, for the expressions in base units. */
export const KINDS = {
  voltage: { dimension: [2, 4, -6, -2, 0, 0], unit: 'V', words: 'voltage' },
  current: { dimension: [0, 0, 0, 2, 0, 0], unit: 'A', words: 'current' },
  resistance: { dimension: [2, 4, -6, -4, 0, 0], unit: 'Ω', words: 'resistance' },
  conductance: { dimension: [-2, -4, 6, 4, 0, 0], unit: 'S', words: 'conductance' },
  capacitance: { dimension: [-2, -4, 8, 4, 0, 0], unit: 'F', words: 'capacitance' },
  inductance: { dimension: [2, 4, -4, -4, 0, 0], unit: 'H', words: 'inductance' },
  frequency: { dimension: [0, 0, -2, 0, 0, 0], unit: 'Hz', words: 'frequency' },
  time: { dimension: [0, 0, 2, 0, 0, 0], unit: 's', words: 'time' },
  power: { dimension: [2, 4, -6, 0, 0, 0], unit: 'W', words: 'power' },
  energy: { dimension: [2, 4, -4, 0, 0, 0], unit: 'J', words: 'energy' },
  charge: { dimension: [0, 0, 2, 2, 0, 0], unit: 'C', words: 'charge' },
  temperature: { dimension: [0, 0, 0, 0, 2, 0], unit: '°C', words: 'temperature' },
  'temperature-difference': { dimension: [0, 0, 0, 0, 2, 0], unit: 'K', words: 'temperature difference' },
  length: { dimension: [0, 2, 0, 0, 0, 0], unit: 'm', words: 'length' },
  ratio: { dimension: NONE, unit: '', words: 'ratio' },
  level: { dimension: [0, 0, 0, 0, 0, 2], unit: 'dB', words: 'level in dB' },
  count: { dimension: NONE, unit: '', words: 'count' },
  angle: { dimension: NONE, unit: '°', words: 'angle' },
  'slew-rate': { dimension: [2, 4, -8, -2, 0, 0], unit: 'V/µs', words: 'slew rate' },
  'voltage-noise': { dimension: [2, 4, -5, -2, 0, 0], unit: 'V/√Hz', words: 'voltage noise density' },
  'current-noise': { dimension: [0, 0, 1, 2, 0, 0], unit: 'A/√Hz', words: 'current noise density' },
  'voltage-drift': { dimension: [2, 4, -6, -2, -2, 0], unit: 'V/K', words: 'voltage drift' },
  'current-drift': { dimension: [0, 0, 0, 2, -2, 0], unit: 'A/K', words: 'current drift' },
  'thermal-resistance': { dimension: [-2, -4, 6, 0, 2, 0], unit: 'K/W', words: 'thermal resistance' },
  'temperature-coefficient': { dimension: [0, 0, 0, 0, -2, 0], unit: 'ppm/K', words: 'temperature coefficient' },
  'capacitance-per-length': { dimension: [-2, -6, 8, 4, 0, 0], unit: 'F/m', words: 'capacitance per length' },
  'resistance-per-length': { dimension: [2, 2, -6, -4, 0, 0], unit: 'Ω/m', words: 'resistance per length' },
} as const satisfies Record<string, KindRow>;

export type QuantityKind = keyof typeof KINDS;

/** How an alternating voltage or current is typed and shown; inside the program it is always the peak of a sine. */
export type Reading = 'rms' | 'peak' | 'peak-to-peak';

/** What the number as typed is multiplied by to give the peak of a sine. */
export const PEAK_FACTORS = {
  rms: Math.SQRT2,
  peak: 1,
  'peak-to-peak': 0.5,
} as const satisfies Record<Reading, number>;

/**
 * Absolute voltage levels: the RMS voltage at 0 dB.
 * Source: 0 dBu is the voltage that puts 1 mW into 600 Ω, √0.6 V = 0.7746 V (IEC 60268-17 and EBU usage; from memory); 0 dBV is 1 V.
 */
export const LEVEL_REFERENCES = { dBu: Math.sqrt(0.6), dBV: 1 } as const;

export type LevelUnit = keyof typeof LEVEL_REFERENCES;
