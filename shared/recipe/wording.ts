import type { Diagnostic, LineIndex, ShownDiagnostic } from '#text';

/** Turns a diagnostic of any room into what is shown, stored and printed. */
export function describeDiagnostic(_diagnostic: Diagnostic, _lines: LineIndex): ShownDiagnostic {
  throw new Error('recipe/wording is being written');
}
