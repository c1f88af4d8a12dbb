import { usePageTitle } from '../../ui/page-title.ts';
import { PageHead, Sheet } from '../../ui/sheet.tsx';

export function StartPage() {
  usePageTitle('Write a recipe');
  return (
    <Sheet>
      <PageHead title="Write a recipe" />
    </Sheet>
  );
}
