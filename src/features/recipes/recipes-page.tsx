import { usePageTitle } from '../../ui/page-title.ts';
import { PageHead, Sheet } from '../../ui/sheet.tsx';

export function RecipesPage() {
  usePageTitle('Recipes');
  return (
    <Sheet>
      <PageHead title="Recipes" />
    </Sheet>
  );
}
