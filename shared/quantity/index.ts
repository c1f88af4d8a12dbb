/**
 * Quantities: numbers with a dimension, how people type them and how they are shown.
 * Terms: dimension (exponents of kg, m, s, A, K, dB, in halves), kind (what a Given may be), unit (symbol with prefix,
 * SI factor, offset for °C), reading (how an alternating quantity is typed; inside it is always the peak of a sine).
 * Numbers are in SI base units, levels in dB, temperatures in kelvin. Nothing here throws on a text.
 * Opens `#text`.
 */
export { type Dimension, NONE, perDimension, powerOfDimension, sameDimension, timesDimension } from './dimension.ts';
export { coherentUnit, dimensionWords, kindOfDimension } from './dimension-words.ts';
export { KINDS, type KindRow, PEAK_FACTORS, type QuantityKind, type Reading } from './kinds.ts';
export { type ReadOptions, type ReadValue, readValue } from './read-value.ts';
export { fromSi, PREFIXES, readUnit, readUnitAt, toSi, type Unit, type UnitRead, unitsSpeltLike } from './units.ts';
export { QUANTITY_WORDING, type QuantityCode, type QuantityProblem } from './wording.ts';
export {
  type WriteOptions,
  type Written,
  type WrittenRange,
  writeEntry,
  writeRange,
  writeValue,
} from './write-value.ts';
