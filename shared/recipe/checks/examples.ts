import type { ExampleRow } from '#calculator';
import type { BuiltCalculator } from '../build-page.ts';
import type { Check } from '../document.ts';
import type { Problems } from '../problems.ts';

/** One line for each example that could be run; a row that failed is told at its own place. */
export function checkExamples(calculators: readonly BuiltCalculator[], problems: Problems): readonly Check[] {
  return calculators.flatMap(({ model, examples }) =>
    examples.map(({ passed, rows }, index): Check => {
      const example = model.examples[index];
      for (const [at, row] of rows.entries()) {
        const span = example?.expects[at]?.span ?? example?.span;
        if (row.passed || row.code !== undefined || span === undefined) continue;
        const { what, got, expected, within } = row;
        problems.error('example-failed', span, { what, got, expected, within });
      }
      return { kind: 'example', title: example?.title ?? '', passed, detail: rows.map(rowText).join('; ') };
    }),
  );
}

function rowText({ what, got, expected, within, passed }: ExampleRow): string {
  if (passed) return `${what}: ${got}`;
  return `${what}: ${got}, but expected ${expected}${within === '' ? '' : ` within ${within}`}`;
}
