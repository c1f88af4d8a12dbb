import { lazy, Suspense, useCallback, useState } from 'react';
import { Link } from 'react-router-dom';
import type { RecipePage } from '#api';
import { CalculatorBar } from '../../document/calculator-bar.tsx';
import { CalculatorPanel } from '../../document/calculator-panel.tsx';
import { AddedHeading, ContentsList } from '../../document/contents-list.tsx';
import { ExamplesTable } from '../../document/examples-table.tsx';
import { RecipeView } from '../../document/recipe-view.tsx';
import { shownResults, typedInputs } from '../../document/shown-results.ts';
import { type CalculatorsState, useCalculators } from '../../document/use-calculators.ts';
import { usesDecimalComma } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';
import { Button } from '../../ui/button.tsx';
import { SaveLine } from '../../ui/save-line.tsx';
import { MarginNote, Sheet } from '../../ui/sheet.tsx';
import { KeptNews } from './kept-news.tsx';
import { proofWords } from './proof-words.ts';
import { RecipeLink } from './recipe-link.tsx';
import { RecipeTitleBlock } from './recipe-title-block.tsx';
import type { KeptInputsState } from './use-kept-inputs.ts';
import { VersionsTable } from './versions-table.tsx';
import './recipes.css';

const KeepDesignDialog = lazy(async () => ({ default: (await import('./keep-design-dialog.tsx')).KeepDesignDialog }));

const ADDED = [
  { id: 'worked-examples', text: 'Worked examples' },
  { id: 'sources', text: 'Sources' },
  { id: 'versions', text: 'Versions' },
] as const;

/** One version of a recipe: title block, page, and the calculators that stay in view. */
export function RecipeSheet({ page, kept }: { page: RecipePage; kept: KeptInputsState }) {
  const { recipe, version, document } = page;
  const calculators = useCalculators(document, kept.texts, kept.onText, { decimalComma: usesDecimalComma() });
  const recipeLink = useCallback(
    (slug: string, wanted: number | undefined) => <RecipeLink slug={slug} version={wanted} />,
    [],
  );
  const sources = Object.values(document.front.sources);
  const added = ADDED.filter((one) => one.id !== 'sources' || sources.length > 0);
  const heading = (id: (typeof ADDED)[number]['id']) => {
    const at = added.findIndex((one) => one.id === id);
    return <AddedHeading document={document} at={at + 1} id={id} text={added[at]?.text ?? ''} />;
  };
  const [first] = calculators.list;
  const isTouched = kept.standing.kind !== 'kept' || calculators.list.some((state) => state.typedOver > 0);
  return (
    <div className="recipe-page">
      <Sheet
        className="pt-6"
        margin={
          <MarginNote label={recipe.purpose === '' ? 'Recipe' : sentence(recipe.purpose)}>
            <Link to={paths.recipes()}>All recipes</Link>
          </MarginNote>
        }
      >
        <VersionBanner page={page} />
        <RecipeTitleBlock page={page} />
      </Sheet>
      <div className="recipe-body">
        <div className="recipe-margin">
          <ContentsList document={document} more={added} />
        </div>
        <div className="recipe-read">
          <RecipeView document={document} calculators={calculators} panels="beside" recipeLink={recipeLink} />
          <div className="prose recipe-added">
            {heading('worked-examples')}
            <ExamplesTable document={document} />
            <ul className="proof-words note">
              {proofWords(document).map((words) => (
                <li key={words}>{words}</li>
              ))}
            </ul>
            {sources.length > 0 && (
              <>
                {heading('sources')}
                <ul>
                  {sources.map((source) => (
                    <li key={source}>{source}</li>
                  ))}
                </ul>
              </>
            )}
            {heading('versions')}
            <VersionsTable page={page} />
          </div>
        </div>
        <aside className="recipe-bench" aria-label="Calculators">
          <div className="recipe-bench-fixed">
            {calculators.list.map((state, i) => (
              <CalculatorPanel
                key={state.id}
                calculators={calculators}
                id={state.id}
                heading={`${recipe.number} ${document.front.title}, version ${version.version}`}
                standing={i === 0 && isTouched ? <SaveLine standing={kept.standing} /> : undefined}
                actions={i === 0 ? <KeepAct page={page} calculators={calculators} /> : undefined}
              />
            ))}
            <KeptNews kept={kept} calculators={calculators} />
          </div>
        </aside>
      </div>
      {first && <CalculatorBar state={first} />}
    </div>
  );
}

function VersionBanner({ page: { recipe, version } }: { page: RecipePage }) {
  if (version.version === recipe.version) return null;
  return (
    <p role="note" className="mb-4 border-ink border-y bg-wash px-4 py-2">
      <b>This is version {version.version}.</b> Version {recipe.version} is {recipe.state}.{' '}
      <Link to={paths.recipe(recipe.slug)}>Open version {recipe.version}</Link>
    </p>
  );
}

function KeepAct({ page, calculators }: { page: RecipePage; calculators: CalculatorsState }) {
  const [isOpen, setOpen] = useState(false);
  const refused = calculators.list.flatMap((state) => state.inputs.refused);
  return (
    <>
      <Button
        kind="main"
        cannot={refused.length === 0 ? undefined : `A field needs a change first: ${refused.join(', ')}.`}
        onClick={() => setOpen(true)}
      >
        Keep as a design
      </Button>
      {isOpen && (
        <Suspense fallback={null}>
          <KeepDesignDialog
            page={page}
            inputs={typedInputs(calculators)}
            shown={shownResults(calculators)}
            onClose={() => setOpen(false)}
          />
        </Suspense>
      )}
    </>
  );
}

function sentence(words: string): string {
  return words.charAt(0).toUpperCase() + words.slice(1);
}
