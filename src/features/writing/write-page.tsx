import { usePageTitle } from '../../ui/page-title.ts';
import { PageHead, Sheet } from '../../ui/sheet.tsx';

export function WritePage() {
  usePageTitle('Writing');
  return (
    <Sheet>
      <PageHead title="Writing" />
    </Sheet>
  );
}
