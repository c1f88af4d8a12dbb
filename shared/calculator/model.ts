import type { CheckedExpr } from '#formula';
import type { QuantityKind, Reading } from '#quantity';
import type { Span } from '#text';

/**
 * One calculator as the document stores it: plain JSON, everything checked, nothing left to parse.
 * Numbers are in SI base units (levels in dB, temperatures in kelvin); alternating quantities are peaks.
 */
export interface CalculatorModel {
  readonly id: string;
  readonly title: string;
  readonly span: Span;
  readonly givens: readonly Given[];
  readonly choices: readonly Choice[];
  readonly results: readonly ResultModel[];
  readonly limits: readonly LimitModel[];
  readonly examples: readonly ExampleModel[];
  readonly plots: readonly PlotModel[];
  /** Names of results and choices so that each stands after everything it reads. */
  readonly order: readonly string[];
}

/** A value or, with low < high, a range; `text` as the author wrote it; `unit` with prefix, as last shown. */
export interface Entry {
  readonly low: number;
  readonly high: number;
  readonly text: string;
  readonly unit: string;
}

/** Attributes that only describe how a value spreads. Kept and dimension-checked from the start, evaluated by `spread`. */
export interface Uncertainty {
  readonly tolerance?: CheckedExpr;
  /** Whether `tolerance` is a part of the value or in the value's own unit. */
  readonly toleranceIs?: 'relative' | 'absolute';
  readonly spread?: 'uniform' | 'normal';
  readonly group?: string;
  readonly match?: CheckedExpr;
  readonly tempco?: CheckedExpr;
  readonly track?: CheckedExpr;
}

export interface Given extends Uncertainty {
  readonly name: string;
  readonly label: string;
  readonly quantity: QuantityKind;
  readonly value: Entry;
  readonly min?: number;
  readonly max?: number;
  readonly options?: readonly { readonly value: number; readonly text: string; readonly label: string }[];
  readonly reading?: Reading;
  /** `calculator.name` of an earlier calculator on the page. */
  readonly from?: { readonly calculator: string; readonly name: string };
  readonly part?: string;
  readonly field?: string;
  readonly means?: string;
  readonly note?: string;
  readonly span: Span;
}

/** Values from a series. Later than this release; the shape is fixed now so that stored documents do not change. */
export interface Choice extends Uncertainty {
  readonly names: readonly string[];
  readonly label: string;
  readonly series: readonly string[];
  readonly near?: CheckedExpr;
  readonly round?: 'nearest' | 'up' | 'down';
  readonly within?: readonly [CheckedExpr, CheckedExpr];
  readonly best?: CheckedExpr;
  readonly keep?: number;
  readonly twins: readonly { readonly name: string; readonly of: string }[];
  readonly note?: string;
  readonly span: Span;
}

export interface ResultModel {
  readonly name: string;
  readonly label: string;
  readonly formula?: CheckedExpr;
  readonly measure?: { readonly text: string; readonly drawing: string };
  readonly quantity: QuantityKind | null;
  /** Unit with prefix asked for by the author; without it an engineering prefix is chosen. `dimensionUnit` names the coherent unit of a dimension that no quantity has. */
  readonly unit?: string;
  readonly dimensionUnit: string;
  readonly digits?: number;
  readonly reading?: Reading;
  readonly agree?: number;
  readonly means?: string;
  readonly note?: string;
  readonly span: Span;
}

export interface LimitModel {
  readonly name: string;
  readonly of: CheckedExpr;
  readonly from?: CheckedExpr;
  readonly to?: CheckedExpr;
  readonly near?: CheckedExpr;
  readonly says: string;
  readonly level: 'stop' | 'caution';
  readonly over: 'everything' | 'nominal';
  /** How its numbers are written; null for a dimension without a name, then `dimensionUnit` is used. */
  readonly quantity: QuantityKind | null;
  readonly dimensionUnit: string;
  readonly span: Span;
}

export interface ExampleModel {
  readonly title: string;
  readonly source: string;
  readonly sets: readonly {
    readonly name: string;
    readonly part: 'value' | 'tolerance';
    readonly to: Entry;
    readonly span: Span;
  }[];
  readonly expects: readonly Expectation[];
  readonly span: Span;
}

export type Expectation =
  | {
      readonly kind: 'number';
      readonly name: string;
      readonly to: Entry;
      /** `worst low`, `p1` …: later than this release, kept as written. */
      readonly at?: string;
      readonly within: number;
      readonly withinIs: 'relative' | 'absolute';
      readonly span: Span;
    }
  | { readonly kind: 'limit'; readonly limit: string; readonly state: LimitState; readonly span: Span };

export type LimitState = 'within' | 'close' | 'only-nominally' | 'exceeded' | 'no-value';

export interface PlotModel {
  readonly of: readonly string[];
  readonly against: string;
  readonly from: number;
  readonly to: number;
  readonly scale: 'linear' | 'log-x' | 'log-y' | 'log-log';
  readonly points?: number;
  readonly span: Span;
}
