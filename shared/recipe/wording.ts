import { FORMULA_WORDING, type FormulaCode } from '#formula';
import { QUANTITY_WORDING, type QuantityCode } from '#quantity';
import type { Diagnostic, LineIndex, ShownDiagnostic, Wording } from '#text';
import { CALCULATOR_WORDING } from './wording-calculator.ts';
import { PAGE_WORDING } from './wording-page.ts';

/** Every code of this room; one that has no wording does not compile. */
export type RecipeCode = keyof typeof PAGE_WORDING | keyof typeof CALCULATOR_WORDING;

/** The codes that a compile can give: of this room and of those below it, whose own tables are closed as well. */
export type DiagnosticCode = RecipeCode | FormulaCode | QuantityCode;

const TABLES = [PAGE_WORDING, CALCULATOR_WORDING, FORMULA_WORDING, QUANTITY_WORDING] as const;

/** Formulas and quantities both know a number that is too large, each with facts of its own. */
function wordingFor({ code, facts }: Diagnostic): Wording {
  const tables = code === 'number-too-large' && 'typed' in facts ? [QUANTITY_WORDING] : TABLES;
  for (const table of tables) {
    // Each code of a table takes its own facts; the diagnostic that carries the code carries them too.
    if (Object.hasOwn(table, code)) return (table as Readonly<Record<string, unknown>>)[code] as Wording;
  }
  throw new Error(`no wording for ${code}`);
}

/** Turns a diagnostic of any room into what is shown, stored and printed. */
export function describeDiagnostic(diagnostic: Diagnostic, lines: LineIndex): ShownDiagnostic {
  const { severity, code, span, facts } = diagnostic;
  const wording = wordingFor(diagnostic);
  const hint = wording.hint?.(facts);
  return {
    severity,
    code,
    message: wording.message(facts),
    ...(hint === undefined ? {} : { hint }),
    start: lines.pointAt(span.start),
    end: lines.pointAt(span.end),
  };
}
