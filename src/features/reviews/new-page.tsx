import { useState } from 'react';
import { Link } from 'react-router-dom';
import type { KeptInputs } from '#api';
import type { RecipeDocument } from '#recipe';
import { ExamplesTable } from '../../document/examples-table.tsx';
import { RecipeView } from '../../document/recipe-view.tsx';
import { useCalculators } from '../../document/use-calculators.ts';
import { usesDecimalComma } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';

/** The page as readers will see it, with calculators to try. What is typed here is kept nowhere. */
export function NewPage({ document }: { document: RecipeDocument }) {
  const [texts, setTexts] = useState<KeptInputs>({});
  const calculators = useCalculators(
    document,
    texts,
    (calculator, name, text) =>
      setTexts((now) => {
        const { [name]: _old, ...others } = now[calculator] ?? {};
        return { ...now, [calculator]: text === null ? others : { ...others, [name]: text } };
      }),
    { decimalComma: usesDecimalComma() },
  );
  return (
    <div className="new-page">
      <p className="note mb-4">Try its calculators: what you type here is kept nowhere.</p>
      <RecipeView document={document} calculators={calculators} recipeLink={recipeLink} />
      <div className="prose new-page-examples">
        <h2>Worked examples</h2>
        <ExamplesTable document={document} />
      </div>
    </div>
  );
}

function recipeLink(slug: string, version: number | undefined) {
  return (
    <Link to={paths.recipe(slug, version)}>
      {slug.replaceAll('-', ' ')}
      {version !== undefined && `, version ${version}`}
    </Link>
  );
}
