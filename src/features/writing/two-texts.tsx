import { type ChangeObject, diffWordsWithSpace } from 'diff';
import type { ReactNode } from 'react';
import type { TextRow } from './text-rows.ts';

export interface TwoTextsProps {
  readonly rows: readonly TextRow[];
  readonly left: string;
  readonly right: string;
  /** Drawn under each difference, by its index among the rows. */
  readonly choice?: (index: number) => ReactNode;
}

/** Lines of an equal run that stay visible at its ends. */
const SHOWN = 2;

/** Two texts side by side, on a phone one under the other. What differs is marked by words for who cannot see it. */
export function TwoTexts({ rows, left, right, choice }: TwoTextsProps) {
  return (
    <div className="two-texts">
      <p className="two-head">{left}</p>
      <p className="two-head">{right}</p>
      {rows.map((row, index) =>
        row.kind === 'same' ? (
          // biome-ignore lint/suspicious/noArrayIndexKey: rows are made anew with their texts and have no other name
          <SameLines key={index} text={row.text} />
        ) : (
          // biome-ignore lint/suspicious/noArrayIndexKey: as above
          <Difference key={index} row={row} left={left} right={right}>
            {choice?.(index)}
          </Difference>
        ),
      )}
    </div>
  );
}

function SameLines({ text }: { text: string }) {
  const lines = text.replace(/\n$/, '').split('\n');
  const hidden = lines.length - 2 * SHOWN;
  const shown =
    hidden > 1
      ? [...lines.slice(0, SHOWN), `… ${hidden} equal lines`, ...lines.slice(-SHOWN)].join('\n')
      : lines.join('\n');
  return <pre className="two-same">{shown}</pre>;
}

interface DifferenceProps {
  readonly row: TextRow & { readonly kind: 'differs' };
  readonly left: string;
  readonly right: string;
  readonly children: ReactNode;
}

function Difference({ row, left, right, children }: DifferenceProps) {
  const words = diffWordsWithSpace(row.left, row.right, { timeout: 200 }) ?? [];
  const isSplit = row.left !== '' && row.right !== '' && words.length > 0;
  return (
    <>
      <pre className="two-left">
        <span className="two-label">{left}: </span>
        {row.left === '' ? <span className="two-none">no line here</span> : null}
        {isSplit ? <Words parts={words.filter((part) => !part.added)} /> : row.left}
      </pre>
      <pre className="two-right">
        <span className="two-label">{right}: </span>
        {row.right === '' ? <span className="two-none">no line here</span> : null}
        {isSplit ? <Words parts={words.filter((part) => !part.removed)} /> : row.right}
      </pre>
      {children !== undefined && <div className="two-choice">{children}</div>}
    </>
  );
}

function Words({ parts }: { parts: readonly ChangeObject<string>[] }) {
  let offset = 0;
  return parts.map((part) => {
    const key = offset;
    offset += part.value.length;
    if (part.removed) return <del key={key}>{part.value}</del>;
    return part.added ? <ins key={key}>{part.value}</ins> : <span key={key}>{part.value}</span>;
  });
}
