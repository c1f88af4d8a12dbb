import { usePageTitle } from '../../ui/page-title.ts';
import { PageHead, Sheet } from '../../ui/sheet.tsx';

export function DesignsPage() {
  usePageTitle('My designs');
  return (
    <Sheet>
      <PageHead title="My designs" />
    </Sheet>
  );
}
