import { usePageTitle } from '../../ui/page-title.ts';
import { PageHead, Sheet } from '../../ui/sheet.tsx';

export function RecipePage() {
  usePageTitle('Recipe');
  return (
    <Sheet>
      <PageHead title="Recipe" />
    </Sheet>
  );
}
