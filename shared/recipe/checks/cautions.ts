import type { Body } from '../body.ts';
import type { Check, CompileFacts } from '../document.ts';
import type { FrontMatterRead } from '../front-matter.ts';
import { type GreatestVoltage, hazardVolts, voltsText } from '../hazards.ts';
import type { Problems } from '../problems.ts';

/** One line for each hazard, and one for the voltages of the page where it has any. */
export function checkCautions(
  { front, hasHazards }: FrontMatterRead,
  cautions: Body['cautions'],
  voltage: GreatestVoltage | null,
  facts: CompileFacts,
  { list }: Problems,
): readonly Check[] {
  if (!hasHazards) return [];
  const lines = front.hazards.map((hazard): Check => {
    const passed = cautions.some((caution) => caution.kind === hazard);
    return { kind: 'caution', title: hazard, passed, detail: passed ? 'has its caution' : 'has no caution' };
  });
  if (voltage === null) return lines;
  const passed = !list.some((diagnostic) => diagnostic.code === 'hazard-missing');
  const above = voltage.volts > hazardVolts(facts) ? 'above' : 'not above';
  const detail = `the greatest is ${voltsText(voltage.volts)}, ${above} ${hazardVolts(facts)} V peak; this does not say that anything is safe`;
  return [...lines, { kind: 'caution', title: 'voltages', passed, detail }];
}
