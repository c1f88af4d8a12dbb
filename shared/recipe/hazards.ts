import type { Sample } from '#calculator';
import { writeValue } from '#quantity';
import type { Span } from '#text';
import type { Body } from './body.ts';
import type { BuiltCalculator } from './build-page.ts';
import type { CompileFacts, Hazard } from './document.ts';
import type { FrontMatterRead } from './front-matter.ts';
import type { Problems } from './problems.ts';

/**
 * Volts of peak above which a hazard must be named: 30 V RMS.
 * Source: IEC 62368-1, class ES1 up to 1 kHz; from memory, to be checked against the standard. It never means "safe".
 */
export const HAZARD_VOLTS = 42.4;

const ELECTRIC: readonly Hazard[] = ['mains', 'high voltage', 'battery', 'stored energy'];

/** The greatest size of any voltage of a page, and where it arises. */
export interface GreatestVoltage {
  /** Peak, in volts; Infinity where a result is unbounded. */
  readonly volts: number;
  readonly what: string;
  readonly span: Span;
}

/** What may be claimed without a hazard: a team may lower the limit, not raise it. */
export function hazardVolts(facts: CompileFacts): number {
  return Math.min(HAZARD_VOLTS, facts.hazardVolts ?? HAZARD_VOLTS);
}

/** Looks through the voltages of Givens (value, min and max) and of Results at the defaults and over their ranges. Null if there are none. */
export function greatestVoltage(calculators: readonly BuiltCalculator[]): GreatestVoltage | null {
  let greatest: GreatestVoltage | null = null;
  const see = (volts: number, what: string, element: Span, tag: string): void => {
    if (greatest !== null && volts <= greatest.volts) return;
    greatest = { volts, what, span: { start: element.start + 1, end: element.start + 1 + tag.length } };
  };
  for (const { model, evaluated } of calculators) {
    for (const { quantity, value, min, max, label, span } of model.givens) {
      if (quantity !== 'voltage') continue;
      const sizes = [value.low, value.high, min ?? 0, max ?? 0].map(Math.abs);
      see(Math.max(...sizes), `The input “${label}”`, span, 'Given');
    }
    for (const { name, quantity, label, span } of model.results) {
      const outcome = quantity === 'voltage' ? evaluated?.evaluation.outcomes[name] : undefined;
      if (outcome?.state !== 'known') continue;
      const samples = [outcome.middle, ...(outcome.over ? [outcome.over.lowest, outcome.over.highest] : [])];
      see(Math.max(...samples.map(sizeOf)), `The result “${label}”`, span, 'Result');
    }
  }
  return greatest;
}

function sizeOf(sample: Sample): number {
  if (sample.kind === 'finite') return Math.abs(sample.si);
  return sample.kind === 'unbounded' ? Number.POSITIVE_INFINITY : 0;
}

/** Each hazard needs its Caution, each Caution its hazard, and a voltage that can hurt needs a hazard that says so. */
export function checkHazards(
  { front, hasHazards, hazardsSpan }: FrontMatterRead,
  cautions: Body['cautions'],
  voltage: GreatestVoltage | null,
  facts: CompileFacts,
  problems: Problems,
): void {
  if (!hasHazards) return;
  for (const hazard of front.hazards) {
    if (!cautions.some((caution) => caution.kind === hazard))
      problems.error('caution-missing', hazardsSpan, { hazard });
  }
  for (const { kind, span } of cautions) {
    if (!front.hazards.some((hazard) => hazard === kind)) problems.error('caution-unlisted', span, { kind });
  }
  const most = hazardVolts(facts);
  if (voltage === null || voltage.volts <= most || front.hazards.some((hazard) => ELECTRIC.includes(hazard))) return;
  problems.error('hazard-missing', voltage.span, {
    what: voltage.what,
    volts: voltsText(voltage.volts),
    most: `${most} V`,
  });
}

export function voltsText(volts: number): string {
  return Number.isFinite(volts) ? writeValue(volts, { kind: 'voltage' }).text : 'any voltage';
}
