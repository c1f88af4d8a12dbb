import type { ShownDiagnostic } from '#text';

export interface ProblemsListProps {
  readonly diagnostics: readonly ShownDiagnostic[];
  readonly isFresh: boolean;
  readonly isRead: boolean;
  readonly onGoTo: (diagnostic: ShownDiagnostic) => void;
}

/** What is to put right and what to look at, under the editor, each with its line. */
export function ProblemsList({ diagnostics, isFresh, isRead, onGoTo }: ProblemsListProps) {
  const sorted = [...diagnostics].sort((a, b) => rank(a) - rank(b) || a.start.offset - b.start.offset);
  return (
    <section className="problems" aria-label="Problems" aria-busy={!isFresh}>
      <header className="write-head">
        <h2>Problems</h2>
        <span>
          {isRead ? countWords(diagnostics) : 'reading the text'}
          {diagnostics.length > 0 && (
            <span className="wide-only">
              {' '}
              <kbd>Alt ↓</kbd> next
            </span>
          )}
        </span>
      </header>
      {sorted.length > 0 && (
        <ul>
          {sorted.map((each) => (
            <li key={`${each.code} ${each.start.offset} ${each.end.offset}`} data-severity={each.severity}>
              <button type="button" className="problem" onClick={() => onGoTo(each)}>
                <b>
                  <span className="sr-only">{each.severity}, </span>line {each.start.line}
                </b>
                <span>
                  {each.message}
                  {each.hint !== undefined && <small>{each.hint}</small>}
                </span>
              </button>
            </li>
          ))}
        </ul>
      )}
    </section>
  );
}

function rank(diagnostic: ShownDiagnostic): number {
  return diagnostic.severity === 'error' ? 0 : 1;
}

/** `2 to put right, 1 to look at`. */
export function countWords(diagnostics: readonly ShownDiagnostic[]): string {
  const errors = diagnostics.filter((each) => each.severity === 'error').length;
  const warnings = diagnostics.length - errors;
  const parts = [errors > 0 ? `${errors} to put right` : '', warnings > 0 ? `${warnings} to look at` : ''];
  return parts.filter(Boolean).join(', ') || 'none found';
}
