import { Link } from 'react-router-dom';
import type { RecipePage } from '#api';
import { WideTable } from '../../document/wide-table.tsx';
import { dayText } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';
import { StateMark } from '../../ui/marks.tsx';

/** Every version, newest first; each can be read. */
export function VersionsTable({ page: { recipe, version, versions } }: { page: RecipePage }) {
  return (
    <WideTable label="Versions">
      <table>
        <thead>
          <tr>
            <th scope="col">Version</th>
            <th scope="col">Date</th>
            <th scope="col">Written by</th>
            <th scope="col">Signed off by</th>
            <th scope="col">What changed</th>
            <th scope="col">State</th>
          </tr>
        </thead>
        <tbody>
          {versions.map((row) => (
            <tr key={row.version}>
              <th scope="row">
                {row.version === version.version ? (
                  <span aria-current="true">{row.version}, shown here</span>
                ) : (
                  <Link to={paths.recipe(recipe.slug, row.version)}>{row.version}</Link>
                )}
              </th>
              <td>{dayText(row.at)}</td>
              <td>{row.writtenBy.join(', ') || (row.supplied === null ? 'not named' : 'supplied')}</td>
              <td>{row.signedBy ?? 'not by your team'}</td>
              <td>{row.note}</td>
              <td>
                <StateMark state={row.state} />
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </WideTable>
  );
}
