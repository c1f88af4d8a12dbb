import { usePageTitle } from '../../ui/page-title.ts';
import { PageHead, Sheet } from '../../ui/sheet.tsx';

export function ReviewsPage() {
  usePageTitle('Reviews');
  return (
    <Sheet>
      <PageHead title="Reviews" />
    </Sheet>
  );
}
