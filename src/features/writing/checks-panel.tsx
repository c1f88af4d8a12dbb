import type { Check } from '#recipe';
import type { ShownDiagnostic } from '#text';
import type { LiveCompiled } from './use-compiled.ts';

const KINDS = {
  dimensions: { title: 'Dimensions', none: 'There is no formula yet.', good: 'agree', bad: 'disagree' },
  example: { title: 'Worked examples', none: 'None is given yet.', good: 'agree', bad: 'disagree' },
  drawing: {
    title: 'Drawing and formulas',
    none: 'There is no drawing to compare with.',
    good: 'agree',
    bad: 'disagree',
  },
  caution: { title: 'Cautions', none: 'No hazard is named.', good: 'there', bad: 'missing' },
} as const satisfies Record<Check['kind'], { title: string; none: string; good: string; bad: string }>;

const ORDER: readonly Check['kind'][] = ['dimensions', 'example', 'caution', 'drawing'];

export interface ChecksPanelProps {
  readonly live: LiveCompiled;
  readonly onGoTo: (diagnostic: ShownDiagnostic) => void;
}

/** What must hold before this can be sent, checked as one types. Nothing is called good over an empty list. */
export function ChecksPanel({ live, onGoTo }: ChecksPanelProps) {
  const warnings = live.diagnostics.filter((each) => each.severity === 'warning');
  return (
    <section className="checks" aria-label="Checks" aria-busy={!live.isFresh}>
      <header className="write-head">
        <h2>Checks</h2>
        <span>run as you type</span>
      </header>
      <ul>
        {ORDER.map((kind) => (
          <CheckGroup
            key={kind}
            kind={kind}
            isRead={live.isRead}
            checks={live.checks.filter((check) => check.kind === kind)}
          />
        ))}
        <li>
          <h3>
            Warnings <span className="check-state">{warnings.length === 0 ? 'none' : warnings.length}</span>
          </h3>
          {warnings.map((each) => (
            <p key={`${each.code} ${each.start.offset}`}>
              {each.message}{' '}
              <button type="button" className="btn-text" onClick={() => onGoTo(each)}>
                Line {each.start.line}
              </button>
            </p>
          ))}
        </li>
      </ul>
    </section>
  );
}

interface CheckGroupProps {
  readonly kind: Check['kind'];
  readonly checks: readonly Check[];
  readonly isRead: boolean;
}

function CheckGroup({ kind, checks, isRead }: CheckGroupProps) {
  const words = KINDS[kind];
  const failed = checks.filter((check) => !check.passed);
  return (
    <li>
      <h3>
        {words.title}
        {checks.length === 0 ? (
          <span className="check-state">{isRead ? 'not given' : 'reading'}</span>
        ) : failed.length === 0 ? (
          <span className="check-state check-good">
            <CheckMark isGood /> {checks.length === 1 ? '' : `all ${checks.length} `}
            {words.good}
          </span>
        ) : (
          <span className="check-state check-bad">
            <CheckMark isGood={false} /> {failed.length} of {checks.length} {words.bad}
          </span>
        )}
      </h3>
      {checks.length === 0 && isRead && <p>{words.none}</p>}
      {checks.map((check) => (
        <p key={`${check.title} ${check.detail}`} className={check.passed ? undefined : 'check-bad'}>
          {check.title}
          {check.detail === '' ? '' : `: ${check.detail}`}
        </p>
      ))}
    </li>
  );
}

function CheckMark({ isGood }: { isGood: boolean }) {
  return (
    <svg viewBox="0 0 14 14" aria-hidden="true">
      <path
        d={isGood ? 'M1.5 7.5l4 4 7-9' : 'M2 2l10 10M12 2L2 12'}
        fill="none"
        stroke="currentColor"
        strokeWidth="2"
      />
    </svg>
  );
}
