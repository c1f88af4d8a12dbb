import { Link } from 'react-router-dom';
import type { DesignRow } from '#api';
import { dayText } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';
import { LimitMark, StateMark } from '../../ui/marks.tsx';
import { RegisterTable } from '../../ui/register-table.tsx';
import { visibilityWords } from './visibilities.ts';

const HEADS = [
  { label: 'Design' },
  { label: 'From recipe' },
  { label: 'Stays on' },
  { label: 'Limits, as kept' },
  { label: 'News' },
  { label: 'Kept' },
];

export function DesignRegister({ rows, showsOwner }: { rows: readonly DesignRow[]; showsOwner: boolean }) {
  return (
    <RegisterTable caption="Designs" heads={HEADS}>
      {rows.map((row) => (
        <DesignLine key={row.id} row={row} showsOwner={showsOwner} />
      ))}
    </RegisterTable>
  );
}

function DesignLine({ row, showsOwner }: { row: DesignRow; showsOwner: boolean }) {
  const { recipe } = row;
  return (
    <tr className={row.versionState === 'withdrawn' ? 'design-unsafe' : undefined}>
      <th scope="row" className="name">
        <Link to={paths.design(row.id)}>{row.name}</Link>
        {row.project !== '' && <small className="design-line-note">{row.project}</small>}
        {showsOwner ? (
          <small className="design-line-note">{row.owner.name}</small>
        ) : (
          row.visibility === 'only me' && <small className="design-line-note">{visibilityWords(row)}</small>
        )}
      </th>
      <td data-head="From recipe">
        <Link to={paths.recipe(recipe.slug, row.version)}>
          {recipe.number} {recipe.title}
        </Link>
      </td>
      <td data-head="Stays on">
        version {row.version}
        <span className="design-state">
          <StateMark state={row.versionState} />
        </span>
      </td>
      <td data-head="Limits, as kept">
        <LimitsCell row={row} />
      </td>
      <td data-head="News">
        <News row={row} />
      </td>
      <td data-head="Kept">{dayText(row.updatedAt)}</td>
    </tr>
  );
}

function LimitsCell({ row: { limitsBroken, versionState } }: { row: DesignRow }) {
  if (versionState === 'withdrawn') return <LimitMark state="exceeded">do not build</LimitMark>;
  if (limitsBroken === 0) return <LimitMark state="within">none broken</LimitMark>;
  return <LimitMark state="exceeded">{limitsBroken} broken</LimitMark>;
}

function News({ row: { version, versionState, newestVersion } }: { row: DesignRow }) {
  if (versionState === 'withdrawn') return <b className="text-red">Version {version} was withdrawn.</b>;
  if (newestVersion > version) return <b>Version {newestVersion} is newer</b>;
  return <span className="text-ink-3">up to date</span>;
}
