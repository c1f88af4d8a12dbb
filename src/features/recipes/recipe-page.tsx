import { useQuery } from '@tanstack/react-query';
import { Link, useParams, useSearchParams } from 'react-router-dom';
import type { KeptInputs, RecipePage as Page } from '#api';
import { browserStore } from '../../lib/browser-store.ts';
import { paths } from '../../lib/paths.ts';
import type { RequestError } from '../../lib/query-client.ts';
import { usePerson } from '../../lib/session.ts';
import { Failure, Loading } from '../../ui/blocks.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { PageHead, Sheet } from '../../ui/sheet.tsx';
import { type KeptFields, readFields } from './kept-fields.ts';
import { inputsReading, recipeReading } from './queries.ts';
import { RecipeSheet } from './recipe-sheet.tsx';
import { inputsKey, useKeptInputs } from './use-kept-inputs.ts';

export function RecipePage() {
  const { slug = '' } = useParams();
  const [search] = useSearchParams();
  const wanted = Number(search.get('version') ?? Number.NaN);
  const version = Number.isInteger(wanted) && wanted > 0 ? wanted : undefined;
  const person = usePerson();
  const page = useQuery(recipeReading(slug, version));
  const inputs = useQuery(inputsReading(slug));
  const unsent = useQuery(unsentReading(person.id, slug));
  usePageTitle(page.data ? `${page.data.recipe.number} ${page.data.document.front.title}`.trim() : null);

  if (!page.data || !inputs.data || unsent.data === undefined) {
    // A page that is there stays, also when reading it again fails.
    const failed = [page, inputs].find((one) => one.isError && one.data === undefined);
    if (failed?.error) return <NotRead error={failed.error} onAgain={() => void failed.refetch()} slug={slug} />;
    return (
      <Sheet className="pt-6">
        <Loading label="Opening the recipe" lines={6} />
      </Sheet>
    );
  }
  // One autosave for each recipe, also while its versions are read one after the other.
  return (
    <KeptRecipe
      key={slug}
      page={page.data}
      personId={person.id}
      initial={inputs.data.calculators}
      unsent={unsent.data}
    />
  );
}

interface KeptRecipeProps {
  readonly page: Page;
  readonly personId: string;
  readonly initial: KeptInputs;
  readonly unsent: KeptFields | null;
}

function KeptRecipe({ page, personId, initial, unsent }: KeptRecipeProps) {
  const { slug, title } = page.recipe;
  const kept = useKeptInputs({ personId, slug, initial, unsent, label: title });
  return <RecipeSheet key={page.version.version} page={page} kept={kept} />;
}

/** What this browser kept because no answer came: the newest there is of these fields, typed by the same person. */
function unsentReading(personId: string, slug: string) {
  return {
    queryKey: ['unsent inputs', personId, slug] as const,
    queryFn: async (): Promise<KeptFields | null> => {
      const found = await browserStore(personId).read(inputsKey(slug));
      return found ? readFields(found.payload) : null;
    },
    staleTime: Number.POSITIVE_INFINITY,
    gcTime: 0,
    refetchOnWindowFocus: false,
    refetchOnReconnect: false,
  };
}

interface NotReadProps {
  readonly error: RequestError;
  readonly onAgain: () => void;
  readonly slug: string;
}

function NotRead({ error, onAgain, slug }: NotReadProps) {
  const { failure } = error;
  const isMissing = failure.kind === 'refused' && failure.status === 404;
  const title = isMissing ? 'There is no such recipe' : 'The recipe was not read';
  usePageTitle(title);
  if (!isMissing) {
    return (
      <Sheet className="pb-4">
        <PageHead title={title} />
        <Failure lead="Not read." onAgain={onAgain}>
          {failure.message}
        </Failure>
      </Sheet>
    );
  }
  return (
    <Sheet>
      <PageHead title={title}>
        {failure.message} A recipe’s address ends in its slug; this one ends in “{slug}”.{' '}
        <Link to={paths.recipes()}>All recipes</Link>
      </PageHead>
    </Sheet>
  );
}
