import { lazy, Suspense, useState } from 'react';
import { Link, useNavigate } from 'react-router-dom';
import type { RecipePage } from '#api';
import { paths } from '../../lib/paths.ts';
import { useMay } from '../../lib/session.ts';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Button } from '../../ui/button.tsx';

const SignOffDialog = lazy(async () => ({ default: (await import('./sign-off-dialog.tsx')).SignOffDialog }));

/** What may be done with a recipe beside using it. */
export function RecipeActs({ page }: { page: RecipePage }) {
  const mayWrite = useMay('write drafts');
  const maySign = useMay('decide reviews');
  const { recipe, version } = page;
  const isPublished = version.state === 'published';
  const isUnsigned = version.supplied !== null && version.signedBy === null;
  if (!mayWrite) return null;
  return (
    <div className="recipe-acts mt-3 flex flex-wrap items-start gap-x-6 gap-y-2">
      <ChangeAct page={page} />
      <Link to={paths.startFrom(recipe.slug)}>Start another from this</Link>
      {maySign && isPublished && isUnsigned && <SignOffAct page={page} />}
    </div>
  );
}

function ChangeAct({ page: { recipe, draft } }: { page: RecipePage }) {
  const navigate = useNavigate();
  const { act, isActing } = useAct('drafts.start', ['drafts.list', 'recipes.read']);
  const [refused, setRefused] = useState<string | null>(null);
  if (draft !== null) {
    return <Link to={paths.write(draft.id)}>{draft.mine ? 'Go on with the change' : 'See the change under way'}</Link>;
  }
  const start = async () => {
    setRefused(null);
    const started = await act({ body: { changes: recipe.slug } });
    if (started.ok) {
      await navigate(paths.write(started.value.id));
      return;
    }
    setRefused(started.error.message);
    announce(`Not started. ${started.error.message}`, 'assertive');
  };
  return (
    <span>
      <Button kind="text" isActing={isActing} onClick={() => void start()}>
        {isActing ? 'Starting a change' : 'Change this recipe'}
      </Button>
      {refused !== null && <span className="field-error block">Not started. {refused}</span>}
    </span>
  );
}

function SignOffAct({ page }: { page: RecipePage }) {
  const [isOpen, setOpen] = useState(false);
  return (
    <>
      <Button kind="text" onClick={() => setOpen(true)}>
        Sign off as it stands
      </Button>
      {isOpen && (
        <Suspense fallback={null}>
          <SignOffDialog page={page} onClose={() => setOpen(false)} />
        </Suspense>
      )}
    </>
  );
}
