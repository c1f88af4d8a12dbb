import type { ReviewPage } from '#api';
import { TrueMark } from '../../document/true-mark.tsx';
import { counted } from './number-words.ts';

type Check = ReviewPage['checks'][number];

const KINDS = {
  dimensions: 'Names and dimensions',
  example: 'Worked examples',
  drawing: 'Drawing and formulas',
  caution: 'Hazards and voltages',
} as const satisfies Record<Check['kind'], string>;

/** Every check that ran, and what none of them says. */
export function ChecksList({ page: { checks, document, diagnostics } }: { page: ReviewPage }) {
  return (
    <>
      {checks.length === 0 && <p>No check ran: nothing but the author’s word stands behind this.</p>}
      {(Object.keys(KINDS) as Check['kind'][]).map((kind) => (
        <KindOfChecks key={kind} kind={kind} checks={checks.filter((check) => check.kind === kind)} />
      ))}
      <h3 className="mt-4">Not proven</h3>
      <ul className="checks-open">
        {document !== null && document.drawings.length === 0 && (
          <li>No formula is proven against a drawing: there is none.</li>
        )}
        {document !== null && document.proof.examplesFromOutside === 0 && (
          <li>No worked example comes from an outside source.</li>
        )}
        <li>Nothing here covers stability, saturation or noise beyond what the formulas say.</li>
      </ul>
      {diagnostics.length > 0 && (
        <>
          <h3 className="mt-4">What the compiler says of the text</h3>
          <ul className="checks-open">
            {diagnostics.map((one) => (
              <li key={`${one.start.offset} ${one.code}`}>
                {one.severity === 'error' && <TrueMark isTrue={false}>error</TrueMark>} Line {one.start.line}:{' '}
                {one.message}
              </li>
            ))}
          </ul>
        </>
      )}
    </>
  );
}

function KindOfChecks({ kind, checks }: { kind: Check['kind']; checks: readonly Check[] }) {
  if (checks.length === 0) return null;
  return (
    <>
      <h3 className="mt-4">{KINDS[kind]}</h3>
      <ul className="checks">
        {checks.map((check) => (
          <li key={`${check.title} ${check.detail}`}>
            <TrueMark isTrue={check.passed}>{check.passed ? 'agrees' : 'disagrees'}</TrueMark>
            <span>
              {check.title}
              <small>{check.detail}</small>
            </span>
          </li>
        ))}
      </ul>
    </>
  );
}

const COUNTED = [
  ['example', 'worked example', 'worked examples'],
  ['drawing', 'drawing', 'drawings'],
] as const;

/** One line for each kind, for the decision: `3 of 3 worked examples agree`. */
export function checkedForYou(page: ReviewPage): readonly { readonly words: string; readonly passed: boolean }[] {
  const { checks, document } = page;
  const passed = (kind: Check['kind']) => checks.filter((check) => check.kind === kind && check.passed).length;
  const all = (kind: Check['kind']) => checks.filter((check) => check.kind === kind).length;
  const lines = [
    { words: document === null ? 'The text does not compile' : 'The text compiles', passed: document !== null },
  ];
  if (all('dimensions') > 0) {
    const formulas = document === null ? '' : ` in ${counted(document.proof.formulas, 'formula')}`;
    const agree = passed('dimensions') === all('dimensions');
    lines.push({ words: agree ? `Dimensions agree${formulas}` : 'Dimensions do not agree', passed: agree });
  }
  for (const [kind, one, many] of COUNTED) {
    if (all(kind) === 0) continue;
    const agrees = passed(kind) === all(kind);
    const single = `The ${one} ${agrees ? 'agrees' : 'disagrees'}`;
    lines.push({ words: all(kind) === 1 ? single : `${passed(kind)} of ${all(kind)} ${many} agree`, passed: agrees });
  }
  if (all('caution') > 0) {
    const agree = passed('caution') === all('caution');
    lines.push({ words: `Hazards and cautions ${agree ? 'agree' : 'do not agree'}`, passed: agree });
  }
  return lines;
}
