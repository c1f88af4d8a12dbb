import { Link } from 'react-router-dom';
import type { RecipeRow } from '#api';
import { calendarDayText, dayText } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';
import { StateMark } from '../../ui/marks.tsx';
import { RegisterTable } from '../../ui/register-table.tsx';

const HEADS = [
  { label: 'Number', className: 'col-number' },
  { label: 'Recipe' },
  { label: 'Version', className: 'col-version' },
  { label: 'State', className: 'col-state' },
  { label: 'Signed off', className: 'col-signed' },
  { label: 'Designs', className: 'col-designs' },
] as const;

/** The recipes of one purpose as a register. */
export function RecipeRegister({ purpose, rows }: { purpose: string; rows: readonly RecipeRow[] }) {
  return (
    <RegisterTable caption={purpose} heads={HEADS}>
      {rows.map((row) => (
        <RecipeLine key={row.slug} row={row} />
      ))}
    </RegisterTable>
  );
}

function RecipeLine({ row }: { row: RecipeRow }) {
  const isWithdrawn = row.state === 'withdrawn';
  return (
    <tr>
      <td className="recipe-number" data-head="Number">
        {row.number}
      </td>
      <th scope="row" className={isWithdrawn ? 'name is-withdrawn' : 'name'}>
        <Link to={paths.recipe(row.slug)}>{row.title}</Link>
        <small className="recipe-summary">{row.summary}</small>
        {row.hazards.length > 0 && <small className="recipe-hazards">Caution: {row.hazards.join(', ')}</small>}
      </th>
      <td data-head="Version" className="recipe-version">
        {row.version}
      </td>
      <td data-head="State">
        <StateMark state={row.state} />
        <small>{dayText(row.publishedAt)}</small>
      </td>
      <td data-head="Signed off">
        {row.signedBy ?? 'not by your team'}
        <small>
          {row.reviewDue === null ? 'no review date' : `due ${calendarDayText(row.reviewDue)}`}
          {row.reviewOverdue && <b>, overdue</b>}
        </small>
      </td>
      <td data-head="Designs" className="recipe-designs">
        {row.designs}
      </td>
    </tr>
  );
}
