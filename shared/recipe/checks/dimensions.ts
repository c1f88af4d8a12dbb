import type { BuiltCalculator } from '../build-page.ts';
import type { Check } from '../document.ts';

/** One line for each calculator that has formulas. */
export function checkDimensions(calculators: readonly BuiltCalculator[]): readonly Check[] {
  return calculators.flatMap(({ model, block, diagnostics }): Check[] => {
    const count = block.elements.filter((element) => element.name === 'Result' || element.name === 'Limit').length;
    if (count === 0) return [];
    const errors = diagnostics.filter((diagnostic) => diagnostic.severity === 'error').length;
    const formulas = `${count} ${count === 1 ? 'result or limit' : 'results and limits'}`;
    const detail =
      errors === 0 ? `${formulas}: names and dimensions agree` : `${errors} ${errors === 1 ? 'problem' : 'problems'}`;
    return [{ kind: 'dimensions', title: model.title, passed: errors === 0, detail }];
  });
}
