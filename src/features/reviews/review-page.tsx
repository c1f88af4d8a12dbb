import { usePageTitle } from '../../ui/page-title.ts';
import { PageHead, Sheet } from '../../ui/sheet.tsx';

export function ReviewPage() {
  usePageTitle('Review');
  return (
    <Sheet>
      <PageHead title="Review" />
    </Sheet>
  );
}
