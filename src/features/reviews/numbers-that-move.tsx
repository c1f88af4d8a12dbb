import { useState } from 'react';
import type { ReviewPage } from '#api';
import type { RecipeDocument } from '#recipe';
import { Amount } from '../../document/result-rows.tsx';
import { Button } from '../../ui/button.tsx';
import { LimitMark } from '../../ui/marks.tsx';
import { designWords, exampleWords, hasExample, privateWords, withRangeSign } from './number-words.ts';

type Change = ReviewPage['numbers'][number];
type Affected = ReviewPage['designs']['seen'][number];

/** Designs that are shown at once; the rest on request. */
const SHOWN_DESIGNS = 12;

/** What happens to numbers: first in the worked examples, then in the designs that people keep. */
export function NumbersThatMove({ page }: { page: ReviewPage }) {
  const { base, document, numbers, designs, checks } = page;
  if (base === null || document === null) return null;
  const hidden = privateWords(designs);
  const headings = { before: `in version ${base.version}`, after: 'in review' };
  return (
    <>
      <p className="note mb-3">
        {exampleWords(numbers, base.document, document)} {designWords(designs)}
      </p>
      {numbers.length > 0 && (
        <table className="moves">
          <caption className="sr-only">Numbers of worked examples that move</caption>
          <MoveHeads first="Worked example" {...headings} last="What that means" />
          {groupedByResult(numbers).map(([label, rows]) => (
            <tbody key={label}>
              <GroupHead>{label}</GroupHead>
              {rows.map((row) => (
                <tr key={`${row.calculator} ${row.example}`}>
                  <th scope="row">{row.example}</th>
                  <Before value={row.before} />
                  <After value={row.after} />
                  <td>{meaningOf(row, base.document, checks)}</td>
                </tr>
              ))}
            </tbody>
          ))}
        </table>
      )}
      <DesignMoves designs={designs.seen} />
      {hidden !== null && (
        <p className={designs.privateNewlyBroken > 0 ? 'moves-private moves-broken' : 'moves-private'}>
          {designs.privateNewlyBroken > 0 && <LimitMark state="exceeded">newly broken</LimitMark>} {hidden}
        </p>
      )}
    </>
  );
}

function DesignMoves({ designs }: { designs: readonly Affected[] }) {
  const [showsAll, setShowsAll] = useState(false);
  if (designs.length === 0) return null;
  const sorted = [...designs].sort((a, b) => Number(isBroken(b)) - Number(isBroken(a)));
  const shown = showsAll ? sorted : sorted.slice(0, SHOWN_DESIGNS);
  const more = designs.length - shown.length;
  return (
    <table className="moves">
      <caption className="sr-only">Numbers of kept designs that would move</caption>
      <MoveHeads first="Design, with its own inputs" before="on its version" after="in review" last="What that means" />
      {shown.map((design) => (
        <tbody key={design.id}>
          <GroupHead>
            {design.name} <small>{design.owner.name}</small>
          </GroupHead>
          {design.changes.map((change) => (
            <tr key={`${change.label} ${change.before}`} className={change.newlyBroken ? 'moves-broken' : undefined}>
              <th scope="row">{change.label}</th>
              <Before value={change.before} />
              <After value={change.after} />
              <td>{change.newlyBroken && <LimitMark state="exceeded">newly broken</LimitMark>}</td>
            </tr>
          ))}
        </tbody>
      ))}
      {more > 0 && (
        <tbody>
          <tr>
            <td colSpan={4}>
              <Button kind="text" onClick={() => setShowsAll(true)}>
                Show {more} more {more === 1 ? 'design' : 'designs'}
              </Button>
            </td>
          </tr>
        </tbody>
      )}
    </table>
  );
}

function MoveHeads({ first, before, after, last }: Record<'first' | 'before' | 'after' | 'last', string>) {
  return (
    <thead>
      <tr>
        <th scope="col">{first}</th>
        <th scope="col" className="moves-number">
          {before}
        </th>
        <th scope="col" className="moves-number">
          {after}
        </th>
        <th scope="col">{last}</th>
      </tr>
    </thead>
  );
}

function GroupHead({ children }: { children: React.ReactNode }) {
  return (
    <tr className="moves-group">
      <th scope="rowgroup" colSpan={4}>
        {children}
      </th>
    </tr>
  );
}

function Before({ value }: { value: string | null }) {
  return (
    <td className="moves-number moves-old" data-head="before">
      {value === null ? 'not there' : <Amount text={withRangeSign(value)} />}
    </td>
  );
}

function After({ value }: { value: string | null }) {
  return (
    <td className="moves-number" data-head="after">
      {value === null ? 'not there' : <Amount text={withRangeSign(value)} />}
    </td>
  );
}

function meaningOf(row: Change, before: RecipeDocument, checks: ReviewPage['checks']): string {
  if (row.before === null) return 'new';
  if (row.after === null) return 'no longer there';
  const check = checks.find((one) => one.kind === 'example' && one.title === row.example);
  if (check === undefined) return hasExample(before, row) ? 'an example of the old version only' : '';
  return check.passed ? 'the example agrees with the text in review' : 'the example disagrees';
}

function isBroken(design: Affected): boolean {
  return design.changes.some((change) => change.newlyBroken);
}

function groupedByResult(numbers: readonly Change[]): readonly (readonly [string, readonly Change[]])[] {
  const groups = new Map<string, Change[]>();
  for (const change of numbers) {
    const group = groups.get(change.label);
    if (group) group.push(change);
    else groups.set(change.label, [change]);
  }
  return [...groups];
}
