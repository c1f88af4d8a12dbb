import { usePageTitle } from '../../ui/page-title.ts';
import { PageHead, Sheet } from '../../ui/sheet.tsx';

export function DesignPage() {
  usePageTitle('Design');
  return (
    <Sheet>
      <PageHead title="Design" />
    </Sheet>
  );
}
