import { Link } from 'react-router-dom';
import { paths } from '../lib/paths.ts';
import { usePageTitle } from '../ui/page-title.ts';
import { PageHead, Sheet } from '../ui/sheet.tsx';

export function NotFoundPage() {
  usePageTitle('No such sheet');
  return (
    <Sheet>
      <PageHead title="There is no sheet at this address">
        It may have been mistyped or put aside. <Link to={paths.recipes()}>All recipes</Link>
      </PageHead>
    </Sheet>
  );
}
