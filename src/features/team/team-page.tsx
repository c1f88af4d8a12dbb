import { usePageTitle } from '../../ui/page-title.ts';
import { PageHead, Sheet } from '../../ui/sheet.tsx';

export function TeamPage() {
  usePageTitle('Team');
  return (
    <Sheet>
      <PageHead title="Team" />
    </Sheet>
  );
}
