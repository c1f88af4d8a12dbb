import { type Diagnostic, type Facts, problem, type Span, warning } from '#text';
import type { RecipeCode } from './wording.ts';

/** Collects what one phase finds. `add` takes diagnostics of other rooms as they are. */
export interface Problems {
  readonly list: readonly Diagnostic[];
  add(diagnostics: readonly Diagnostic[]): void;
  error(code: RecipeCode, span: Span, facts?: Facts): void;
  warning(code: RecipeCode, span: Span, facts?: Facts): void;
}

export function collectProblems(): Problems {
  const list: Diagnostic[] = [];
  return {
    list,
    add: (diagnostics) => {
      for (const diagnostic of diagnostics) list.push(diagnostic);
    },
    error: (code, span, facts) => {
      list.push(problem<RecipeCode>(code, span, facts));
    },
    warning: (code, span, facts) => {
      list.push(warning<RecipeCode>(code, span, facts));
    },
  };
}
